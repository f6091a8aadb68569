import type { Route } from './+types/page'
import { FirstSteps } from './first-steps'
import { LatestReports } from './latest-reports'
import { ButtonLink } from '~/components/button'
import { Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { benchOf } from '~/domain/releases/board-releases.server'
import { releasePath } from '~/domain/releases/release-path'
import { latestReports } from '~/domain/reports/latest.server'
import { answerPage } from '~/server/answer.server'
import { actorContext } from '~/server/context'
import { services } from '~/server/services.server'

export const meta: Route.MetaFunction = () => [{ title: 'My bench · Fettle' }]

export const loader = ({ url, context }: Route.LoaderArgs) =>
  answerPage(url, async () => {
    const actor = context.get(actorContext)
    return { ...(await benchOf(services().db, actor)), reports: await latestReports(services(), actor) }
  })

export default function Bench({ loaderData: { boards, drafts, reports } }: Route.ComponentProps) {
  const hasBoards = boards.length > 0
  return (
    <SiteSheet current="My bench" trail={[{ label: 'Boards', href: '/' }, { label: 'My bench' }]}>
      <Title
        heading="My bench"
        lead={
          hasBoards
            ? 'The drafts that wait for you, what installers say, and your boards.'
            : 'This is where your drafts, incoming reports and silent units will lie.'
        }
        actions={
          <>
            {hasBoards && (
              <ButtonLink kind="outline" href="/boards/new">
                Name a board
              </ButtonLink>
            )}
            <ButtonLink kind="outline" href="/reports">
              Reports that you filed
            </ButtonLink>
          </>
        }
      />
      {!hasBoards && <FirstSteps />}
      {hasBoards && (
        <>
          <Section number={1} heading="Drafts">
            {drafts.length === 0 ? (
              <p className="soft">No draft lies here. Draft a release from one of your boards below.</p>
            ) : (
              <Table
                caption="The one changed last first. Only maintainers see them."
                rows={drafts}
                rowKey={(d) => `${d.boardSlug} ${d.version}`}
                isFolded
                columns={[
                  {
                    key: 'draft',
                    head: 'Draft',
                    isRowHead: true,
                    cell: (d) => <TextLink href={releasePath(d.boardSlug, d.version)}>{`${d.boardName} ${d.version}`}</TextLink>
                  },
                  { key: 'revision', head: 'Board revision', cell: (d) => d.boardRevision },
                  { key: 'waits', head: 'Waits for', cell: (d) => d.waitsFor },
                  { key: 'changed', head: 'Changed', cell: (d) => d.changedOn }
                ]}
              />
            )}
          </Section>
          <Section
            number={2}
            heading="Latest reports"
            id="reports"
            margin={
              reports.length > 0 && (
                <p>
                  <b>Read the failures first.</b> A report can be answered by the next release; nobody but a steward can take it
                  out.
                </p>
              )
            }
          >
            <LatestReports reports={reports} />
          </Section>
          <Section number={3} heading="Boards">
            <Table
              caption="The boards you maintain, by name."
              rows={boards}
              rowKey={(b) => b.id}
              isFolded
              columns={[
                {
                  key: 'name',
                  head: 'Board',
                  isRowHead: true,
                  cell: (b) => <TextLink href={`/boards/${b.slug}`}>{b.name}</TextLink>
                },
                { key: 'console', head: 'For', cell: (b) => b.consoleName },
                {
                  key: 'newest',
                  head: 'Newest release',
                  cell: (b) =>
                    b.newest ? (
                      <>
                        <TextLink href={releasePath(b.slug, b.newest.version)}>{b.newest.version}</TextLink>, {b.newest.state}
                      </>
                    ) : (
                      <span className="soft">none yet</span>
                    )
                },
                {
                  key: 'next',
                  head: 'Next',
                  cell: (b) => <TextLink href={`/boards/${b.slug}/releases/new`}>Draft a release</TextLink>
                }
              ]}
            />
          </Section>
        </>
      )}
    </SiteSheet>
  )
}
