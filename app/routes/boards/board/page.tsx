import type { Route } from './+types/page'
import { BoardAtScale } from '~/components/board-drawing'
import { Actions, ButtonLink } from '~/components/button'
import { Definitions } from '~/components/definition'
import { DoneLine } from '~/components/done-line'
import { Empty } from '~/components/empty'
import { Figure } from '~/components/figure'
import { FitStrip } from '~/components/fit-strip'
import { LastingWords } from '~/components/lasting-words'
import { Prose } from '~/components/prose'
import { ReleaseLine } from '~/components/release-line'
import { MarginNote, Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { boardPage } from '~/domain/boards/board-page.server'
import { releasesOfBoard } from '~/domain/releases/board-releases.server'
import { lastingOf } from '~/domain/releases/lasting.server'
import { picturePath, releasePath } from '~/domain/releases/release-path'
import { dayOf } from '~/lib/dates'
import { answerPage } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { services } from '~/server/services.server'

const done = { saved: 'The board is saved.', fit: 'The claims are saved.', deleted: 'The draft is deleted.' }

export const meta: Route.MetaFunction = ({ loaderData }) => {
  const board = (loaderData as { board?: { name: string; summary: string } } | undefined)?.board
  return board ? [{ title: `${board.name} · Fettle` }, { name: 'description', content: board.summary }] : [{ title: 'Fettle' }]
}

export function loader({ url, params, context }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const s = services()
    const { db, now } = s
    const board = await boardPage(db, context.get(actorContext), params.board)
    const asked = url.searchParams.get('done')
    return {
      board,
      releases: await releasesOfBoard(db, board.id, board.canDraft),
      lasting: await lastingOf(s, board.slug),
      today: dayOf(now()),
      done: asked !== null && asked in done ? done[asked as keyof typeof done] : null
    }
  })
}

export default function Board({ loaderData }: Route.ComponentProps) {
  const { board, releases, today } = loaderData
  const published = releases.flatMap((r) =>
    r.state === 'draft' || r.publishedOn === null
      ? []
      : [
          {
            version: r.version,
            state: r.state,
            on: r.publishedOn,
            boardRevision: r.boardRevision,
            href: releasePath(board.slug, r.version)
          }
        ]
  )
  return (
    <SiteSheet current="Boards" trail={[{ label: 'Boards', href: '/' }, { label: board.name }]}>
      <Title heading={board.name} lead={board.summary} actions={<BoardActions board={board} />}>
        {loaderData.done && <DoneLine what={loaderData.done} />}
        <Definitions
          layout="plate"
          items={[
            { label: 'Replaces', value: board.replaces },
            { label: 'Made for', value: <TextLink href={`/consoles/${board.consoleSlug}`}>{board.consoleName}</TextLink> },
            { label: 'Licence', value: board.licence }
          ]}
        />
      </Title>
      {published.length > 0 && <ReleaseLine board={board.name} releases={published} today={today} />}
      <Newest board={board} />
      <Section
        number={2}
        heading="What it fits"
        id="fit"
        margin={
          <>
            <p>
              <b>The maintainer’s claim,</b> per mainboard revision.{' '}
              <TextLink href={`/consoles/${board.consoleSlug}`}>Where the revision is printed</TextLink>
            </p>
            {board.canEdit && (
              <p>
                <TextLink href={`/boards/${board.slug}/fit`}>Change the claims</TextLink>
              </p>
            )}
          </>
        }
      >
        <FitStrip cells={board.fit.map((f) => ({ code: f.code, fit: f.claim, reason: f.reason || undefined }))} />
      </Section>
      <Section number={3} heading="Releases">
        <Releases {...loaderData} />
      </Section>
      <Section number={4} heading="How it works">
        {board.description ? (
          <Prose html={board.description} />
        ) : (
          <p className="soft">
            The maintainer has not described it yet.
            {board.canEdit && (
              <>
                {' '}
                <TextLink href={`/boards/${board.slug}/edit`}>Describe it</TextLink>
              </>
            )}
          </p>
        )}
        <MarginNote beside="top">
          <p>
            <b>Maintained by</b>{' '}
            {board.maintainers.map((m) => (m.role === 'owner' ? `${m.name} (owner)` : m.name)).join(', ') || 'nobody at present'}.
          </p>
          <p>Open since {board.openedOn}.</p>
        </MarginNote>
      </Section>
      <Section number={5} heading="How long it lasts">
        <LastingWords
          lasting={loaderData.lasting}
          name={board.name}
          figure={isDrawn(board.newest) ? 2 : 1}
          href={`/boards/${board.slug}/reliability`}
          link="Reliability by release and console revision"
        />
      </Section>
    </SiteSheet>
  )
}

type Data = Route.ComponentProps['loaderData']

function BoardActions({ board }: { board: Data['board'] }) {
  if (board.canDraft)
    return (
      <>
        <ButtonLink href={`/boards/${board.slug}/releases/new`}>Draft a release</ButtonLink>
        <ButtonLink kind="outline" href={`/boards/${board.slug}/edit`}>
          Edit the board
        </ButtonLink>
      </>
    )
  if (!board.newest) return null
  return (
    <>
      <ButtonLink href={releasePath(board.slug, board.newest.version)}>Open {board.newest.version}</ButtonLink>
      <ButtonLink kind="outline" href={`/report?board=${board.slug}`}>
        File a report
      </ButtonLink>
    </>
  )
}

type NewestRelease = NonNullable<Data['board']['newest']>

const sizeOf = ({ widthMm, heightMm }: NewestRelease) =>
  widthMm !== null && heightMm !== null ? { width: widthMm, height: heightMm } : null
const isDrawn = (newest: NewestRelease | null) => newest !== null && newest.pictureSha256 !== null && sizeOf(newest) !== null

/** The newest release drawn to scale, or that there is none. */
function Newest({ board }: { board: Data['board'] }) {
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

function Releases({ board, releases }: Pick<Data, 'board' | 'releases'>) {
  if (releases.length === 0) return <p className="soft">There is none yet.</p>
  const withdrawn = releases.filter((r) => r.withdrawnReason)
  return (
    <>
      <Table
        number={1}
        caption={
          board.canDraft
            ? 'By version, the highest first. Drafts are seen by maintainers alone.'
            : 'By version, the highest first.'
        }
        rows={releases}
        rowKey={(r) => r.version}
        columns={[
          {
            key: 'version',
            head: 'Version',
            isRowHead: true,
            cell: (r) => <TextLink href={releasePath(board.slug, r.version)}>{r.version}</TextLink>
          },
          {
            key: 'state',
            head: 'State',
            cell: (r) => (
              <>
                <b>{r.state}</b>
                {r.isNewest && ', newest'}
              </>
            )
          },
          { key: 'revision', head: 'Board revision', only: 'wide', cell: (r) => r.boardRevision },
          {
            key: 'on',
            head: 'Published',
            className: 'nw',
            cell: (r) => r.publishedOn ?? <span className="soft">changed {r.changedOn}</span>
          }
        ]}
      />
      {withdrawn.map((r) => (
        <p key={r.version} className="small mt-3 max-w-[66ch]">
          <b>Why {r.version} is withdrawn:</b> {r.withdrawnReason}
        </p>
      ))}
    </>
  )
}
