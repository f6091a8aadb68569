/** The address of a release's page. */
export const releasePath = (slug: string, version: string) => `/boards/${slug}/releases/${encodeURIComponent(version)}`

/** What a bundle is called when it is saved. */
export const bundleFileName = (slug: string, version: string) => `${slug}-${version}.zip`

const picture = (slug: string, version: string, file: string, sha256: string) =>
  `${releasePath(slug, version)}/picture/${file}?v=${sha256.slice(0, 12)}`

/** The address of a side's picture; the sum in it keeps an older picture out of the browser's cache. */
export const picturePath = (slug: string, version: string, side: 'top' | 'bottom', sha256: string) =>
  picture(slug, version, `${side}.svg`, sha256)

/** The address of a side's thumbnail. */
export const thumbnailPath = (slug: string, version: string, side: 'top' | 'bottom', sha256: string) =>
  picture(slug, version, `${side}.png`, sha256)

/** The address of a single layer's picture; `position` counts from 1 in the order of the stack. */
export const layerPicturePath = (slug: string, version: string, position: number, sha256: string) =>
  picture(slug, version, `layer-${position}.svg`, sha256)
