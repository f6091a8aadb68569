import { BoardAtScale } from '~/components/board-drawing'
import { Actions, ButtonLink } from '~/components/button'
import { Empty } from '~/components/empty'
import { Figure } from '~/components/figure'
import { Section } from '~/components/section'
import type { BoardPage } from '~/domain/boards/board-page.server'
import { picturePath, releasePath } from '~/domain/releases/release-path'

type Newest = NonNullable<BoardPage['newest']>

const sizeOf = ({ widthMm, heightMm }: Newest) =>
  widthMm !== null && heightMm !== null ? { width: widthMm, height: heightMm } : null
/** Whether the board's page draws a release, which makes it figure 1. */
export const isDrawn = (newest: Newest | null) => newest !== null && newest.pictureSha256 !== null && sizeOf(newest) !== null

/** The newest release drawn to scale, or that there is none. */
export function NewestRelease({ board }: { board: BoardPage }) {
  const { newest } = board
  if (!newest)
    return (
      <Section number={1} heading="The board">
        <Empty
          words="the first release goes here"
          action={board.canDraft && <ButtonLink href={`/boards/${board.slug}/releases/new`}>Draft a release</ButtonLink>}
        >
          {board.canDraft
            ? 'Nothing is released yet. A draft is yours alone until you publish it.'
            : 'Nothing is released yet. Its maintainer is still at work.'}
        </Empty>
      </Section>
    )
  const path = releasePath(board.slug, newest.version)
  const size = sizeOf(newest)
  return (
    <Section number={1} heading={`The board, ${newest.version}`}>
      {newest.pictureSha256 && size ? (
        <Figure
          number={1}
          caption={`Top side of ${newest.version}, drawn from the released files; a small square is 1 mm. ${size.width.toFixed(1)} × ${size.height.toFixed(1)} mm.`}
        >
          <BoardAtScale
            src={picturePath(board.slug, newest.version, 'top', newest.pictureSha256)}
            alt={`Top side of ${board.name} ${newest.version}`}
            {...size}
            columns={{ wide: 804, narrow: 326 }}
          />
        </Figure>
      ) : (
        <p>{size ? `${size.width.toFixed(1)} × ${size.height.toFixed(1)} mm. ` : ''}There is no picture of this release.</p>
      )}
      <div className="mt-4">
        <Actions>
          <ButtonLink href={path} kind={board.canDraft ? 'outline' : 'solid'}>
            Files, facts and findings of {newest.version}
          </ButtonLink>
        </Actions>
      </div>
    </Section>
  )
}
