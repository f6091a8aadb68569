import { useId, useRef } from 'react'
import { Balloon } from './balloons'
import { gridLines, pictureBox, rulerLength, scaleOf, toPane, within, type Point, type Sight, type View } from './layer-view'
import { usePaneGestures } from './use-pane-gestures'

/** A picture that covers the whole extent; with an ink it is drawn in that ink only. */
export type PanePicture = { src: string; ink?: string; isMirrored: boolean }

/** A place with a balloon that leads to what is said of it. */
export type PaneMark = { number: number; x: number; y: number; href: string; label: string }

export type LayerPaneProps = {
  view: View
  sight: Sight
  pictures: PanePicture[]
  marks: PaneMark[]
  /** The mark that was asked for. */
  shown: number | null
  label: string
  describedBy: string
  onView: (view: View, isStep: boolean) => void
  onPoint: (place: Point | null) => void
}

const r2 = (n: number) => Math.round(n * 100) / 100

/** The board in its pane: grid, pictures laid over each other, marks; a ruler under it, where it hides nothing. */
export function LayerPane({ view: wanted, sight, pictures, marks, shown, label, describedBy, onView, onPoint }: LayerPaneProps) {
  const svg = useRef<SVGSVGElement>(null)
  const id = useId()
  const view = within(wanted, sight)
  const gestures = usePaneGestures({ svg, view, sight, onView, onPoint })
  const { width, height } = sight.pane
  const inks = [...new Set(pictures.flatMap(({ ink }) => ink ?? []))]
  const box = pictureBox(view, sight)
  return (
    <>
      <svg
        ref={svg}
        className="lv-pane"
        viewBox={`0 0 ${width} ${height}`}
        width={width}
        height={height}
        role="group"
        aria-label={label}
        aria-describedby={describedBy}
        tabIndex={0}
        data-zoomed={view.zoom > 1 ? '' : undefined}
        {...gestures}
      >
        <defs>
          {inks.map((ink, i) => (
            <filter key={ink} id={`${id}-${i}`} x="0" y="0" width="1" height="1">
              <feFlood floodColor={ink} />
              <feComposite operator="in" in2="SourceAlpha" />
            </filter>
          ))}
        </defs>
        <Grid view={view} sight={sight} />
        {pictures.map(({ src, ink, isMirrored }) => (
          <image
            key={src}
            href={src}
            x={r2(box.x)}
            y={r2(box.y)}
            width={r2(box.width)}
            height={r2(box.height)}
            preserveAspectRatio="none"
            filter={ink && `url(#${id}-${inks.indexOf(ink)})`}
            opacity={ink && pictures.length > 1 ? 0.8 : undefined}
            transform={isMirrored ? `translate(${r2(2 * box.x + box.width)} 0) scale(-1 1)` : undefined}
          />
        ))}
        <path className="lv-cross halo" d={cross(width / 2, height / 2)} />
        <path className="lv-cross ln" strokeWidth="1.5" d={cross(width / 2, height / 2)} />
        {marks.map((mark) => (
          <Mark key={mark.number} mark={mark} at={toPane(mark, view, sight)} pane={sight.pane} isShown={mark.number === shown} />
        ))}
        <path className="ln" strokeWidth="1.5" d={`M0 .75H${width}M0 ${height - 0.75}H${width}`} />
      </svg>
      <Ruler scale={scaleOf(view, sight)} most={Math.min(160, width / 3)} />
    </>
  )
}

const cross = (x: number, y: number) => `M${x - 9} ${y}h6M${x + 3} ${y}h6M${x} ${y - 9}v6M${x} ${y + 3}v6`

function Grid({ view, sight }: { view: View; sight: Sight }) {
  const { across, down } = gridLines(view, sight)
  const { width, height } = sight.pane
  const path = (isHeavy: boolean) =>
    across
      .filter((line) => line.isHeavy === isHeavy)
      .map(({ at }) => `M${r2(at)} 0V${height}`)
      .join('') +
    down
      .filter((line) => line.isHeavy === isHeavy)
      .map(({ at }) => `M0 ${r2(at)}H${width}`)
      .join('')
  return (
    <g className="mm">
      <path d={path(false)} className="mm1" />
      <path d={path(true)} className="mm5" />
    </g>
  )
}

function Mark({ mark, at, pane, isShown }: { mark: PaneMark; at: Point; pane: Sight['pane']; isShown: boolean }) {
  if (at.x < 0 || at.y < 0 || at.x > pane.width || at.y > pane.height) return null
  const [x, y] = [r2(at.x), r2(at.y)]
  const bx = r2(x + (x > pane.width - 48 ? -26 : 26))
  const by = r2(y + (y < 48 ? 28 : -28))
  const leader = `M${x} ${y}L${bx} ${by}`
  return (
    <a href={mark.href} aria-label={mark.label} className="lv-mark">
      <path className="halo" d={leader} />
      <path className="ln" strokeWidth="1.5" d={leader} />
      <circle cx={x} cy={y} r={isShown ? 9 : 5} className="halo" />
      <circle cx={x} cy={y} r={isShown ? 9 : 5} className="ln" strokeWidth={isShown ? 3 : 1.5} />
      <circle cx={bx} cy={by} r="22" fill="transparent" />
      <Balloon number={mark.number} x={bx} y={by} />
    </a>
  )
}

function Ruler({ scale, most }: { scale: number; most: number }) {
  const length = rulerLength(scale, most)
  const px = r2(length * scale)
  return (
    <svg
      className="lv-ruler"
      viewBox="0 0 240 24"
      width="240"
      height="24"
      role="img"
      aria-label={`The ruler is ${length} mm long`}
    >
      <path className="ln" strokeWidth="1.5" d={`M1 8V16H${1 + px}V8`} />
      <text x={r2(px + 9)} y="18" className="t-b">
        {length} mm
      </text>
    </svg>
  )
}
