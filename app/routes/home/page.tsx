import type { Route } from './+types/page'
import { BoardAtScale, commonScale } from '~/components/board-drawing'
import { Actions, Button, ButtonLink, GoLink } from '~/components/button'
import { ConsoleQuestion } from '~/components/console-question'
import { Definitions } from '~/components/definition'
import { Empty, NothingFound } from '~/components/empty'
import { Figure } from '~/components/figure'
import { ScaleBar } from '~/components/scale-bar'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { listBoards, type ListedBoard } from '~/domain/boards/boards.server'
import { consolesToAsk } from '~/domain/fit/fit-question.server'
import { siteCounts } from '~/domain/public-data/site-counts.server'
import type { OneYearWords } from '~/domain/reliability/one-year'
import { oneYearOfBoards } from '~/domain/reliability/one-year.server'
import { actorContext } from '~/server/context'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [
  { title: 'Repair boards, and how they last · Fettle' },
  {
    name: 'description',
    content: 'Open-hardware repair boards for old consoles, and how long they last, from the reports of those who fitted them.'
  }
]

const boardsOnAPage = 12

export function loader({ url, context }: Route.LoaderArgs) {
  const q = (url.searchParams.get('q') ?? '').trim().slice(0, 100)
  return answerPage(url, async () => {
    const [{ boards, next }, consoles, counts] = await Promise.all([
      listBoards(services().db, { q, after: url.searchParams.get('after'), limit: boardsOnAPage }),
      consolesToAsk(services().db),
      siteCounts(services())
    ])
    const oneYear = await oneYearOfBoards(
      services(),
      boards.map((b) => b.slug)
    )
    return {
      q,
      next,
      boards: boards.map((board) => ({ ...board, oneYear: oneYear.get(board.slug) ?? null })),
      consoles,
      counts,
      isMember: context.get(actorContext).userId !== null
    }
  })
}

export default function Home({ loaderData: { q, boards, next, consoles, counts, isMember } }: Route.ComponentProps) {
  return (
    <SiteSheet current="Boards" foot={counts}>
      <Title
        isHome
        isTop
        heading="Repair boards for old consoles, and how long they really last."
        lead="Take the files to a board house, fit the board, say how it went. The figures here come from those reports, and say how much is not known."
        aside={<Search q={q} />}
      />
      <Section number={1} heading="What fits my console?">
        <ConsoleQuestion consoles={consoles} />
        <p className="small soft">
          Not sure of the revision? It is printed on the mainboard. <TextLink href="/consoles">Where to look</TextLink>
        </p>
      </Section>
      <Section number={2} heading={q ? `Boards with “${q}”` : 'The boards'}>
        {boards.length > 0 ? <Boards boards={boards} /> : <NoBoards q={q} />}
        {next && <GoLink href={`/?${new URLSearchParams({ ...(q && { q }), after: next })}`}>Further boards</GoLink>}
      </Section>
      {!isMember && (
        <Section number={3} heading="My bench">
          <p>
            Whoever designs a board opens it here, states which revisions it fits, and releases its files once the check finds
            nothing that stops a board house.
          </p>
          <Actions>
            <ButtonLink href="/boards/new">Name a board</ButtonLink>
            <ButtonLink kind="outline" href="/guides/releasing">
              How a release is made
            </ButtonLink>
          </Actions>
        </Section>
      )}
    </SiteSheet>
  )
}

function Search({ q }: { q: string }) {
  return (
    <form role="search" action="/">
      <label htmlFor="q">Search</label>
      <div className="with mt-1.5">
        <input id="q" name="q" type="search" defaultValue={q} maxLength={100} aria-describedby="q-hint" />
        <Button>Find</Button>
      </div>
      <span className="hint mt-1.5" id="q-hint">
        Board, console, or the part it replaces
      </span>
    </form>
  )
}

const sizeOf = ({ newest }: ListedBoard) =>
  newest?.widthMm != null && newest.heightMm != null ? { width: newest.widthMm, height: newest.heightMm } : null

type Shown = ListedBoard & { oneYear: OneYearWords | null }

function Boards({ boards }: { boards: Shown[] }) {
  const widths = boards.flatMap((b) => sizeOf(b)?.width ?? [])
  const columns = { wide: 540, narrow: 328 }
  const scales = { wide: commonScale(columns.wide, widths), narrow: commonScale(columns.narrow, widths) }
  return (
    <Figure number={1} span="wide" caption="All boards at one scale.">
      {boards.map((board) => {
        const size = sizeOf(board)
        return (
          <article className="brd" key={board.id}>
            <div>
              {board.newest?.thumbnail && size ? (
                <BoardAtScale
                  src={board.newest.thumbnail}
                  alt={`Top side of ${board.name} ${board.newest.version}`}
                  {...size}
                  columns={columns}
                  scales={scales}
                />
              ) : (
                <p className="soft">{board.newest ? 'Not drawn.' : 'Nothing released yet.'}</p>
              )}
            </div>
            <div>
              <h3>
                <TextLink href={`/boards/${board.slug}`}>{board.name}</TextLink>{' '}
                <span className="soft">
                  {board.newest ? `${board.newest.version}${board.newest.state === 'trial' ? ', trial' : ''}` : ''}
                </span>
              </h3>
              <p>{board.summary}</p>
              <Definitions
                items={[
                  { label: 'For', value: board.consoleName },
                  ...(size ? [{ label: 'Size', value: `${size.width.toFixed(0)} × ${size.height.toFixed(0)} mm` }] : []),
                  { label: 'Works after a year', value: <OneYear board={board} /> }
                ]}
              />
            </div>
          </article>
        )
      })}
      {widths.length > 0 && (
        <div className="scale">
          <ScaleBar scales={scales} />
        </div>
      )}
    </Figure>
  )
}

function OneYear({ board: { slug, name, oneYear } }: { board: Shown }) {
  const href = `/boards/${slug}/reliability`
  if (oneYear === null) return <TextLink href={href}>too few followed to say</TextLink>
  return (
    <>
      <TextLink href={href} aria-label={`How long ${name} lasts: ${oneYear.figure} work after a year, ${oneYear.interval}`}>
        {oneYear.figure}
      </TextLink>{' '}
      <span className="soft">({oneYear.interval})</span>
    </>
  )
}

function NoBoards({ q }: { q: string }) {
  if (q)
    return (
      <NothingFound what={`No board with “${q}”.`}>
        <p>
          Try one word of its name or of the part it replaces, or look <TextLink href="/">at all boards</TextLink>.
        </p>
      </NothingFound>
    )
  return (
    <Empty words="your first board goes here" action={<ButtonLink href="/boards/new">Name a board</ButtonLink>}>
      No board is here yet. The first one starts with its name and the part it replaces.
    </Empty>
  )
}
