import { Balloon, Balloons, sideOf, type Place } from './balloons'
import { DimensionAcross, DimensionDown, OriginCross } from './dimension'
import { TwoDrawings } from './figure'
import { MillimetreGrid } from './mm-grid'

export type BoardPicture = {
  /** Address of the picture, which covers the outline exactly. */
  src: string
  /** What is seen: "Top side of Buttress 1.1.0". */
  alt: string
  /** Of the outline, in millimetres. */
  width: number
  height: number
}

const mm = (n: number) => `${n.toFixed(1)} mm`
const r2 = (n: number) => Math.round(n * 100) / 100

/** A grid as wide as its column, but no higher than a screen is high. */
const fit = (column: number, maxHeight: number, { width, height }: BoardPicture) =>
  Math.min(column / (width + 2), maxHeight / (height + 2))

export type BoardDrawingProps = BoardPicture & {
  /** Numbered places, clockwise from the top left (see `clockwise`); keys stand beside the figure. */
  places?: Pick<Place, 'x' | 'y'>[]
  /** Where 0, 0 of the layers lies, in millimetres from the lower left corner, from where the grid counts. */
  origin?: { x: number; y: number }
}

/**
 * A board to scale on the millimetre grid, with its width and height as dimension lines and a cross at 0, 0. Stands in a figure with
 * `span="hang"`: the vertical dimension hangs in the number column.
 */
export function BoardDrawing(props: BoardDrawingProps) {
  return (
    <TwoDrawings
      wide={
        <Dimensioned
          {...props}
          left={80.5}
          right={883.5}
          sheetWidth={884}
          scale={fit(803, 442, props)}
          dimensionX={48}
          hasOriginLabel
        />
      }
      narrow={<Dimensioned {...props} left={22.5} right={326.5} sheetWidth={327} scale={fit(304, 330, props)} dimensionX={10} />}
    />
  )
}

type DimensionedProps = BoardDrawingProps & {
  left: number
  right: number
  sheetWidth: number
  scale: number
  dimensionX: number
  hasOriginLabel?: boolean
}

function Dimensioned({
  src,
  alt,
  width,
  height,
  places: given = [],
  origin = { x: 0, y: 0 },
  left,
  right,
  sheetWidth,
  scale,
  dimensionX,
  hasOriginLabel
}: DimensionedProps) {
  // Over or under the board is told from the place alone: a side of the board is another matter.
  const places = given.map(({ x, y }) => ({ x, y }))
  const has = (side: 'top' | 'bottom') => places.some((p) => sideOf(p, height) === side)
  const top = 32
  const x0 = r2(left + scale)
  const yTop = r2(top + (has('top') ? Math.max(scale, 40) : Math.max(scale, 8)))
  const y0 = r2(yTop + height * scale)
  const x1 = r2(x0 + width * scale)
  const bottom = r2(y0 + (has('bottom') ? Math.max(scale, 40) : Math.max(scale, hasOriginLabel ? 20 : 12)))
  const isAtCorner = Math.abs(origin.x) < 0.01 && Math.abs(origin.y) < 0.01
  const atX = (x: number) => r2(x0 + x * scale)
  const atY = (y: number) => r2(y0 - y * scale)
  const label = `${alt}, ${mm(width)} wide and ${mm(height)} high${places.length > 0 ? `, with ${places.length} numbered places` : ''}`
  return (
    <svg viewBox={`0 0 ${sheetWidth} ${bottom + 1}`} width={sheetWidth} height={bottom + 1} role="img" aria-label={label}>
      <MillimetreGrid
        left={left}
        right={right}
        top={top}
        bottom={bottom}
        originX={atX(origin.x)}
        originY={atY(origin.y)}
        scale={scale}
      />
      <image href={src} x={x0} y={yTop} width={r2(width * scale)} height={r2(height * scale)} preserveAspectRatio="none" />
      <DimensionAcross from={x0} to={x1} y={14} foot={yTop - 4} text={mm(width)} />
      <DimensionDown from={yTop} to={y0} x={dimensionX} foot={x0 - 4} text={mm(height)} />
      {origin.x > -1 && origin.y > -1 && origin.x < width + 1 && origin.y < height + 1 && (
        <OriginCross x={atX(origin.x)} y={atY(origin.y)} hasLabel={hasOriginLabel && isAtCorner} />
      )}
      <Balloons places={places} height={height} atX={atX} atY={atY} topY={47} bottomY={bottom - 15} left={left} right={right} />
    </svg>
  )
}

export type BoardAtScaleProps = BoardPicture & {
  /** Pixels of the drawing: as wide as the column it stands in. */
  columns: { wide: number; narrow: number }
  /** Pixels a millimetre; give the same to all that are compared. Without it the board fills its column. */
  scales?: { wide: number; narrow: number }
  /** Numbered places, in millimetres from the lower left as seen. */
  marks?: { number: number; x: number; y: number }[]
}

/** A board on the grid without dimension lines: beside others at one scale, or as a second view. */
export function BoardAtScale({ columns, scales, marks = [], ...picture }: BoardAtScaleProps) {
  const drawing = (column: number, scale: number) => {
    const { src, alt, width, height } = picture
    // compared boards keep 2 mm about them, a lone one 1 mm
    const margin = scales ? 2 * scale : scale
    const [x0, y0] = [r2(0.5 + margin), r2(1 + margin + height * scale)]
    const full = r2(y0 + margin + 1)
    return (
      <svg
        viewBox={`0 0 ${column} ${full}`}
        width={column}
        height={full}
        role="img"
        aria-label={`${alt}, ${mm(width)} by ${mm(height)}`}
      >
        <MillimetreGrid left={0.5} right={column - 0.5} top={1} bottom={full - 1} originX={x0} originY={y0} scale={scale} />
        <image
          href={src}
          x={x0}
          y={r2(1 + margin)}
          width={r2(width * scale)}
          height={r2(height * scale)}
          preserveAspectRatio="none"
        />
        {marks.map(({ number, x, y }) => {
          const [px, py] = [r2(x0 + x * scale), r2(y0 - y * scale)]
          const [bx, by] = [px + (px > column - 40 ? -22 : 22), py + (py < 40 ? 22 : -22)]
          return (
            <g key={number}>
              <path className="halo" d={`M${px} ${py}L${bx} ${by}`} />
              <path className="ln" strokeWidth="1.5" d={`M${px} ${py}L${bx} ${by}`} />
              <circle cx={px} cy={py} r="3.5" fill="var(--color-ink)" stroke="var(--color-paper)" strokeWidth="1.5" />
              <Balloon number={number} x={bx} y={by} />
            </g>
          )
        })}
      </svg>
    )
  }
  return (
    <TwoDrawings
      wide={drawing(columns.wide, scales?.wide ?? fit(columns.wide - 1, 400, picture))}
      narrow={drawing(columns.narrow, scales?.narrow ?? fit(columns.narrow - 1, 330, picture))}
    />
  )
}

/** The scale at which each of several boards fits its column: the largest that does for all. */
export const commonScale = (column: number, widths: number[]): number => (column - 1) / (Math.max(1, ...widths) + 4)
