import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { beforeAll, describe, expect, it } from 'vitest'
import { demoFiles, filesOf, zipOf } from '../../../tests/factories/demo-bundle'
import { edit, type Files } from '../../../tests/factories/defect'
import type { BundleCheck } from './bundle-check.types'
import { checkBundle } from './check-bundle.server'
import type { FindingCode } from './finding-codes'

const read = (path: string) => readFileSync(fileURLToPath(new URL(`../../../${path}`, import.meta.url)))

/** Two demo bundles and two real boards of other tools, whose fixtures' licences stand beside them. */
const bundles = [
  'db/seed/bundles/almanac-1.0.1.zip',
  'db/seed/bundles/buttress-1.1.0.zip',
  'tests/fixtures/bundles/OC21-fx-usbadapter.zip',
  'tests/fixtures/bundles/OC31-pcbrnd-step6.zip'
]

type Base = { files: Files; check: BundleCheck; of: (fn: RegExp, side?: string) => string[] }

const scaled = (files: Files, paths: string[], by: (value: number) => number) => {
  for (const path of paths) {
    const moved = files
      .get(path)!
      .toString('latin1')
      .replace(/(?<=[XY])-?\d+\.\d+/g, (value) => by(Number(value)).toFixed(5))
    files.set(path, Buffer.from(moved, 'latin1'))
  }
}

/** Each changes the files it finds in any bundle, or returns false where it finds none. */
const mutations: [name: string, code: FindingCode, change: (files: Files, base: Base) => unknown][] = [
  [
    'the last stroke of the outline gone',
    'outline-open',
    (files, { of }) =>
      of(/^outline$/).length === 1 && edit(files, of(/^outline$/)[0]!, (c) => c.replace(/([\s\S]*\n)[^\n]*D0?1\*/, '$1'))
  ],
  [
    'every drill file in the other unit',
    'drill-units',
    (files, { of }) => {
      const paths = of(/^drill/).filter((path) => /^(METRIC|INCH)/m.test(files.get(path)!.toString('latin1')))
      for (const path of paths) {
        const isMetric = /^METRIC/m.test(files.get(path)!.toString('latin1'))
        edit(files, path, (c) => (isMetric ? c.replace(/METRIC/g, 'INCH') : c.replace(/INCH/g, 'METRIC')))
      }
      return paths.length > 0
    }
  ],
  [
    'every drill file moved by more than the board',
    'drill-misaligned',
    (files, { of, check }) => {
      const paths = of(/^drill/).filter((path) => /^X-?\d+\.\d/m.test(files.get(path)!.toString('latin1')))
      scaled(files, paths, (value) => value + 1.25 * check.facts.width!)
      return paths.length > 0
    }
  ],
  [
    'the bottom copper of another board with its own number',
    'layer-misaligned',
    (files, { of, check }) => {
      // L4 of 4 where there are two layers, L2 of 2 where there are more.
      return files.set(of(/^copper$/, 'bottom')[0]!, check.facts.copperLayers === 2 ? foreign.four : foreign.two)
    }
  ],
  [
    'strokes of almost five metres',
    'layer-misaligned',
    (files, { of }) => {
      const strokes = Array.from({ length: 200 }, (_, i) => {
        const [x, y] = [Math.round(4.9e9 * Math.cos(i)), Math.round(4.9e9 * Math.sin(i))]
        return `X${-x}Y${-y}D02*\nX${x}Y${y}D01*\n`
      })
      const head = '%FSLAX46Y46*%\n%MOMM*%\n%TF.FileFunction,Copper,L1,Top*%\n%LPD*%\nG01*\n%ADD10C,0.1*%\nD10*\n'
      return files.set(of(/^copper$/, 'top')[0]!, Buffer.from(`${head}${strokes.join('')}M02*\n`))
    }
  ]
]

const foreign: { two: Buffer; four: Buffer } = { two: Buffer.alloc(0), four: Buffer.alloc(0) }

beforeAll(async () => {
  foreign.two = (await demoFiles('sundial-1.2.0')).get('gerber/sundial-B_Cu.gbr')!
  foreign.four = (await demoFiles('buttress-1.1.0')).get('gerber/buttress-B_Cu.gbr')!
})

describe.each(bundles)('%s', (path) => {
  let base: Base
  let clean: Set<string>

  beforeAll(async () => {
    const files = await filesOf(read(path))
    const { check } = await checkBundle(await zipOf(files))
    const of = (fn: RegExp, side?: string) =>
      check.layers.filter((l) => fn.test(l.function) && (!side || l.side === side) && files.has(l.file)).map((l) => l.file)
    base = { files, check, of }
    clean = new Set(check.findings.filter((f) => f.severity === 'stop').map((f) => f.code))
  })

  it.for(mutations)('%s', async ([, code, change], { skip }) => {
    const files = new Map(base.files)
    if (change(files, base) === false) return skip('nothing of the kind in this bundle')
    const { check } = await checkBundle(await zipOf(files))
    const stops = new Set(check.findings.filter((f) => f.severity === 'stop').map((f) => f.code))
    expect([...stops].filter((stop) => !clean.has(stop))).toEqual([code])
  })
})
