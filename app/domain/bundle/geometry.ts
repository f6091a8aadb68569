/** An upright rectangle, in mm. */
export type Box = { minX: number; minY: number; maxX: number; maxY: number }

/** A path as x, y pairs in mm. */
export type Path = number[]

export const emptyBox = (): Box => ({ minX: Infinity, minY: Infinity, maxX: -Infinity, maxY: -Infinity })

export function growBox(box: Box, x: number, y: number, halfX = 0, halfY = halfX): void {
  if (x - halfX < box.minX) box.minX = x - halfX
  if (y - halfY < box.minY) box.minY = y - halfY
  if (x + halfX > box.maxX) box.maxX = x + halfX
  if (y + halfY > box.maxY) box.maxY = y + halfY
}

export const isEmptyBox = (box: Box): boolean => box.minX > box.maxX

export const boxArea = (box: Box): number => Math.max(0, box.maxX - box.minX) * Math.max(0, box.maxY - box.minY)

export function boxOf(path: Path): Box {
  const box = emptyBox()
  for (let i = 0; i + 1 < path.length; i += 2) growBox(box, path[i]!, path[i + 1]!)
  return box
}

export const boxesTouch = (a: Box, b: Box): boolean =>
  a.minX <= b.maxX && b.minX <= a.maxX && a.minY <= b.maxY && b.minY <= a.maxY

/** Largest distance between an arc and the chords that stand for it, in mm. */
const chordDeviation = 0.005

/**
 * Points along an arc after its start, the exact end included.
 *
 * @param sweep radians, positive counter-clockwise
 */
export function arcPoints(cx: number, cy: number, radius: number, from: number, sweep: number, endX: number, endY: number): Path {
  const step = radius <= chordDeviation ? Math.PI / 2 : 2 * Math.acos(1 - chordDeviation / radius)
  // The hair below keeps an exact number of chords from hanging on the last digit of the coordinates.
  const count = Math.min(256, Math.max(1, Math.ceil(Math.abs(sweep) / Math.max(step, 1e-3) - 1e-6)))
  const points: Path = []
  for (let i = 1; i < count; i++) {
    const angle = from + (sweep * i) / count
    points.push(cx + radius * Math.cos(angle), cy + radius * Math.sin(angle))
  }
  points.push(endX, endY)
  return points
}

/** Whether a point lies inside a closed polygon (even-odd rule). */
export function isInside(polygon: Path, x: number, y: number): boolean {
  let inside = false
  const n = polygon.length
  let px = polygon[n - 2]!
  let py = polygon[n - 1]!
  for (let i = 0; i < n; i += 2) {
    const qx = polygon[i]!
    const qy = polygon[i + 1]!
    if (qy > y !== py > y && x < ((px - qx) * (y - qy)) / (py - qy) + qx) inside = !inside
    px = qx
    py = qy
  }
  return inside
}

/** Distance of a point from the edge of a closed polygon, in mm. */
export function distanceToEdge(polygon: Path, x: number, y: number): number {
  let least = Infinity
  const n = polygon.length
  let px = polygon[n - 2]!
  let py = polygon[n - 1]!
  for (let i = 0; i < n; i += 2) {
    const qx = polygon[i]!
    const qy = polygon[i + 1]!
    const dx = qx - px
    const dy = qy - py
    const squared = dx * dx + dy * dy
    const along = squared === 0 ? 0 : Math.min(1, Math.max(0, ((x - px) * dx + (y - py) * dy) / squared))
    const distance = Math.hypot(x - px - along * dx, y - py - along * dy)
    if (distance < least) least = distance
    px = qx
    py = qy
  }
  return least
}

/** Whether a point lies outside a closed polygon, whose box is given, by more than `by` mm. */
export function isFarOutside(contour: Path, box: Box, x: number, y: number, by: number): boolean {
  if (x < box.minX - by || x > box.maxX + by || y < box.minY - by || y > box.maxY + by) return true
  return !isInside(contour, x, y) && distanceToEdge(contour, x, y) > by
}

/** How much of the smaller one's width and height two boxes share, the lesser of both (0 to 1); a side below 0.01 mm counts as that. */
export function overlapShare(a: Box, b: Box): number {
  const along = (a0: number, a1: number, b0: number, b1: number) => {
    const least = Math.max(0.01, Math.min(a1 - a0, b1 - b0))
    const middle = a1 - a0 < 0.01 ? a0 >= b0 && a0 <= b1 : b1 - b0 < 0.01 && b0 >= a0 && b0 <= a1
    return middle ? 1 : Math.max(0, Math.min(a1, b1) - Math.max(a0, b0)) / least
  }
  return Math.min(along(a.minX, a.maxX, b.minX, b.maxX), along(a.minY, a.maxY, b.minY, b.maxY))
}
