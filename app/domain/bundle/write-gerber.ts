import type { Path } from './geometry'
import type { Hole } from './drill-file.types'

const head = '%FSLAX46Y46*%\n%MOMM*%\nG01*\n'
const at = (x: number, y: number) => `X${Math.round(x * 1e6)}Y${Math.round(y * 1e6)}`

/** Closed contours (mm) as a Gerber file that draws them with a line of this width (mm), a hair line if not told. */
export function gerberOfContours(contours: readonly Path[], width = 0.01): string {
  const lines = [`%ADD10C,${width.toFixed(4)}*%`, 'D10*']
  for (const contour of contours) {
    lines.push(`${at(contour[0]!, contour[1]!)}D02*`)
    for (let i = 2; i < contour.length; i += 2) lines.push(`${at(contour[i]!, contour[i + 1]!)}D01*`)
    lines.push(`${at(contour[0]!, contour[1]!)}D01*`)
  }
  return `${head}${lines.join('\n')}\nM02*\n`
}

/** Holes and slots (mm) as a Gerber file: flashes and strokes of round apertures. */
export function gerberOfHoles(holes: readonly Hole[]): string {
  const codes = new Map<string, number>()
  const drawn: string[] = []
  for (const hole of holes) {
    const size = hole.diameter.toFixed(4)
    if (!codes.has(size)) codes.set(size, codes.size + 10)
    drawn.push(`D${codes.get(size)}*`)
    if (hole.toX === null || hole.toY === null) drawn.push(`${at(hole.x, hole.y)}D03*`)
    else drawn.push(`${at(hole.x, hole.y)}D02*`, `${at(hole.toX, hole.toY)}D01*`)
  }
  const apertures = [...codes].map(([size, code]) => `%ADD${code}C,${size}*%`)
  return `${head}${[...apertures, ...drawn].join('\n')}\nM02*\n`
}
