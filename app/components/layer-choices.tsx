import { Actions, Button } from './button'
import { layerInk, layerName, type LayerChoice, type Pictures, type ViewerLayer } from './layer-choice'

export type LayerChoicesProps = {
  choice: LayerChoice
  layers: readonly ViewerLayer[]
  pictures: Pictures
  /** Where a browser without scripts finds the viewer again. */
  id: string
  /** Whether a script applies a choice at once. */
  isLive: boolean
  onChoice: (choice: LayerChoice) => void
}

const baseName = (path: string) => path.split('/').at(-1) ?? path

/** What the viewer shows: from where, and which single layers over each other. Without scripts a form that asks for another page. */
export function LayerChoices({ choice, layers, pictures, id, isLive, onChoice }: LayerChoicesProps) {
  const toggle = (at: number) => ({
    ...choice,
    layers: choice.layers.includes(at) ? choice.layers.filter((one) => one !== at) : [...choice.layers, at].sort((a, b) => a - b)
  })
  const isDrawn = pictures.top !== null || pictures.bottom !== null
  return (
    <form method="get" action={`#${id}`} className="lv-choices no-print">
      <fieldset className="pick">
        <legend>Seen</legend>
        {(['top', 'bottom'] as const).map((from) => (
          <label key={from}>
            <input
              type="radio"
              name="view"
              value={from}
              checked={choice.from === from}
              onChange={() => onChoice({ ...choice, from })}
            />
            {from === 'top' ? 'from the top' : 'from below'}
          </label>
        ))}
      </fieldset>
      {layers.length > 0 && (
        <fieldset>
          <legend>Single layers</legend>
          <span className="hint" id={`${id}-layers-hint`}>
            Any of them, laid over each other. {isDrawn && 'With none chosen the finished board is shown. '}From below, every
            layer is shown with left and right changed over, those of the bottom too.
          </span>
          <div className="lv-layers" aria-describedby={`${id}-layers-hint`}>
            {layers.map((layer, at) => (
              <label key={layer.src} className="opt">
                <input
                  type="checkbox"
                  name="layer"
                  value={at + 1}
                  checked={choice.layers.includes(at)}
                  onChange={() => onChoice(toggle(at))}
                />
                <span>
                  <svg width="14" height="14" viewBox="0 0 14 14" aria-hidden="true" className="lv-ink">
                    <rect x="1" y="1" width="12" height="12" fill={layerInk(layer)} />
                  </svg>
                  {layerName(layer)} {layer.file !== null && <small title={layer.file}>{baseName(layer.file)}</small>}
                </span>
              </label>
            ))}
          </div>
        </fieldset>
      )}
      {!isLive && (
        <Actions>
          <Button kind="outline">Show these</Button>
        </Actions>
      )}
      {isLive && isDrawn && choice.layers.length > 0 && (
        <Actions>
          <Button type="button" kind="outline" onClick={() => onChoice({ ...choice, layers: [] })}>
            Show the finished board
          </Button>
        </Actions>
      )}
    </form>
  )
}
