import type { Route } from './+types/page'
import { ButtonLink } from '~/components/button'
import { Definitions } from '~/components/definition'
import { Empty } from '~/components/empty'
import { Figure } from '~/components/figure'
import { FitStrip } from '~/components/fit-strip'
import { canBeRuled, RevisionRule } from '~/components/revision-rule'
import { Section, SubHeading } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { consoleBySlug, type ConsoleDetail } from '~/domain/consoles/consoles.server'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'
import { builtYears, kindWord } from '../console-words'

export const meta: Route.MetaFunction = ({ loaderData }) =>
  loaderData
    ? [
        { title: `${loaderData.console.name}: its revisions, and what fits · Fettle` },
        { name: 'description', content: loaderData.console.summary }
      ]
    : [{ title: 'No such console · Fettle' }]

export function loader({ params, url }: Route.LoaderArgs) {
  return answerPage(url, async () => ({ console: await consoleBySlug(services().db, params.console) }))
}

export default function ConsolePage({ loaderData: { console } }: Route.ComponentProps) {
  const trail = [{ label: 'Boards', href: '/' }, { label: 'Consoles', href: '/consoles' }, { label: console.name }]
  return (
    <SiteSheet current="Consoles" trail={trail}>
      <Title
        heading={console.name}
        lead={console.summary}
        actions={<ButtonLink href={`/fit?console=${console.slug}`}>See what fits</ButtonLink>}
      >
        <Definitions
          layout="plate"
          items={[
            { label: 'Maker', value: console.maker },
            { label: 'Kind', value: kindWord[console.kind] },
            { label: 'Built', value: builtYears(console.builtFrom, console.builtTo) }
          ]}
        />
      </Title>
      <Revisions console={console} />
      <Fit console={console} />
    </SiteSheet>
  )
}

function Revisions({ console }: { console: ConsoleDetail }) {
  return (
    <Section
      number={1}
      heading="Which revision do I have?"
      id="revisions"
      margin={
        <>
          <p>
            <b>Pull the plug first,</b> take out batteries, and wait before you look inside.{' '}
            <TextLink href="/guides/safety">Safety</TextLink>
          </p>
          <p>
            <b>Two signs are better than one:</b> mainboards were swapped in repairs.
          </p>
        </>
      }
    >
      {console.revisions.length === 0 ? (
        <Empty>No revision of this console has been described yet.</Empty>
      ) : (
        <>
          {canBeRuled(console.revisions, console.builtTo) && (
            <Figure
              number={1}
              caption="When each revision was built. The years overlap at the edges: makers use up what they have."
            >
              <RevisionRule
                revisions={console.revisions.map((r) => ({ code: r.code, from: r.builtFrom! }))}
                until={console.builtTo}
              />
            </Figure>
          )}
          <Table
            number={1}
            caption="The mainboards in the order in which they were built."
            columns={[
              {
                key: 'code',
                head: 'Revision',
                isRowHead: true,
                className: 'nw',
                cell: (r) => <TextLink href={`/consoles/${console.slug}/${r.code}`}>{r.code}</TextLink>
              },
              { key: 'from', head: 'From', isFigure: true, cell: (r) => r.builtFrom ?? '?' },
              { key: 'recognise', head: 'How to recognise it', label: '', className: 'long', cell: (r) => r.recognise },
              { key: 'reports', head: 'Reports', isFigure: true, cell: (r) => r.reports }
            ]}
            rows={console.revisions}
            rowKey={(r) => r.code}
            isFolded
          />
        </>
      )}
    </Section>
  )
}

function Fit({ console }: { console: ConsoleDetail }) {
  const boards = console.revisions[0]?.boards ?? []
  return (
    <Section
      number={2}
      heading="What fits it"
      id="fit"
      margin={
        <p>
          <b>The maintainers’ claims,</b> per console revision. What became of the boards that were fitted is on their pages.
        </p>
      }
    >
      {boards.length === 0 ? (
        <Empty action={<ButtonLink href="/boards/new">Name a board</ButtonLink>}>
          No board is made for this console yet. If you have designed one, it goes here.
        </Empty>
      ) : (
        boards.map((board, i) => (
          <div key={board.slug}>
            <SubHeading>
              <TextLink href={`/boards/${board.slug}`}>{board.name}</TextLink>
            </SubHeading>
            <p className="mb-3">{board.summary}</p>
            <FitStrip
              cells={console.revisions.map((r) => ({
                code: r.code,
                fit: r.boards[i]!.claim,
                reason: r.boards[i]!.reason,
                href: `/consoles/${console.slug}/${r.code}`
              }))}
            />
          </div>
        ))
      )}
    </Section>
  )
}
