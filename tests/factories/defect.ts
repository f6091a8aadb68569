import { expect } from 'vitest'
import type { BundleFinding, DeclaredDetails } from '../../app/domain/bundle/bundle-check.types'
import { checkBundle } from '../../app/domain/bundle/check-bundle.server'
import type { FindingCode, Severity } from '../../app/domain/bundle/finding-codes'
import { demoFiles, zipOf } from './demo-bundle'

export type Files = Map<string, Buffer>

/** A defect made in a clean demo bundle: its name, the release, the change, and the finding it must give (with its file, where it has one). */
export type Defect = [
  name: string,
  release: string,
  change: (files: Files) => unknown,
  code: FindingCode,
  severity: Severity,
  file?: string,
  declared?: DeclaredDetails
]

/** Changes a text file of the bundle; a change that changes nothing is a mistake of the test. */
export function edit(files: Files, path: string, change: (content: string) => string): void {
  const before = files.get(path)!.toString('utf8').replaceAll('\r\n', '\n')
  const after = change(before)
  if (after === before) throw new Error(`The change to ${path} changes nothing`)
  files.set(path, Buffer.from(after))
}

const brief = (f: BundleFinding) => `${f.severity} ${f.code} ${f.file ?? ''}`

/** The defect gives its code once and no other stop. */
export async function expectDefect(...defect: Defect extends [string, ...infer Rest] ? Rest : never): Promise<void> {
  const [release, change, code, severity, file, declared] = defect
  const files = await demoFiles(release)
  change(files)
  const { check } = await checkBundle(await zipOf(files), declared)
  const own = check.findings.filter((f) => f.code === code)
  expect(
    own.map((f) => f.severity),
    check.findings.map(brief).join('\n')
  ).toEqual([severity])
  if (file) expect(own[0]!.file).toBe(file)
  expect(check.findings.filter((f) => f.severity === 'stop' && f.code !== code).map(brief)).toEqual([])
  expect(check.ok).toBe(severity !== 'stop')
}
