import { arcPoints, type Path } from './geometry'

/** An arc as Gerber gives it: ends in mm, the centre's offset (i, j) from the start; unsigned in single-quadrant mode. */
export type GerberArc = {
  x: number
  y: number
  toX: number
  toY: number
  i: number
  j: number
  isClockwise: boolean
  isSingleQuadrant: boolean
}

/**
 * Points along an arc after its start. In multi-quadrant mode equal ends make a full circle; an arc without or with an absurd radius is
 * drawn straight.
 *
 * Source: Gerber Layer Format Specification 2024.05, section 4.7.
 */
export function gerberArc(arc: GerberArc): Path {
  const { x, y, toX, toY, isClockwise, isSingleQuadrant } = arc
  const [i, j] = isSingleQuadrant ? quadrantCentre(arc) : [arc.i, arc.j]
  const radius = Math.hypot(i, j)
  if (radius === 0 || radius > 1e5) return [toX, toY]
  const [cx, cy] = [x + i, y + j]
  const from = Math.atan2(y - cy, x - cx)
  let sweep = Math.atan2(toY - cy, toX - cx) - from
  const isFull = !isSingleQuadrant && Math.abs(toX - x) < 1e-9 && Math.abs(toY - y) < 1e-9
  if (isFull) sweep = isClockwise ? -2 * Math.PI : 2 * Math.PI
  else if (isClockwise && sweep > 0) sweep -= 2 * Math.PI
  else if (!isClockwise && sweep < 0) sweep += 2 * Math.PI
  return arcPoints(cx, cy, radius, from, sweep, toX, toY)
}

/** The centre's offset of a single-quadrant arc, whose I and J carry no sign: the one of four that fits best. */
function quadrantCentre({ x, y, toX, toY, i, j, isClockwise }: GerberArc): [number, number] {
  let best: [number, number] = [i, j]
  let least = Infinity
  for (const si of [1, -1]) {
    for (const sj of [1, -1]) {
      const [ci, cj] = [Math.abs(i) * si, Math.abs(j) * sj]
      const difference = Math.abs(Math.hypot(ci, cj) - Math.hypot(toX - x - ci, toY - y - cj))
      let sweep = Math.atan2(toY - y - cj, toX - x - ci) - Math.atan2(-cj, -ci)
      if (isClockwise) sweep = -sweep
      while (sweep < -1e-9) sweep += 2 * Math.PI
      if (sweep <= Math.PI / 2 + 1e-6 && difference < least) {
        least = difference
        best = [ci, cj]
      }
    }
  }
  return best
}
