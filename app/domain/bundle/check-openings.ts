import { indexFlashes, indexHoles, openingsOver, shareOnFlashes, type FlashIndex } from './alignment'
import type { BundleFinding } from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { drillFiles, percent, platedHoles, type Indexed } from './aligned-files'
import { finding } from './finding'

/** Below this share of openings over something of the board the layer is not this board's; masks of 17 real boards lie above 0.88, stencils above 0.99. */
const poor = { soldermask: 0.5, paste: 0.7 }
/** The same for masks where holes are not known, over which many of their openings may lie (in a real board 56 %). */
const poorWithoutHoles = 0.2
/** From this share of a stencil's openings over its mask's on the two belong together. */
const agreeing = 0.9
const leastOpenings = { soldermask: 8, paste: 4 }

/** Solder masks and stencils whose openings do not lie over the copper of their side. */
export function checkOpenings(reading: BundleReading, indices: Indexed[]): BundleFinding[] {
  const drills = drillFiles(reading)
  const all = reading.files.filter((file) => file.layer.function.startsWith('drill'))
  const knowsHoles = all.length > 0 && all.every((file) => !file.isBroken)
  const holes = indexHoles(drills.flatMap((file) => file.holes!))
  return reading.files.flatMap((file) => {
    const fn = file.layer.function
    if ((fn !== 'soldermask' && fn !== 'paste') || file.isBroken || file.conflict || !file.image) return []
    const copper = indices.find((other) => other.file.layer.side === file.layer.side)
    const { flashes } = file.image
    if (!copper || copper.file.isBroken || copper.index.count < leastOpenings[fn] || flashes.x.length < leastOpenings[fn])
      return []
    const { share, firstOff } = openingsOver(copper.index, holes, flashes)
    if (firstOff === null || share >= (fn === 'soldermask' && !knowsHoles ? poorWithoutHoles : poor[fn])) return []
    const side = file.layer.side === 'inner' ? null : file.layer.side
    const place = { x: flashes.x[firstOff]!, y: flashes.y[firstOff]!, side }
    // Where the mask fits the holes better than the copper does, or mask and stencil fit each other, the copper is the foreign layer.
    const plated = drills.flatMap(platedHoles)
    const fitsHoles = () => shareOnFlashes(indexFlashes(flashes), plated) > shareOnFlashes(copper.index, plated) + 0.2
    const isCopper = (fn === 'soldermask' && plated.length >= 5 && fitsHoles()) || agreesWithOther(reading, file, holes)
    const guilty = isCopper ? copper.file : file
    guilty.isBroken = true
    const message = isCopper
      ? "The copper's pads lie neither under the openings of its mask or stencil nor on the holes: it is shifted, mirrored or of another board."
      : `The ${fn === 'paste' ? "stencil's" : "mask's"} openings do not lie over the pads of its side: it is shifted, mirrored or of another board.`
    return [
      finding('layer-misaligned', message, {
        file: guilty.layer.file,
        expected: 'openings over pads',
        found: `${percent(share)} over pads`,
        place
      })
    ]
  })
}

/** Whether the stencil's openings lie over those of the mask on its side, asked for either of them. */
function agreesWithOther(reading: BundleReading, file: FileReading, holes: FlashIndex): boolean {
  const other = file.layer.function === 'paste' ? 'soldermask' : 'paste'
  const second = reading.files.find(
    ({ layer, isBroken, image }) => layer.function === other && layer.side === file.layer.side && !isBroken && image
  )
  if (!second) return false
  const [paste, mask] = file.layer.function === 'paste' ? [file, second] : [second, file]
  const { flashes } = paste.image!
  if (flashes.x.length < leastOpenings.paste) return false
  return openingsOver(indexFlashes(mask.image!.flashes), holes, flashes).share >= agreeing
}
