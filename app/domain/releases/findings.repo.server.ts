import type { Insertable } from 'kysely'
import type { DbOrTx, Tx } from '~db/client.server'
import type { FindingsTable, ReleaseFilesTable } from '~db/schema'

/** Rows of one insert, well below SQLite's limit of bound values. */
const chunk = 200

export type FindingRow = Awaited<ReturnType<typeof listFindings>>[number]
export type FileRow = Awaited<ReturnType<typeof listFiles>>[number]

export const listFindings = (db: DbOrTx, releaseId: string) =>
  db
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
      'users.display_name as answered_by_name'
    ])
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .execute()

export const listFiles = (db: DbOrTx, releaseId: string) =>
  db
    .selectFrom('release_files')
    .select(['file', 'function', 'side', 'layer_index', 'evidence'])
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .execute()

/** Puts the answer of a check in place of the one before. */
export async function replaceAll(
  tx: Tx,
  releaseId: string,
  files: Insertable<ReleaseFilesTable>[],
  findings: Insertable<FindingsTable>[]
) {
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
