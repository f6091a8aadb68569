import { useEffect, useRef, type KeyboardEvent, type PointerEvent, type RefObject } from 'react'
import { panBy, toPlace, within, wholeBoard, zoomAbout, type Point, type Sight, type View } from './layer-view'

/** One step of a key or a button. */
export const zoomStep = 1.5
export const panStep = 1 / 5

export type PaneGesturesProps = {
  svg: RefObject<SVGSVGElement | null>
  view: View
  sight: Sight
  /** `isStep` is true for a key, whose effect a reader of the screen has to be told. */
  onView: (view: View, isStep: boolean) => void
  /** The place under the pointer; null when it has left. */
  onPoint: (place: Point | null) => void
}

/** Drags shorter than this are presses. */
const slackPx = 4

const isSame = (a: View, b: View) => a.x === b.x && a.y === b.y && a.zoom === b.zoom

/**
 * What mouse, touch and keys do to a pane. The page keeps scrolling: the wheel zooms only with Ctrl held or while the pane has the focus
 * and there is something left to zoom, arrows scroll the page where the board cannot move, and a finger drags only what is zoomed in.
 */
export function usePaneGestures({ svg, view, sight, onView, onPoint }: PaneGesturesProps) {
  const now = useRef({ view, sight, onView })
  useEffect(() => {
    now.current = { view, sight, onView }
  })
  /** Two fingers' events come in one go: the second must go on from where the first has led, before anything is drawn anew. */
  const lead = (next: View) => {
    now.current = { ...now.current, view: next }
    onView(next, false)
  }
  const pointers = useRef(new Map<number, { at: Point; from: Point; isDrag: boolean }>())

  /** The event's place in px of the pane, which may be shown smaller than it is. */
  const inPane = (event: { clientX: number; clientY: number }): Point => {
    const box = svg.current!.getBoundingClientRect()
    const shrink = sight.pane.width / box.width
    return { x: (event.clientX - box.left) * shrink, y: (event.clientY - box.top) * shrink }
  }

  useEffect(() => {
    const element = svg.current
    if (!element) return
    const onWheel = (event: WheelEvent) => {
      const { view, sight, onView } = now.current
      if (!event.ctrlKey && document.activeElement !== element) return
      const box = element.getBoundingClientRect()
      const shrink = sight.pane.width / box.width
      const at = { x: (event.clientX - box.left) * shrink, y: (event.clientY - box.top) * shrink }
      const lines = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? 30 : 1
      const factor = Math.exp(-Math.max(-240, Math.min(240, event.deltaY * lines)) / 400)
      const next = zoomAbout(view, factor, toPlace(at, view, sight), sight)
      if (isSame(next, view) && !event.ctrlKey) return
      event.preventDefault()
      onView(next, false)
    }
    element.addEventListener('wheel', onWheel, { passive: false })
    return () => element.removeEventListener('wheel', onWheel)
  }, [svg])

  function onKeyDown(event: KeyboardEvent) {
    if (event.ctrlKey || event.metaKey || event.altKey) return
    const next = afterKey(event.key, view, sight)
    if (!next || isSame(next, view)) return
    event.preventDefault()
    onView(next, true)
  }

  function onPointerDown(event: PointerEvent) {
    if (event.button !== 0) return
    const at = inPane(event)
    pointers.current.set(event.pointerId, { at, from: at, isDrag: false })
  }

  function onPointerMove(event: PointerEvent) {
    const at = inPane(event)
    const { view } = now.current
    onPoint(toPlace(at, view, sight))
    const held = pointers.current.get(event.pointerId)
    if (!held) return
    if (event.pointerType === 'mouse' && event.buttons === 0) return end(event)
    if (!held.isDrag && Math.hypot(at.x - held.from.x, at.y - held.from.y) < slackPx) return
    if (!held.isDrag) svg.current!.setPointerCapture(event.pointerId)
    const before = held.at
    pointers.current.set(event.pointerId, { ...held, at, isDrag: true })
    const other = [...pointers.current].find(([id]) => id !== event.pointerId)?.[1].at
    if (!other) return lead(panBy(view, before.x - at.x, before.y - at.y, sight))
    const apart = (point: Point) => Math.max(1, Math.hypot(point.x - other.x, point.y - other.y))
    const middle = (point: Point) => ({ x: (point.x + other.x) / 2, y: (point.y + other.y) / 2 })
    const zoomed = zoomAbout(view, apart(at) / apart(before), toPlace(middle(before), view, sight), sight)
    lead(panBy(zoomed, middle(before).x - middle(at).x, middle(before).y - middle(at).y, sight))
  }

  function end(event: PointerEvent) {
    pointers.current.delete(event.pointerId)
  }
  function onPointerLeave(event: PointerEvent) {
    if (!pointers.current.get(event.pointerId)?.isDrag) end(event)
    onPoint(null)
  }
  return { onKeyDown, onPointerDown, onPointerMove, onPointerUp: end, onPointerCancel: end, onPointerLeave }
}

/** The view after a key; null for a key that means nothing here. */
export function afterKey(key: string, view: View, sight: Sight): View | null {
  const { width, height } = sight.pane
  switch (key) {
    case 'ArrowLeft':
      return panBy(view, -width * panStep, 0, sight)
    case 'ArrowRight':
      return panBy(view, width * panStep, 0, sight)
    case 'ArrowUp':
      return panBy(view, 0, -height * panStep, sight)
    case 'ArrowDown':
      return panBy(view, 0, height * panStep, sight)
    case '+':
    case '=':
      return zoomAbout(view, zoomStep, view, sight)
    case '-':
    case '_':
      return zoomAbout(view, 1 / zoomStep, view, sight)
    case '0':
      return within(wholeBoard(sight), sight)
    default:
      return null
  }
}
