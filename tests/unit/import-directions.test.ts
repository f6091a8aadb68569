import { describe, expect, it } from 'vitest'
import ts from 'typescript'
import { importsOf, parse, projectFiles, rings, type Import } from './source-imports'

/* Holds the table "Layout" of DEVELOPERS.md. A test file may import what it likes, and nothing imports a test file. */

type Layer =
  | 'frame'
  | 'routes'
  | 'repo'
  | 'use-case'
  | 'pure'
  | 'server'
  | 'components'
  | 'lib'
  | 'cli'
  | 'db'
  | 'seed-start'
  | 'storage-fake'
  | 'tests'
  | 'config'

/** The two files that wire the demo world to the rest of Fettle; the others in db/seed are data and pure functions. */
const seedStart = ['db/seed/seed.ts', 'db/seed/main.ts']

const isTest = (file: string) => /\.test\.tsx?$/.test(file) || file.startsWith('tests/')

function layerOf(file: string): Layer {
  if (isTest(file)) return 'tests'
  if (seedStart.includes(file)) return 'seed-start'
  if (file.startsWith('app/routes/')) return 'routes'
  if (file.startsWith('app/domain/')) {
    if (/\.repo\.server\.ts$/.test(file)) return 'repo'
    // A child process or a worker begins in a file of its own, named by what it is.
    return /(\.server|-child|-worker)\.tsx?$/.test(file) ? 'use-case' : 'pure'
  }
  for (const folder of ['server', 'components', 'lib', 'cli'] as const) if (file.startsWith(`app/${folder}/`)) return folder
  if (file.startsWith('db/')) return 'db'
  if (file.startsWith('storage-fake/')) return 'storage-fake'
  return file.startsWith('app/') ? 'frame' : 'config'
}

const all: Layer[] = [
  'frame',
  'routes',
  'repo',
  'use-case',
  'pure',
  'server',
  'components',
  'lib',
  'cli',
  'db',
  'seed-start',
  'storage-fake'
]

/** What each layer may import from the project; `types` in addition where the compiler erases the import. */
const allowed: Record<Layer, { values: Layer[]; types?: Layer[] }> = {
  frame: { values: ['components', 'server', 'use-case', 'pure', 'lib'] },
  routes: { values: ['use-case', 'pure', 'components', 'server', 'lib', 'routes'], types: ['frame'] },
  'use-case': { values: ['repo', 'use-case', 'pure', 'server', 'lib', 'db'] },
  repo: { values: ['repo', 'pure', 'lib', 'db'], types: ['use-case'] },
  pure: { values: ['pure', 'lib'] },
  server: { values: ['server', 'use-case', 'pure', 'lib', 'db'] },
  components: { values: ['components', 'pure', 'lib'] },
  lib: { values: ['lib'] },
  cli: { values: ['cli', 'use-case', 'pure', 'lib'] },
  db: { values: ['db', 'pure', 'lib'] },
  'seed-start': { values: ['db', 'use-case', 'pure', 'server', 'lib', 'seed-start'] },
  'storage-fake': { values: ['storage-fake'] },
  tests: { values: [...all, 'tests', 'config'] },
  config: { values: [] }
}

const sources = projectFiles().filter(
  (file) => /\.(ts|tsx)$/.test(file) && !file.endsWith('.d.ts') && !file.startsWith('tests/fixtures/')
)
const parsed = new Map(sources.map((file) => [file, parse(file)]))
const imports = [...parsed.values()].flatMap(importsOf)
const places = (list: Import[]) => list.map((i) => `${i.from}:${i.line} imports ${i.specifier}`)

const area = (file: string) => file.split('/')[2]

describe('the import directions', () => {
  it('reads the sources it is about', () => {
    expect(sources.length).toBeGreaterThan(50)
    expect(imports.filter((i) => i.to !== null).length).toBeGreaterThan(100)
  })

  it('go one way', () => {
    const wrong = imports.filter(({ from, to, isTypeOnly }) => {
      if (to === null || !sources.includes(to)) return false
      const { values, types = [] } = allowed[layerOf(from)]
      return !(isTypeOnly ? [...values, ...types] : values).includes(layerOf(to))
    })
    expect(places(wrong)).toEqual([])
  })

  it('reach another area through its use cases and pure modules, not its SQL', () => {
    const wrong = imports.filter(
      ({ from, to }) =>
        to !== null && layerOf(to) === 'repo' && ['repo', 'use-case'].includes(layerOf(from)) && area(from) !== area(to)
    )
    expect(places(wrong)).toEqual([])
  })

  it('have no rings', () => {
    const edges = new Map<string, string[]>(sources.map((file) => [file, []]))
    for (const { from, to, isTypeOnly } of imports) if (to !== null && !isTypeOnly && edges.has(to)) edges.get(from)!.push(to)
    expect(rings(edges)).toEqual([])
  })

  it('find a ring where there is one', () => {
    const edges = new Map([
      ['a', ['b']],
      ['b', ['c']],
      ['c', ['a', 'd']],
      ['d', []],
      ['e', ['e']]
    ])
    expect(rings(edges)).toEqual([['a', 'b', 'c'], ['e']])
  })

  it('keep Kysely to the repositories and db/', () => {
    const wrong = imports.filter(
      ({ from, specifier, isTypeOnly }) =>
        !isTypeOnly && specifier === 'kysely' && !['repo', 'db', 'seed-start', 'tests'].includes(layerOf(from))
    )
    expect(places(wrong)).toEqual([])
  })

  it('keep React, Node and the outside out of the pure modules', () => {
    const outside = /^(node:|react($|[-/])|@react-router\/|express$|better-sqlite3$|kysely$|@aws-sdk\/|resend$)/
    const wrong = imports.filter(
      ({ from, specifier, isTypeOnly }) => !isTypeOnly && ['pure'].includes(layerOf(from)) && outside.test(specifier)
    )
    expect(places(wrong)).toEqual([])
  })

  it('keep the clock, the environment and chance out of the pure modules', () => {
    const wrong: string[] = []
    for (const [file, source] of parsed) {
      if (layerOf(file) !== 'pure') continue
      const visit = (node: ts.Node): void => {
        const text = ts.isPropertyAccessExpression(node) ? node.getText() : ''
        const isNow = ts.isNewExpression(node) && node.expression.getText() === 'Date' && (node.arguments?.length ?? 0) === 0
        if (isNow || ['Date.now', 'performance.now', 'process.env', 'Math.random'].includes(text))
          wrong.push(`${file}:${source.getLineAndCharacterOfPosition(node.getStart()).line + 1} ${node.getText()}`)
        ts.forEachChild(node, visit)
      }
      visit(source)
    }
    expect(wrong).toEqual([])
  })

  it('leave nothing test-like among the routes, and no test imported by the product', () => {
    expect(sources.filter((file) => file.startsWith('app/routes/') && isTest(file))).toEqual([])
    const wrong = imports.filter(({ from, to }) => to !== null && isTest(to) && !isTest(from))
    expect(places(wrong)).toEqual([])
  })
})
