import { spreadLabels } from './chart-geometry'

/** A place on the board, in millimetres from 0, 0 at its lower left. */
export type Place = { x: number; y: number; side?: 'top' | 'bottom' }

export const sideOf = (place: Place, height: number) => place.side ?? (place.y >= height / 2 ? 'top' : 'bottom')

/** Orders places clockwise from the top left, as balloons are numbered; give the keys beside the figure in this order too. */
export function clockwise<P extends Place>(places: readonly P[], height: number): P[] {
  const top = places.filter((p) => sideOf(p, height) === 'top').sort((a, b) => a.x - b.x)
  const bottom = places.filter((p) => sideOf(p, height) === 'bottom').sort((a, b) => b.x - a.x)
  return [...top, ...bottom]
}

export type BalloonsProps = {
  places: readonly Place[]
  height: number
  /** Millimetres to pixels. */
  atX: (mm: number) => number
  atY: (mm: number) => number
  topY: number
  bottomY: number
  left: number
  right: number
}

/** Numbered balloons over and under a board, each on a leader with a halo of paper. */
export function Balloons({ places, height, atX, atY, topY, bottomY, left, right }: BalloonsProps) {
  const numbered = places.map((place, i) => ({ place, number: i + 1, side: sideOf(place, height) }))
  return (['top', 'bottom'] as const).flatMap((side) => {
    const row = numbered.filter((entry) => entry.side === side)
    const spread = spreadLabels(
      row.map((entry) => atX(entry.place.x)),
      28,
      left + 13,
      right - 13
    )
    return row.map(({ place, number }, i) => {
      const [px, py, bx] = [atX(place.x), atY(place.y), Math.round(spread[i]! * 100) / 100]
      const by = side === 'top' ? topY : bottomY
      const leader = `M${bx} ${side === 'top' ? by + 12 : by - 12}L${px} ${py}`
      return (
        <g key={number}>
          <path className="halo" d={leader} />
          <path className="ln" strokeWidth="1.5" d={leader} />
          <circle cx={px} cy={py} r="3.5" fill="var(--color-ink)" stroke="var(--color-paper)" strokeWidth="1.5" />
          <Balloon number={number} x={bx} y={by} />
        </g>
      )
    })
  })
}

export function Balloon({ number, x, y }: { number: number; x: number; y: number }) {
  return (
    <g>
      <circle cx={x} cy={y} r="12" className="bal" />
      <text x={x} y={y + 5} textAnchor="middle" className="t-b">
        {number}
      </text>
    </g>
  )
}
