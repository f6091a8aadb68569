import type { Route } from './+types/page'
import { isDrawn, NewestRelease } from './newest-release'
import { ReleaseTable } from './release-table'
import { ButtonLink } from '~/components/button'
import { Definitions } from '~/components/definition'
import { DoneLine } from '~/components/done-line'
import { FitStrip } from '~/components/fit-strip'
import { LastingWords } from '~/components/lasting-words'
import { Prose } from '~/components/prose'
import { ReleaseLine } from '~/components/release-line'
import { MarginNote, Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { boardPage } from '~/domain/boards/board-page.server'
import { releasesOfBoard } from '~/domain/releases/board-releases.server'
import { lastingOf } from '~/domain/releases/lasting.server'
import { releasePath } from '~/domain/releases/release-path'
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
      done: asked !== null && Object.hasOwn(done, asked) ? done[asked as keyof typeof done] : null
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
      <NewestRelease board={board} />
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
        <ReleaseTable board={board} releases={releases} />
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
