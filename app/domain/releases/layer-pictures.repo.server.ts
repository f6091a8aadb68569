import type { DbOrTx, Tx } from '~db/client.server'
import type { LayerPicturesTable } from '~db/schema'

export type LayerPictureRow = Omit<LayerPicturesTable, 'release_id'>

/** The pictures of a release's single layers in the order of the stack. */
export const listByRelease = (db: DbOrTx, releaseId: string): Promise<LayerPictureRow[]> =>
  db
    .selectFrom('layer_pictures')
    .select(['position', 'file', 'function', 'side', 'layer_index', 'sha256'])
    .where('release_id', '=', releaseId)
    .orderBy('position')
    .execute()

export const findSha256 = async (db: DbOrTx, releaseId: string, position: number): Promise<string | null> =>
  (
    await db
      .selectFrom('layer_pictures')
      .select('sha256')
      .where('release_id', '=', releaseId)
      .where('position', '=', position)
      .executeTakeFirst()
  )?.sha256 ?? null

export const isReferredTo = async (db: DbOrTx, sha256: string): Promise<boolean> =>
  (await db.selectFrom('layer_pictures').select('position').where('sha256', '=', sha256).limit(1).executeTakeFirst()) !==
  undefined

export async function replaceAll(tx: Tx, releaseId: string, rows: readonly LayerPictureRow[]): Promise<void> {
  await tx.deleteFrom('layer_pictures').where('release_id', '=', releaseId).execute()
  if (rows.length === 0) return
  await tx
    .insertInto('layer_pictures')
    .values(rows.map((row) => ({ release_id: releaseId, ...row })))
    .execute()
}
