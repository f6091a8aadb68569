import { redirect } from 'react-router'
import type { Route } from './+types/page'
import { ButtonLink } from '~/components/button'
import { Empty } from '~/components/empty'
import { FitMark } from '~/components/fit-strip'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { revisionByCode } from '~/domain/consoles/consoles.server'
import { byFit } from '~/domain/fit/by-fit'
import type { OneYearWords } from '~/domain/reliability/one-year'
import { oneYearOnRevision } from '~/domain/reliability/one-year.server'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'
import { reportsWord } from '../console-words'

export const meta: Route.MetaFunction = ({ loaderData }) =>
  loaderData
    ? [
        { title: `${loaderData.consoleName} ${loaderData.revision.code} · Fettle` },
        { name: 'description', content: loaderData.revision.recognise }
      ]
    : [{ title: 'No such revision · Fettle' }]

/** Of so many boards the page gives the figure itself. */
const figuresMost = 12

export function loader({ params, url }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const { console, revision, before, after } = await revisionByCode(services().db, params.console, params.revision)
    if (revision.code !== params.revision) throw redirect(`/consoles/${console.slug}/${revision.code}`, 301)
    const boards = [...revision.boards].sort(byFit)
    const reported = boards.filter((board) => board.reports > 0).slice(0, figuresMost)
    const oneYear = await oneYearOnRevision(
      services(),
      reported.map(({ slug }) => slug),
      revision.code
    )
    return {
      oneYear: Object.fromEntries(oneYear),
      consoleName: console.name,
      consoleSlug: console.slug,
      revision: { ...revision, boards },
      before,
      after
    }
  })
}

export default function RevisionPage({ loaderData }: Route.ComponentProps) {
  const { consoleName, consoleSlug, revision, before, after, oneYear } = loaderData
  const trail = [
    { label: 'Boards', href: '/' },
    { label: 'Consoles', href: '/consoles' },
    { label: consoleName, href: `/consoles/${consoleSlug}` },
    { label: revision.code }
  ]
  const built = revision.builtFrom === null ? '' : `, built from ${revision.builtFrom}`
  return (
    <SiteSheet current="Consoles" trail={trail}>
      <Title
        heading={`${consoleName} ${revision.code}`}
        lead={`A mainboard revision of the ${consoleName}${built}. ${sentence(revision.reports)}`}
        margin={<Neighbours slug={consoleSlug} before={before} after={after} />}
      />
      <Section
        number={1}
        heading="How to recognise it"
        id="recognise"
        margin={
          <p>
            <b>Pull the plug first,</b> and wait. <TextLink href="/guides/safety">Safety</TextLink>
          </p>
        }
      >
        <p>{revision.recognise}</p>
        <p>
          <TextLink className="go" href={`/consoles/${consoleSlug}#revisions`}>
            Beside the other revisions
          </TextLink>
        </p>
      </Section>
      <Section number={2} heading="What fits it" id="fit">
        {revision.boards.length === 0 ? (
          <Empty action={<ButtonLink href="/boards/new">Name a board</ButtonLink>}>
            No board is made for this console yet. If you have designed one, it goes here.
          </Empty>
        ) : (
          <BoardTable consoleName={consoleName} revision={revision} oneYear={oneYear} />
        )}
      </Section>
    </SiteSheet>
  )
}

type Revision = Route.ComponentProps['loaderData']['revision']

const sentence = (reports: number) =>
  reports === 0 ? 'Nobody has reported a board on it yet.' : `${reportsWord(reports)} of boards fitted to it so far.`

type TableProps = { consoleName: string; revision: Revision; oneYear: Route.ComponentProps['loaderData']['oneYear'] }

function BoardTable({ consoleName, revision, oneYear }: TableProps) {
  return (
    <Table
      number={1}
      caption={`The boards for the ${consoleName}: what their maintainers claim for ${revision.code}, how often one was reported there, and how many of a hundred still work after a year, with the 95\u00a0% interval.`}
      columns={[
        {
          key: 'board',
          head: 'Board',
          isRowHead: true,
          cell: (board) => <TextLink href={`/boards/${board.slug}`}>{board.name}</TextLink>
        },
        { key: 'claim', head: 'Claim', cell: (board) => <FitMark fit={board.claim} />, className: 'nw' },
        { key: 'reason', head: 'Why', cell: (board) => board.reason },
        { key: 'reports', head: 'Reports', isFigure: true, cell: (board) => board.reports },
        {
          key: 'year',
          head: 'After one year',
          cell: (board) =>
            board.reports === 0 ? (
              <span className="soft">nobody has reported one</span>
            ) : (
              <>
                <OneYear words={oneYear[board.slug]} />{' '}
                <TextLink
                  href={`/boards/${board.slug}/reliability?revision=${revision.code}`}
                  aria-label={`How long ${board.name} lasts in ${revision.code}`}
                >
                  How long it lasts
                </TextLink>
              </>
            )
        }
      ]}
      rows={revision.boards}
      rowKey={(board) => board.slug}
      isFolded
    />
  )
}

/** The figure with its interval; nothing where it cannot be had just now. */
function OneYear({ words }: { words: OneYearWords | null | undefined }) {
  if (words === undefined) return null
  if (words === null) return <span className="soft block">too few followed</span>
  return (
    <span className="block">
      <b>{words.figure}</b> <span className="soft">({words.interval})</span>
    </span>
  )
}

function Neighbours({ slug, before, after }: { slug: string; before: string | null; after: string | null }) {
  return (
    <>
      {before && (
        <p>
          Before it: <TextLink href={`/consoles/${slug}/${before}`}>{before}</TextLink>
        </p>
      )}
      {after && (
        <p>
          After it: <TextLink href={`/consoles/${slug}/${after}`}>{after}</TextLink>
        </p>
      )}
    </>
  )
}
