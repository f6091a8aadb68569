import { sideOf } from './balloons'
import type { BoardPicture } from './board-drawing'
import { spreadLabels } from './chart-geometry'
import { OriginCross } from './dimension'
import { TwoDrawings } from './figure'
import { MillimetreGrid } from './mm-grid'

type Place = { x: number; y: number }

/** A part that came, went or moved; mm from 0, 0 at the board's lower left, as the drawn side is seen. */
export type PartMarkShown = { designator: string; kind: 'moved' | 'added' | 'removed'; from: Place | null; to: Place | null }

export type PartMarksProps = BoardPicture & { marks: readonly PartMarkShown[] }

const r2 = (n: number) => Math.round(n * 100) / 100
const placeOf = ({ from, to }: PartMarkShown): Place => to ?? from!
const wayOf = ({ from, to }: PartMarkShown) => (from && to ? Math.hypot(to.x - from.x, to.y - from.y) : Infinity)

/**
 * The board drawn faint on the millimetre grid with what moved on it: dashed rings where parts were, discs where they are now, a plus for new
 * ones, a cross for those that are gone. Names stand over and under the board; where there is no room for all, those that moved least
 * have none.
 */
export function PartMarks(props: PartMarksProps) {
  const fit = (column: number, maxHeight: number) => Math.min(column / (props.width + 2), maxHeight / (props.height + 2))
  return (
    <TwoDrawings
      wide={<Drawing {...props} left={0.5} right={803.5} sheetWidth={804} scale={fit(803, 400)} />}
      narrow={<Drawing {...props} left={0.5} right={325.5} sheetWidth={326} scale={fit(325, 330)} />}
    />
  )
}

type DrawingProps = PartMarksProps & { left: number; right: number; sheetWidth: number; scale: number }

function Drawing({ src, alt, width, height, marks, left, right, sheetWidth, scale }: DrawingProps) {
  const room = Math.max(scale, 34)
  const [x0, yTop] = [r2(left + scale), r2(1 + room)]
  const y0 = r2(yTop + height * scale)
  const bottom = r2(y0 + room)
  const atX = (x: number) => r2(x0 + x * scale)
  const atY = (y: number) => r2(y0 - y * scale)
  return (
    <svg viewBox={`0 0 ${sheetWidth} ${bottom + 1}`} width={sheetWidth} height={bottom + 1} role="img" aria-label={alt}>
      <MillimetreGrid left={left} right={right} top={1} bottom={bottom} originX={x0} originY={y0} scale={scale} />
      <image
        href={src}
        x={x0}
        y={yTop}
        width={r2(width * scale)}
        height={r2(height * scale)}
        preserveAspectRatio="none"
        opacity="0.3"
      />
      <rect
        x={x0}
        y={yTop}
        width={r2(width * scale)}
        height={r2(height * scale)}
        fill="none"
        stroke="var(--color-edge)"
        strokeWidth="1"
      />
      <OriginCross x={x0} y={y0} />
      <Names marks={marks} height={height} atX={atX} atY={atY} topY={20} bottomY={bottom - 8} left={left} right={right} />
      {marks.map((mark) => (
        <Mark key={`${mark.kind} ${mark.designator}`} mark={mark} atX={atX} atY={atY} />
      ))}
    </svg>
  )
}

type Scales = { atX: (mm: number) => number; atY: (mm: number) => number }

function Mark({ mark: { kind, from, to }, atX, atY }: Scales & { mark: PartMarkShown }) {
  const [fx, fy] = from ? [atX(from.x), atY(from.y)] : [0, 0]
  const [tx, ty] = to ? [atX(to.x), atY(to.y)] : [0, 0]
  const plus = `M${tx - 3.5} ${ty}h7M${tx} ${ty - 3.5}v7`
  const cross = `M${fx - 3} ${fy - 3}l6 6M${fx + 3} ${fy - 3}l-6 6`
  return (
    <g>
      {from && <circle cx={fx} cy={fy} r="7" fill="var(--color-paper)" fillOpacity="0.75" />}
      {from && to && <path d={`M${fx} ${fy}L${tx} ${ty}`} stroke="var(--color-petrol)" strokeWidth="2" />}
      {from && <circle cx={fx} cy={fy} r="7" fill="none" stroke="var(--color-ink)" strokeWidth="1.5" strokeDasharray="3 2.5" />}
      {kind === 'removed' && <path d={cross} className="ln" strokeWidth="2" />}
      {to && (
        <circle
          cx={tx}
          cy={ty}
          r={kind === 'added' ? 7 : 4.5}
          fill="var(--color-petrol)"
          stroke="var(--color-paper)"
          strokeWidth="1.5"
        />
      )}
      {kind === 'added' && <path d={plus} stroke="var(--color-paper)" strokeWidth="2" />}
    </g>
  )
}

type NamesProps = Scales & {
  marks: readonly PartMarkShown[]
  height: number
  topY: number
  bottomY: number
  left: number
  right: number
}

/** About how wide a name of 14 px is, with its distance to the next. */
const widthOf = ({ designator }: PartMarkShown) => designator.length * 8.2 + 7

function Names({ marks, height, atX, atY, topY, bottomY, left, right }: NamesProps) {
  return (['top', 'bottom'] as const).flatMap((side) => {
    const row = marks.filter((mark) => sideOf(placeOf(mark), height) === side && mark.designator.length <= 8)
    const gap = Math.max(20, ...row.map(widthOf))
    const places = Math.floor((right - left) / gap)
    const named = [...row].sort((a, b) => wayOf(b) - wayOf(a)).slice(0, places)
    const spread = spreadLabels(
      named.map((mark) => atX(placeOf(mark).x)),
      gap,
      left + gap / 2,
      right - gap / 2
    )
    return named.map((mark, i) => {
      const [px, py, tx] = [atX(placeOf(mark).x), atY(placeOf(mark).y), r2(spread[i]!)]
      const leader = `M${tx} ${side === 'top' ? topY + 4 : bottomY - 14}L${px} ${py}`
      return (
        <g key={mark.designator}>
          <path className="halo" d={leader} />
          <path className="ln" strokeWidth="1" d={leader} />
          <text x={tx} y={side === 'top' ? topY : bottomY} textAnchor="middle" className="t-b lb">
            {mark.designator}
          </text>
        </g>
      )
    })
  })
}
