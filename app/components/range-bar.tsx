import { useId } from 'react'
import { linear } from './chart-geometry'

export type RangeBarProps = {
  /** Shares 0 to 1. */
  worst: number
  reported: number
  best: number
  from?: number
  to?: number
}

/** Strokes of 45° that fill a box, to be clipped to it. */
const hatch = (x0: number, x1: number, top: number, height: number, gap: number) => {
  const strokes: string[] = []
  for (let x = x0 - height; x < x1; x += gap) strokes.push(`M${x.toFixed(1)} ${top + height}l${height} -${height}`)
  return strokes.join('')
}

function Hatched({ x0, x1, top, height, gap }: { x0: number; x1: number; top: number; height: number; gap: number }) {
  const clip = useId()
  const width = Math.max(1.5, x1 - x0)
  return (
    <g fill="none" stroke="var(--color-petrol)">
      <clipPath id={clip}>
        <rect x={x0} y={top} width={width} height={height} />
      </clipPath>
      <path clipPath={`url(#${clip})`} d={hatch(x0, x1, top, height, gap)} />
      <rect x={x0} y={top} width={width} height={height} strokeWidth="1.5" />
    </g>
  )
}

/** Worst to best: a hatched length between the two, a heavy ink mark for what is reported. Its words stand in the row beside it. */
export function RangeBar({ worst, reported, best, from = 50, to = 100, width = 240 }: RangeBarProps & { width?: number }) {
  const scale = linear(from, to, 4, width - 4)
  const x = (share: number) => Math.max(4, scale(share * 100))
  return (
    <svg viewBox={`0 0 ${width} 22`} width={width} height="22" aria-hidden="true">
      <path d={`M4 19.5H${width - 4}`} stroke="var(--color-hair)" />
      <Hatched x0={x(worst)} x1={x(best)} top={5} height={11} gap={5} />
      <path d={`M${x(reported)} 1V20`} stroke="var(--color-ink)" strokeWidth="3" />
      {worst * 100 < from && <path d="M11 5L4 10.5l7 5.5" fill="none" stroke="var(--color-ink)" strokeWidth="1.5" />}
    </svg>
  )
}

const oneDigit = (share: number) => (share >= 1 ? 'none failed' : (share * 100).toFixed(1))

/** The same once, large, with its words; `isNarrow` sets them on lines of their own. */
export function RangeFigure({ worst, reported, best, from = 50, to = 100, isNarrow }: RangeBarProps & { isNarrow?: boolean }) {
  // Wide, the words of the best case stand right of it, past the scale's end if need be.
  const [width, right, base] = isNarrow ? [328, 310, 104] : [700, 540, 88]
  const scale = linear(from, to, 2, right)
  const x = (share: number) => Math.max(2, scale(share * 100))
  const ticks = Array.from({ length: 6 }, (_, i) => from + ((to - from) / 5) * i)
  const label = `Worst case ${oneDigit(worst)}, as reported ${oneDigit(reported)}, best case ${oneDigit(best)} percent`
  const top = base - 24
  const isLeft = isNarrow === true || x(worst) < 150
  return (
    <svg viewBox={`0 0 ${width} ${base + 30}`} width={width} height={base + 30} role="img" aria-label={label}>
      <path d={`M2 ${base}H${right}`} className="ln" strokeWidth="1.5" />
      {ticks.map((tick, i) => (
        <g key={tick}>
          <path d={`M${scale(tick)} ${base}v7`} className="ln" strokeWidth="1.5" />
          <text x={scale(tick)} y={base + 24} textAnchor={i === 0 ? 'start' : 'middle'}>
            {tick}
          </text>
        </g>
      ))}
      <Hatched x0={x(worst)} x1={x(best)} top={top} height={16} gap={7} />
      <path d={`M${x(reported)} ${top - 28}V${base}`} stroke="var(--color-ink)" strokeWidth="4" />
      <text x={Math.min(x(reported), right - 60)} y={top - 34} textAnchor="middle">
        <tspan className="font-bold">{oneDigit(reported)}</tspan> as reported
      </text>
      <path d={`M${x(worst)} ${top - 12}V${base}M${x(best)} ${top - 12}V${base}`} className="ln" strokeWidth="1" />
      <text x={isLeft ? 2 : x(worst) - 6} y={isNarrow ? 14 : top - 4} textAnchor={isLeft ? 'start' : 'end'}>
        <tspan className="font-bold">{oneDigit(worst)}</tspan> if all had failed
      </text>
      <text x={isNarrow ? 2 : x(best) + 6} y={isNarrow ? 32 : top - 4} textAnchor="start">
        <tspan className="font-bold">{oneDigit(best)}</tspan> if all still run
      </text>
    </svg>
  )
}
