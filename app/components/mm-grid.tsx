/** Places of the drawing in pixels; the grid counts from the board's 0, 0. */
export type GridBox = {
  left: number
  right: number
  top: number
  bottom: number
  originX: number
  originY: number
  scale: number
}

const round = (n: number) => Math.round(n * 100) / 100

/** Under this many pixels a millimetre only the 5 mm lines are drawn. */
export const fineFrom = 7.5

/** Paths of the lines of 1 mm and of 5 mm within a box. */
export function gridPaths({ left, right, top, bottom, originX, originY, scale }: GridBox): { fine: string; coarse: string } {
  const lines = { fine: '', coarse: '' }
  const add = (n: number, d: string) => {
    if (n % 5 === 0) lines.coarse += d
    else if (scale >= fineFrom) lines.fine += d
  }
  const steps = (from: number, to: number) => {
    const [first, last] = [Math.ceil(from - 1e-6), Math.floor(to + 1e-6)]
    return Array.from({ length: Math.max(0, last - first + 1) }, (_, i) => first + i)
  }
  for (const n of steps((left - originX) / scale, (right - originX) / scale))
    add(n, `M${round(originX + n * scale)} ${top}V${bottom}`)
  for (const n of steps((originY - bottom) / scale, (originY - top) / scale))
    add(n, `M${left} ${round(originY - n * scale)}H${right}`)
  return lines
}

/** The millimetre grid: only behind boards drawn to scale. */
export function MillimetreGrid(box: GridBox) {
  const { fine, coarse } = gridPaths(box)
  return (
    <g className="mm">
      {fine && <path d={fine} className="mm1" />}
      {coarse && <path d={coarse} className="mm5" />}
    </g>
  )
}
