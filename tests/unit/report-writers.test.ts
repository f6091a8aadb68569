import ts from 'typescript'
import { describe, expect, it } from 'vitest'
import { parse, projectFiles } from './source-imports'

/*
 * Reliability pages read stored counts: whoever writes to reports, check-ins or failures does so inside `withCounts`, or the counts would not be
 * read any more until they are rebuilt (triggers see to that). The seed, which fills an empty database, counts every board at its end.
 */
const tables = ['install_reports', 'check_ins', 'failures']
const sources = projectFiles()
  .filter((file) => /\.(ts|tsx)$/.test(file) && /^(app|db)\//.test(file) && !/\.test\.tsx?$/.test(file))
  .filter((file) => !file.startsWith('db/migrations/') && !file.endsWith('.d.ts'))
  .map(parse)

const writing = ['insertInto', 'replaceInto', 'updateTable', 'deleteFrom', 'mergeInto']
const rawWrite = new RegExp(
  `\\b(insert(\\s+or\\s+\\w+)?\\s+into|replace\\s+into|update|delete\\s+from)\\s+["\`]?(main\\.)?(${tables.join('|')})\\b`,
  'i'
)

function each(source: ts.SourceFile, tell: (node: ts.Node) => void): void {
  const visit = (node: ts.Node): void => {
    tell(node)
    ts.forEachChild(node, visit)
  }
  visit(source)
}

/** The name of the top-level function or constant that a node lies in. */
function nameOf(node: ts.Node): string {
  let top = node
  while (!ts.isSourceFile(top.parent)) top = top.parent
  if (ts.isFunctionDeclaration(top)) return top.name!.text
  if (ts.isVariableStatement(top)) return top.declarationList.declarations[0]!.name.getText()
  return '(top level)'
}

type Place = { file: string; name: string }
/** Functions that write to one of the tables, and those that write to a table that only their caller knows. */
function writersIn(files: readonly ts.SourceFile[]): { writers: Place[]; open: Place[] } {
  const writers: Place[] = []
  const open: Place[] = []
  for (const source of files)
    each(source, (node) => {
      const place = () => ({ file: source.fileName, name: nameOf(node) })
      if (
        ts.isCallExpression(node) &&
        ts.isPropertyAccessExpression(node.expression) &&
        writing.includes(node.expression.name.text)
      ) {
        const table = node.arguments[0]
        if (table === undefined) return
        if (!ts.isStringLiteralLike(table)) open.push(place())
        else if (tables.includes(table.text.split(' ')[0]!)) writers.push(place())
      }
      if ((ts.isStringLiteralLike(node) || ts.isTemplateExpression(node)) && rawWrite.test(node.getText())) writers.push(place())
    })
  return { writers, open }
}

/** Whether a node lies in what `withCounts` is given to do. */
function isInside(node: ts.Node): boolean {
  for (let at = node; at.parent !== undefined; at = at.parent)
    if (
      ts.isCallExpression(at.parent) &&
      at.parent.expression.getText().split('.').at(-1) === 'withCounts' &&
      at.parent.arguments[2] === at
    )
      return true
  return false
}

/** Every use of a writer outside its own file's declarations that does not lie inside `withCounts`. */
function strays(files: readonly ts.SourceFile[], names: ReadonlySet<string>): string[] {
  const found: string[] = []
  for (const source of files)
    each(source, (node) => {
      if (!ts.isIdentifier(node) || !names.has(node.text) || isInside(node)) return
      const isDeclared = ts.isVariableDeclaration(node.parent) || ts.isFunctionDeclaration(node.parent)
      const isImported = ts.isImportSpecifier(node.parent)
      if (!isDeclared && !isImported)
        found.push(`${source.fileName}:${source.getLineAndCharacterOfPosition(node.getStart()).line + 1} ${node.text}`)
    })
  return found
}

describe('writers of reports', () => {
  const { writers, open } = writersIn(sources)

  it('are functions of the reports repository', () => {
    expect(new Set(writers.map(({ file }) => file))).toEqual(new Set(['app/domain/reports/reports.repo.server.ts']))
    expect(new Set(writers.map(({ name }) => name))).toEqual(
      new Set(['insertReport', 'insertCheckIn', 'insertFailure', 'markExcluded'])
    )
  })

  it('are only used inside withCounts', () => {
    expect(strays(sources, new Set(writers.map(({ name }) => name)))).toEqual([])
  })

  it('of whatever table they are given write the record of a release, or serve the seed, which counts all boards afterwards', () => {
    expect(new Set(open.map(({ file, name }) => `${file} ${name}`))).toEqual(
      new Set([
        'app/domain/releases/record.repo.server.ts replaceRecord',
        'app/domain/releases/record.repo.server.ts insertAll',
        'db/seed/insert-rows.ts insertRows'
      ])
    )
    const users = sources.filter((source) => /\/insert-rows'/.test(source.text)).map((source) => source.fileName)
    expect(users).toEqual(['db/seed/seed.ts'])
    expect(sources.find(({ fileName }) => fileName === 'db/seed/seed.ts')!.text).toContain('await recountBoard(tx, id)')
  })

  it('are found where there are some', () => {
    const text = `
      export const insertReport = (db) => db.insertInto('install_reports').values({})
      export const mend = (db) => sql\`update install_reports set notes = ''\`.execute(db)
      export const any = (db, table) => db.deleteFrom(table)
      const good = (tx) => withCounts(tx, 'r', () => repo.insertReport(tx))
      const bad = (tx) => withCounts(tx, repo.insertReport(tx), () => null)
      const worse = { insert: insertReport }`
    const file = ts.createSourceFile('new.ts', text, ts.ScriptTarget.Latest, true)
    expect(writersIn([file])).toEqual({
      writers: [
        { file: 'new.ts', name: 'insertReport' },
        { file: 'new.ts', name: 'mend' }
      ],
      open: [{ file: 'new.ts', name: 'any' }]
    })
    expect(strays([file], new Set(['insertReport']))).toEqual(['new.ts:6 insertReport', 'new.ts:7 insertReport'])
  })
})
