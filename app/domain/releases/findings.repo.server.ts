import type { Insertable } from 'kysely'
import type { DbOrTx, Tx } from '~db/client.server'
import type { FindingsTable, ReleaseFilesTable } from '~db/schema'
import type { BundleCheck } from '~/domain/bundle/bundle-check.types'
import { newId } from '~/lib/new-id'
import { placeColumns, placeOf } from './record-rows'

/** Rows of one insert, well below SQLite's limit of bound values. */
const chunk = 200

export type FindingRow = Awaited<ReturnType<typeof listFindings>>[number]
export type FileRow = Awaited<ReturnType<typeof listFiles>>[number]

export async function listFindings(db: DbOrTx, releaseId: string) {
  const rows = await db
    .selectFrom('findings')
    .leftJoin('users', 'users.id', 'findings.answered_by')
    .select([
      'findings.id',
      'findings.position',
      'findings.code',
      'findings.severity',
      'findings.file',
      'findings.message',
      'findings.expected',
      'findings.found',
      'findings.answer',
      'findings.answered_at',
      'findings.answered_by',
      'findings.place_x_mm',
      'findings.place_y_mm',
      'findings.place_side',
      'users.display_name as answered_by_name'
    ])
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .execute()
  return rows.map(({ place_x_mm, place_y_mm, place_side, ...row }) => ({
    ...row,
    place: placeOf({ place_x_mm, place_y_mm, place_side })
  }))
}

export const listFiles = (db: DbOrTx, releaseId: string) =>
  db
    .selectFrom('release_files')
    .select(['file', 'function', 'side', 'layer_index', 'evidence'])
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .execute()

/** A finding's place does not carry an answer over to another bundle; what it says does. */
const sameFinding = (f: { code: string; file: string | null; message: string; expected: string | null; found: string | null }) =>
  JSON.stringify([f.code, f.file, f.message, f.expected, f.found])

/** Puts the answer of a check in place of the one before. An answer stays where the very same finding was answered already. */
export async function replaceAll(tx: Tx, releaseId: string, check: Pick<BundleCheck, 'layers' | 'findings'>) {
  const answered = new Map((await listFindings(tx, releaseId)).filter((f) => f.answer !== null).map((f) => [sameFinding(f), f]))
  const files: Insertable<ReleaseFilesTable>[] = check.layers.map((layer, position) => ({
    release_id: releaseId,
    position,
    file: layer.file,
    function: layer.function,
    side: layer.side,
    layer_index: layer.index,
    evidence: layer.evidence
  }))
  const findings: Insertable<FindingsTable>[] = check.findings.map((f, position) => {
    const before = answered.get(sameFinding(f))
    return {
      id: newId(),
      release_id: releaseId,
      position,
      code: f.code,
      severity: f.severity,
      file: f.file,
      message: f.message,
      expected: f.expected,
      found: f.found,
      ...placeColumns(f),
      answer: before?.answer ?? null,
      answered_at: before?.answered_at ?? null,
      answered_by: before?.answered_by ?? null
    }
  })
  await tx.deleteFrom('release_files').where('release_id', '=', releaseId).execute()
  await tx.deleteFrom('findings').where('release_id', '=', releaseId).execute()
  for (let i = 0; i < files.length; i += chunk)
    await tx
      .insertInto('release_files')
      .values(files.slice(i, i + chunk))
      .execute()
  for (let i = 0; i < findings.length; i += chunk)
    await tx
      .insertInto('findings')
      .values(findings.slice(i, i + chunk))
      .execute()
}

/** @returns whether the finding is one of this release */
export const setAnswer = async (
  tx: Tx,
  releaseId: string,
  findingId: string,
  answer: { answer: string | null; answered_at: string | null; answered_by: string | null }
) =>
  (
    await tx
      .updateTable('findings')
      .set(answer)
      .where('id', '=', findingId)
      .where('release_id', '=', releaseId)
      .executeTakeFirst()
  ).numUpdatedRows === 1n
