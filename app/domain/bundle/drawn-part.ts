import type { BundlePictures, LayerPicture } from './bundle-check.types'

/** A piece of a bundle's pictures, handed over as soon as it is drawn, so that what takes too long takes nothing else along. */
export type DrawnPart =
  | Pick<BundlePictures, 'box'>
  | Pick<BundlePictures, 'top' | 'bottom'>
  | Pick<BundlePictures, 'thumbnails'>
  | { layer: LayerPicture }

/** The pictures with one more part; the first part is the box. */
export function withPart(pictures: BundlePictures | null, part: DrawnPart): BundlePictures | null {
  if ('box' in part) return { top: null, bottom: null, thumbnails: null, layers: [], ...part }
  if (!pictures) return null
  if ('layer' in part) return { ...pictures, layers: [...pictures.layers, part.layer] }
  return { ...pictures, ...part }
}

/** What was drawn in the end; null when nothing was. */
export const somePictures = (pictures: BundlePictures | null): BundlePictures | null =>
  pictures && (pictures.top !== null || pictures.layers.length > 0) ? pictures : null
