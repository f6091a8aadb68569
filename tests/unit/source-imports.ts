import { execFileSync } from 'node:child_process'
import { existsSync, readFileSync, statSync } from 'node:fs'
import { dirname, join, normalize } from 'node:path'
import ts from 'typescript'

export type Import = {
  /** File that imports, from the project's root, with forward slashes. */
  from: string
  line: number
  /** What is written between the quotes. */
  specifier: string
  /** The project's file it means; null for packages, Node's own modules and virtual ones. */
  to: string | null
  /** Erased by the compiler: nothing of the module is needed when the program runs. */
  isTypeOnly: boolean
}

/** Every file that git tracks or would track, as paths from the project's root. */
export function projectFiles(): string[] {
  const out = execFileSync('git', ['ls-files', '-z', '--cached', '--others', '--exclude-standard'], { encoding: 'utf8' })
  return [...new Set(out.split('\0'))].filter((file) => file !== '' && existsSync(file)).sort()
}

const isFile = (path: string) => existsSync(path) && statSync(path).isFile()

function resolve(from: string, specifier: string): string | null {
  const bare = specifier.replace(/\?.*$/, '')
  let base: string
  if (bare.startsWith('~/')) base = join('app', bare.slice(2))
  else if (bare.startsWith('~db/')) base = join('db', bare.slice(4))
  else if (bare.startsWith('.')) base = normalize(join(dirname(from), bare))
  else return null
  if (base.includes('/+types/')) return null
  const found = [base, `${base}.ts`, `${base}.tsx`, `${base}/index.ts`].find(isFile)
  if (found === undefined) throw new Error(`${from} imports ${specifier}, which is no file of the project`)
  return found
}

const onlyTypes = (clause: ts.ImportClause | undefined) =>
  clause !== undefined &&
  (clause.isTypeOnly ||
    (clause.name === undefined &&
      clause.namedBindings !== undefined &&
      ts.isNamedImports(clause.namedBindings) &&
      clause.namedBindings.elements.length > 0 &&
      clause.namedBindings.elements.every((element) => element.isTypeOnly)))

export function parse(file: string): ts.SourceFile {
  const kind = file.endsWith('x') ? ts.ScriptKind.TSX : ts.ScriptKind.TS
  return ts.createSourceFile(file, readFileSync(file, 'utf8'), ts.ScriptTarget.Latest, true, kind)
}

/** Every import of a source file: static, re-exported and dynamic. */
export function importsOf(source: ts.SourceFile): Import[] {
  const found: Import[] = []
  const add = (node: ts.Node, literal: ts.Node | undefined, isTypeOnly: boolean) => {
    if (!literal || !ts.isStringLiteralLike(literal)) return
    const { line } = source.getLineAndCharacterOfPosition(node.getStart())
    const specifier = literal.text
    found.push({ from: source.fileName, line: line + 1, specifier, to: resolve(source.fileName, specifier), isTypeOnly })
  }
  const visit = (node: ts.Node): void => {
    if (ts.isImportDeclaration(node)) add(node, node.moduleSpecifier, onlyTypes(node.importClause))
    else if (ts.isExportDeclaration(node) && node.moduleSpecifier) add(node, node.moduleSpecifier, node.isTypeOnly)
    else if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword)
      add(node, node.arguments[0], false)
    else if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) add(node, node.argument.literal, true)
    ts.forEachChild(node, visit)
  }
  visit(source)
  return found
}

/** Groups of files that import each other in a ring, by Tarjan's strongly connected components. */
export function rings(edges: ReadonlyMap<string, readonly string[]>): string[][] {
  const index = new Map<string, number>()
  const low = new Map<string, number>()
  const stack: string[] = []
  const onStack = new Set<string>()
  const found: string[][] = []
  const connect = (v: string): void => {
    index.set(v, index.size)
    low.set(v, index.get(v)!)
    stack.push(v)
    onStack.add(v)
    for (const w of edges.get(v) ?? []) {
      if (!index.has(w)) {
        connect(w)
        low.set(v, Math.min(low.get(v)!, low.get(w)!))
      } else if (onStack.has(w)) low.set(v, Math.min(low.get(v)!, index.get(w)!))
    }
    if (low.get(v) !== index.get(v)) return
    const group: string[] = []
    for (let w = ''; w !== v;) {
      w = stack.pop()!
      onStack.delete(w)
      group.push(w)
    }
    if (group.length > 1 || edges.get(v)?.includes(v)) found.push(group.sort())
  }
  for (const v of edges.keys()) if (!index.has(v)) connect(v)
  return found
}
