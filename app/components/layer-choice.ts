/** A single layer that can be shown: a picture in one ink on nothing, as seen from the top. */
export type ViewerLayer = {
  /** Null for all drilled holes together. */
  file: string | null
  src: string
  function: string
  side: 'top' | 'bottom' | 'inner' | null
  index: number | null
}

/** From where the board is seen, and which single layers, counted from 0; none of them is the finished board. */
export type LayerChoice = { from: 'top' | 'bottom'; layers: number[] }

export type Pictures = { top: string | null; bottom: string | null }

const baseName = (path: string) => path.split('/').at(-1) ?? path

/** "L1 copper, top": in the trade's words. */
export function layerName({ function: fn, side, index }: ViewerLayer): string {
  const words = fn === 'copper' && index !== null ? `L${index} copper` : fn === 'drill' ? 'all holes' : fn
  return side === null ? words : `${words}, ${side}`
}

/**
 * What the address asks for: `view=top` or `bottom`, with `layer=2&layer=5` for single layers counted from 1; `view=2`, or
 * `view=` with the name of a layer's file, is that layer alone. What it does not name, or what cannot be shown, falls back: to the
 * finished board, and where that was not drawn to the first layer.
 */
export function readChoice(asked: URLSearchParams, layers: readonly ViewerLayer[], pictures: Pictures): LayerChoice {
  const view = asked.get('view') ?? ''
  const byName = layers.findIndex(({ file }) => file !== null && (file === view || baseName(file) === view))
  const named = byName >= 0 ? byName : numberOf(view)
  const wanted = [named, ...asked.getAll('layer').slice(0, layers.length).map(numberOf)].filter(
    (at) => at >= 0 && at < layers.length
  )
  const from = view === 'bottom' || (view === '' && !pictures.top && pictures.bottom) ? 'bottom' : 'top'
  const chosen = [...new Set(wanted)].sort((a, b) => a - b)
  return { from, layers: chosen.length === 0 && !pictures[from] && layers.length > 0 ? [0] : chosen }
}

const numberOf = (text: string) => (/^\d{1,3}$/.test(text) ? Number(text) - 1 : -1)

/** The query that asks for a choice. */
export const askFor = ({ from, layers }: LayerChoice): string =>
  [`view=${from}`, ...layers.map((at) => `layer=${at + 1}`)].join('&')

/** The ink of a layer, so that layers laid over each other are told apart. */
export function layerInk({ function: fn, side }: ViewerLayer): string {
  if (fn === 'copper')
    return side === 'bottom' ? 'var(--color-petrol)' : side === 'inner' ? 'var(--color-curve-4)' : 'var(--color-curve-2)'
  if (fn === 'outline' || fn.startsWith('drill') || fn === 'legend') return 'var(--color-ink)'
  return 'var(--color-edge)'
}

/** What is shown, in a sentence without its full stop. */
export function choiceInWords({ from, layers: chosen }: LayerChoice, layers: readonly ViewerLayer[]): string {
  const seen = from === 'bottom' ? 'seen from below, left and right changed over' : 'seen from the top'
  if (chosen.length === 0) return from === 'bottom' ? `Bottom side, ${seen}` : 'Top side'
  const names = chosen.map((at) => layerName(layers[at]!).replace(',', ''))
  const listed = names.length > 1 ? `${names.slice(0, -1).join(', ')} and ${names.at(-1)}` : names[0]
  return `${listed}, ${seen}`
}
