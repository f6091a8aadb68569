import { numberedPlaces } from './board-viewer'
import { BoardAtScale, BoardDrawing } from '~/components/board-drawing'
import { CopperStack } from '~/components/copper-stack'
import { Figure, Keys } from '~/components/figure'
import { MarginNote } from '~/components/section'
import { describeFinding } from '~/domain/bundle/describe-finding'
import type { FindingCode } from '~/domain/bundle/finding-codes'
import type { ReleasePage } from '~/domain/releases/release-page.server'

/** As many balloons as have room over and under a board; the viewer shows every place. */
const mostBalloons = 10

/** What is drawn of a release without being asked. */
function drawn({ facts, pictures, files, pictureBox }: ReleasePage) {
  const isMeasured = facts !== null && facts.width !== null && facts.height !== null
  const copper = files
    .filter((f) => f.function === 'copper' && f.layer_index !== null)
    .sort((a, b) => a.layer_index! - b.layer_index!)
  // Two files for one layer are a finding; a section through them would show a board that nobody can make.
  const isStack = new Set(copper.map((f) => f.layer_index)).size === copper.length
  return {
    top: isMeasured ? pictures.top : null,
    bottom: isMeasured && pictures.top ? pictures.bottom : null,
    size: isMeasured ? { width: facts.width!, height: facts.height! } : null,
    origin: pictureBox ? { x: -pictureBox.minX, y: -pictureBox.minY } : { x: 0, y: 0 },
    copper: isStack ? copper : []
  }
}

/** How many figures `BoardFigures` draws. */
export const drawnFigures = (page: ReleasePage) => {
  const { top, bottom, copper } = drawn(page)
  return [top, bottom, copper.length > 0].filter(Boolean).length
}

/** Both sides, drawn from the files, and the copper layers in section: the top with its dimensions on the millimetre grid. */
export function BoardFigures({ page }: { page: ReleasePage }) {
  const { board, release } = page
  const { top, bottom, size, origin, copper } = drawn(page)
  const name = `${board.name} ${release.version}`
  const keys = keysOf(page)
  const balloons = (side: 'top' | 'bottom') => keys.filter((key) => key.side === side)
  const isAtCorner = Math.abs(origin.x) < 0.01 && Math.abs(origin.y) < 0.01
  const stack = copper.length > 0 && (
    <Figure number={1 + [top, bottom].filter(Boolean).length} caption={<StackCaption count={copper.length} release={release} />}>
      <CopperStack
        layers={copper.map((f) => ({ name: `L${f.layer_index}`, note: f.side ?? '' }))}
        thicknessMm={release.thicknessMm}
      />
    </Figure>
  )
  return (
    <>
      {!top && (
        <p className="soft">
          {size
            ? `${size.width.toFixed(1)} × ${size.height.toFixed(1)} mm. The sides could not be drawn; what was measured and found still stands.`
            : 'The outline could not be measured, so the board is not drawn. What was found still stands.'}
        </p>
      )}
      {top && (
        <Figure
          number={1}
          span="hang"
          caption={
            <>
              Top side, drawn from the {release.state === 'draft' ? 'uploaded' : 'released'} files. Places are counted from 0, 0
              {isAtCorner ? '' : ' of the layers'}; a small square is 1 mm. <a href="#board-viewer">Look closer</a> or{' '}
              <a href={top}>open large</a>
            </>
          }
        >
          <BoardDrawing src={top} alt={`Top side of ${name}`} {...size!} origin={origin} places={balloons('top')} />
        </Figure>
      )}
      {keys.length > 0 && top && (
        <MarginNote beside="top">
          <Keys>
            {keys.map(({ title, finding }) => (
              <a key={finding} href={`#f${finding}`}>
                {title}
              </a>
            ))}
          </Keys>
        </MarginNote>
      )}
      {bottom ? (
        <div className="two">
          <Figure
            number={2}
            caption={
              <>
                Bottom side, seen from below. <a href={bottom}>Open large</a>
              </>
            }
          >
            <BoardAtScale
              src={bottom}
              alt={`Bottom side of ${name}`}
              {...size!}
              columns={{ wide: 382, narrow: 326 }}
              marks={balloons('bottom')}
            />
          </Figure>
          {stack}
        </div>
      ) : (
        stack
      )}
    </>
  )
}

const words = ['no', 'One', 'Two', 'Three', 'Four', 'Five', 'Six', 'Seven', 'Eight', 'Nine', 'Ten']

function StackCaption({ count, release }: { count: number; release: ReleasePage['release'] }) {
  return (
    <>
      {words[count] ?? count} copper {count === 1 ? 'layer' : 'layers'}
      {release.thicknessMm !== null && `, ${release.thicknessMm} mm in all`}
      {release.copperUm !== null && `, copper of ${release.copperUm} µm declared`}. Not to scale.
    </>
  )
}

/** The places of the figures in the order of their numbers. */
function keysOf(page: ReleasePage) {
  return numberedPlaces(page)
    .flatMap((numbered, i) =>
      numbered ? { ...numbered, finding: i + 1, title: describeFinding(page.findings[i]!.code as FindingCode).title } : []
    )
    .sort((a, b) => a.number - b.number)
    .filter(({ number }) => number <= mostBalloons)
    .map(({ number, x, y, side, finding, title }) => ({ number, x, y, side, finding, title }))
}
