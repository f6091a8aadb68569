import type { ReactNode } from 'react'

export type LayerToolsProps = {
  canZoomIn: boolean
  canZoomOut: boolean
  /** As the key of the same meaning: `+`, `-`, `0`, `ArrowLeft` and so on. */
  onKey: (key: string) => void
}

const arrows = [
  ['ArrowLeft', 'Move left', 'M15 5l-7 7 7 7'],
  ['ArrowUp', 'Move up', 'M5 15l7-7 7 7'],
  ['ArrowDown', 'Move down', 'M5 9l7 7 7-7'],
  ['ArrowRight', 'Move right', 'M9 5l7 7-7 7']
] as const

/** Zooming and panning by buttons, for those who neither drag nor use keys. A button that can do nothing now says so and stays. */
export function LayerTools({ canZoomIn, canZoomOut, onKey }: LayerToolsProps) {
  const button = (key: string, name: string | undefined, isOn: boolean, children: ReactNode) => (
    <button
      key={key}
      type="button"
      className="btn alt"
      aria-label={name}
      title={name}
      aria-disabled={isOn ? undefined : true}
      onClick={() => isOn && onKey(key)}
    >
      {children}
    </button>
  )
  return (
    <div className="lv-tools no-print" role="group" aria-label="Zoom and move">
      {button('+', 'Zoom in', canZoomIn, <Stroke d="M12 4v16M4 12h16" />)}
      {button('-', 'Zoom out', canZoomOut, <Stroke d="M4 12h16" />)}
      {button('0', undefined, canZoomOut, 'Whole board')}
      <div>{arrows.map(([key, name, d]) => button(key, name, canZoomOut, <Stroke d={d} />))}</div>
    </div>
  )
}

const Stroke = ({ d }: { d: string }) => (
  <svg width="24" height="24" viewBox="0 0 24 24" aria-hidden="true">
    <path d={d} fill="none" stroke="currentColor" strokeWidth="2.4" />
  </svg>
)
