import { createHash } from 'node:crypto'
import type { DbOrTx, Tx } from '~db/client.server'
import type { BundlePictures } from '~/domain/bundle/bundle-check.types'
import { objectKey } from '~/server/storage.server'
import * as layerPictures from './layer-pictures.repo.server'
import type { ReleaseRow } from './releases.repo.server'

/** Puts one picture into storage under its key. */
export type PutPicture = (key: string, sha256: string, content: { body: Buffer; contentType: string }) => Promise<void>

/** What a release row says of its pictures. */
export type PictureColumns = Pick<
  ReleaseRow,
  'picture_top_sha256' | 'picture_bottom_sha256' | 'thumb_top_sha256' | 'thumb_bottom_sha256' | 'picture_box_json'
>

export type StoredPictures = { columns: PictureColumns; layers: layerPictures.LayerPictureRow[] }

/** Stores what was drawn of a bundle, each picture under the hash of its content, and says what to write down of it. */
export async function storePictures(put: PutPicture, pictures: BundlePictures | null): Promise<StoredPictures> {
  const store = async (content: string | Uint8Array | null | undefined, contentType: string) => {
    if (!content) return null
    const body = Buffer.from(content as string)
    const sha256 = createHash('sha256').update(body).digest('hex')
    await put(objectKey('picture', sha256), sha256, { body, contentType })
    return sha256
  }
  const [svg, png] = ['image/svg+xml', 'image/png']
  const columns: PictureColumns = {
    picture_top_sha256: await store(pictures?.top, svg),
    picture_bottom_sha256: await store(pictures?.bottom, svg),
    thumb_top_sha256: await store(pictures?.thumbnails?.top, png),
    thumb_bottom_sha256: await store(pictures?.thumbnails?.bottom, png),
    picture_box_json: pictures && JSON.stringify(pictures.box)
  }
  const layers: layerPictures.LayerPictureRow[] = []
  for (const { svg: drawn, index, ...layer } of pictures?.layers ?? [])
    layers.push({ ...layer, layer_index: index, position: layers.length + 1, sha256: (await store(drawn, svg))! })
  return { columns, layers }
}

/** Writes down the single layers of a draft in place of those before. */
export const keepLayerPictures = (tx: Tx, releaseId: string, { layers }: StoredPictures) =>
  layerPictures.replaceAll(tx, releaseId, layers)

type ReferringRow = Pick<ReleaseRow, 'bundle_sha256'> & Omit<PictureColumns, 'picture_box_json'>

/** The keys of everything in storage for a release: its bundle, both sides, their thumbnails, its single layers. */
export function objectsOf(release: ReferringRow, layers: readonly { sha256: string }[]): string[] {
  const pictures = [
    release.picture_top_sha256,
    release.picture_bottom_sha256,
    release.thumb_top_sha256,
    release.thumb_bottom_sha256,
    ...layers.map((layer) => layer.sha256)
  ]
  const keys = pictures.flatMap((sha) => (sha === null ? [] : [objectKey('picture', sha)]))
  return [...new Set([...(release.bundle_sha256 === null ? [] : [objectKey('bundle', release.bundle_sha256)]), ...keys])]
}

/** As `objectsOf`, for a release as it is written down. */
export const objectsOfRelease = async (db: DbOrTx, release: ReferringRow & Pick<ReleaseRow, 'id'>): Promise<string[]> =>
  objectsOf(release, await layerPictures.listByRelease(db, release.id))
