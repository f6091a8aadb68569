import { useEffect, useRef, useState, type ReactNode } from 'react'
import { Figure } from './figure'
import { askFor, choiceInWords, layerInk, readChoice, type LayerChoice, type Pictures, type ViewerLayer } from './layer-choice'
import { LayerChoices } from './layer-choices'
import { LayerPane, type PaneMark, type PanePicture } from './layer-pane'
import { LayerTools } from './layer-tools'
import { lookAt, mostZoom, paneFor, wholeBoard, within, type Extent, type Point, type Sight, type View } from './layer-view'
import { afterKey } from './use-pane-gestures'
import { jumpWithin } from '~/lib/jump-within'

/** A place that something is said about; a side of null concerns both. */
export type ViewerMark = PaneMark & { side: 'top' | 'bottom' | null }

export type LayerViewerProps = {
  id: string
  /** Of the figure. */
  number: number
  caption: ReactNode
  /** "Buttress 1.1.0". */
  name: string
  /** What every picture shows, in mm as the layers count. */
  extent: Extent
  pictures: Pictures
  layers: ViewerLayer[]
  marks: ViewerMark[]
  /** The query of the page's address: `view`, `layer`, and `at` for the number of a mark. */
  asked: string
}

/** The address that shows a mark; within the page a script follows it without a page load. */
export const showMark = (id: string, { number, side }: { number: number; side: 'top' | 'bottom' | null }) => ({
  href: `?view=${side ?? 'top'}&at=${number}#${id}`,
  'data-mark': number
})

const narrowWidth = 328
const wideWidth = 804
const round = (n: number) => n.toFixed(2)

/**
 * Both sides and every single layer of a board, to look at closely. The server draws what the address asks for, in a wide and a narrow
 * pane; a script then draws one pane as wide as its column and moves it.
 */
export function LayerViewer({ id, number, caption, name, extent, pictures, layers, marks, asked }: LayerViewerProps) {
  const box = useRef<HTMLDivElement>(null)
  const [width, setWidth] = useState<number | null>(null)
  const [choice, setChoice] = useState<LayerChoice>(() => readChoice(new URLSearchParams(asked), layers, pictures))
  const [shown, setShown] = useState<number | null>(() => marks.find(askedMark(asked))?.number ?? null)
  const sightOf = (px: number): Sight => ({
    extent,
    pane: px < 600 ? paneFor(extent, px, 240, 340) : paneFor(extent, px, 300, 480),
    isFromBelow: choice.from === 'bottom'
  })
  const sight = sightOf(width ?? wideWidth)
  const [view, setView] = useState<View>(() => {
    const mark = marks.find(askedMark(asked))
    return mark ? lookAt(mark, wholeBoard(sight), sight) : wholeBoard(sight)
  })
  const [point, setPoint] = useState<Point | null>(null)
  const [told, setTold] = useState('')
  const current = within(view, sight)

  useEffect(() => {
    const measure = new ResizeObserver(([entry]) => setWidth(Math.max(240, Math.round(entry!.contentRect.width))))
    measure.observe(box.current!)
    return () => measure.disconnect()
  }, [])

  function show(next: LayerChoice) {
    setChoice(next)
    window.history.replaceState(window.history.state, '', `?${askFor(next)}`)
  }
  function move(next: View, isStep: boolean) {
    setView(next)
    if (isStep)
      setTold(next.zoom === 1 ? 'The whole board' : `Middle ${placeInWords(next)}, ${next.zoom.toFixed(1)} times the whole`)
  }

  const follow = useRef<(number: number) => boolean>(() => false)
  useEffect(() => {
    follow.current = (number) => {
      const mark = marks.find((one) => one.number === number)
      if (!mark) return false
      if (mark.side && mark.side !== choice.from) show({ ...choice, from: mark.side })
      setShown(number)
      move(lookAt(mark, current, sight), true)
      box.current!.scrollIntoView({ block: 'center' })
      box.current!.querySelector('svg')!.focus({ preventScroll: true })
      return true
    }
  })
  useEffect(() => {
    const onClick = (event: MouseEvent) => {
      if (event.defaultPrevented || event.button !== 0 || event.ctrlKey || event.metaKey || event.shiftKey || event.altKey) return
      const link = event.target instanceof Element ? event.target.closest('a[data-mark]') : null
      if (link && follow.current(Number(link.getAttribute('data-mark')))) event.preventDefault()
      else if (event.target instanceof Element && box.current?.contains(event.target)) jumpWithin(event)
    }
    document.addEventListener('click', onClick, true)
    return () => document.removeEventListener('click', onClick, true)
  }, [])

  const drawn = picturesOf(choice, layers, pictures)
  const seen = marks.filter((mark) => mark.side === null || mark.side === choice.from || choice.layers.length > 0)
  const words = choiceInWords(choice, layers)
  const hint = marks.length > 0 ? ' A number leads to what the check found there.' : ''
  const pane = (px: number) => (
    <LayerPane
      view={view}
      sight={sightOf(px)}
      pictures={drawn}
      marks={seen}
      shown={shown}
      label={`${name}: ${words}`}
      describedBy={`${id}-keys`}
      onView={move}
      onPoint={setPoint}
    />
  )
  return (
    <div className="lv" id={id}>
      <Figure number={number} caption={caption}>
        <div ref={box} className="lv-box">
          {width !== null ? (
            pane(width)
          ) : (
            <>
              <div className="on-w">{pane(wideWidth)}</div>
              <div className="on-n">{pane(narrowWidth)}</div>
            </>
          )}
        </div>
        <p className="lv-read small">
          <b>{words}.</b> {drawn.length === 0 && 'This side could not be drawn. '}
          <span className="nw no-print">
            {point ? `Under the pointer ${placeInWords(point)}` : `In the middle ${placeInWords(current)}`}
          </span>
        </p>
        {width !== null && (
          <LayerTools
            canZoomIn={current.zoom < mostZoom(sight)}
            canZoomOut={current.zoom > 1}
            onKey={(key) => {
              const next = afterKey(key, current, sight)
              if (next) move(next, true)
            }}
          />
        )}
      </Figure>
      <p className="vh" role="status">
        {told}
      </p>
      <p className="hint no-print" id={`${id}-keys`}>
        {width === null
          ? 'With scripts the board can be zoomed and moved here.'
          : 'Arrow keys move, + and − zoom, 0 shows the whole board. Drag to move; pinch, or turn the wheel with Ctrl held or after a press on the board, to zoom.'}
        {hint}
      </p>
      <LayerChoices choice={choice} layers={layers} pictures={pictures} id={id} isLive={width !== null} onChoice={show} />
    </div>
  )
}

const placeInWords = ({ x, y }: Point) => `x ${round(x)}, y ${round(y)} mm`

function askedMark(asked: string): (mark: ViewerMark) => boolean {
  const at = new URLSearchParams(asked).get('at')
  return ({ number }) => String(number) === at
}

function picturesOf({ from, layers: chosen }: LayerChoice, layers: readonly ViewerLayer[], pictures: Pictures): PanePicture[] {
  if (chosen.length === 0) return pictures[from] === null ? [] : [{ src: pictures[from], isMirrored: false }]
  return chosen.map((at) => ({ src: layers[at]!.src, ink: layerInk(layers[at]!), isMirrored: from === 'bottom' }))
}
