/** The address of a release's page. */
export const releasePath = (slug: string, version: string) => `/boards/${slug}/releases/${encodeURIComponent(version)}`

/** What a bundle is called when it is saved. */
export const bundleFileName = (slug: string, version: string) => `${slug}-${version}.zip`

/** The address of a side's picture; the sum in it keeps an older picture out of the browser's cache. */
export const picturePath = (slug: string, version: string, side: 'top' | 'bottom', sha256: string) =>
  `${releasePath(slug, version)}/picture/${side}.svg?v=${sha256.slice(0, 12)}`
