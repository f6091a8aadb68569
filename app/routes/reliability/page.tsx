import { data } from 'react-router'
import type { Route } from './+types/page'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { FilterStrip } from '~/components/section'
import { Title } from '~/components/title'
import { selectionHeading, selectionLabel } from '~/domain/reliability/filter-words'
import { reliabilityOf, reliabilityQuestion } from '~/domain/reliability/reliability.server'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'
import { FlaggedBatches } from './batches-section'
import { filterChoices } from './filter-choices'
import { FilterSentence } from './filter-sentence'
import { FiltersInForce } from './filters-in-force'
import { hrefsOf } from './hrefs'
import { NothingReported } from './nothing-reported'
import { pageFigures, type ShownFigures } from './page-figures'
import { Shown } from './shown'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `${loaderData.heading} · Fettle` : 'Reliability · Fettle' },
  ...(loaderData?.shown ? [{ name: 'description', content: loaderData.shown.sentence }] : [])
]

export function loader({ params, url }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const query = url.searchParams
    const question = await reliabilityQuestion(services(), params.board, query)
    const { board, releases, filters, errors, today } = question
    const shared = {
      board: { slug: board.slug, name: board.name, consoleName: board.console_name, consoleSlug: board.console_slug },
      choices: filterChoices(question, filters),
      boardRevisionOf: Object.fromEntries(releases.map((r) => [r.version, r.board_revision])),
      asked: Object.fromEntries([...query].map(([name, value]) => [name, value.slice(0, 80)])),
      filters,
      today,
      errors
    }
    if (errors.length > 0)
      return data({ ...shared, heading: `How long ${board.name} lasts`, label: null, shown: null }, { status: 400 })
    const figures = await reliabilityOf(services(), params.board, filters)
    const [heading, label] = [selectionHeading(board.name, filters), selectionLabel(board.name, filters)]
    return data({ ...shared, heading, label, shown: pageFigures(figures, query) })
  })
}

export default function Reliability({ loaderData }: Route.ComponentProps) {
  const { board, choices, boardRevisionOf, filters, asked, errors, today, heading, label, shown } = loaderData
  const here = `/boards/${board.slug}/reliability`
  const hrefs = hrefsOf(here, filters, today)
  return (
    <SiteSheet current="Boards" trail={trailOf(board, here, label)} foot={footOf(shown, filters.asOf)}>
      <Title
        heading={heading}
        lead={leadOf(shown)}
        margin={shown !== null && shown.reports > 0 ? <Margin shown={shown} here={here} asOf={filters.asOf} /> : undefined}
      >
        {shown !== null && <FlaggedBatches flagged={shown.flagged} hrefOf={hrefs.batch} />}
      </Title>
      <FilterStrip label="Which reports are counted">
        <FilterSentence here={here} board={board} choices={choices} filters={filters} asked={asked} errors={errors} />
        {errors.length > 0 ? (
          <p className="small mt-3">
            <TextLink href={here}>Count all reports instead</TextLink>
          </p>
        ) : (
          <FiltersInForce here={here} filters={filters} today={today} />
        )}
      </FilterStrip>
      {shown !== null && shown.reports === 0 && (
        <NothingReported here={here} board={board} excluded={shown.excluded} filters={filters} />
      )}
      {shown !== null && shown.reports > 0 && (
        <Shown here={here} board={board} shown={shown} filters={filters} boardRevisionOf={boardRevisionOf} hrefs={hrefs} />
      )}
    </SiteSheet>
  )
}

const trailOf = (board: { slug: string; name: string }, here: string, label: string | null) => [
  { label: 'Boards', href: '/' },
  { label: board.name, href: `/boards/${board.slug}` },
  ...(label === null ? [{ label: 'Reliability' }] : [{ label: 'Reliability', href: here }, { label }])
]

const footOf = (shown: ShownFigures | null, asOf: string) =>
  shown ? `As of ${asOf}, from ${shown.reports} ${shown.reports === 1 ? 'report' : 'reports'}` : undefined

function leadOf(shown: ShownFigures | null): string {
  if (shown === null) return 'Something below cannot be read as it stands. Mend it, and the figures come.'
  return shown.reports === 0 ? 'Nothing is known yet, and nothing is claimed.' : shown.sentence
}

function Margin({ shown, here, asOf }: { shown: ShownFigures; here: string; asOf: string }) {
  const { all, excluded, query } = shown
  return (
    <>
      <p>
        <b>{all.fitted} fitted</b>, {all.events} failed.
        {all.followUp !== null && ` ${Math.floor(all.followUp.ratio * 100 + 1e-9)} % of the possible follow-up has been had.`}
      </p>
      {excluded !== null && (
        <p>
          {excluded} <a href="#apart">Why</a>
        </p>
      )}
      <p>
        As of {asOf}. <TextLink href="/guides/figures">How the figures are made</TextLink>
      </p>
      <p>
        <TextLink href={`${here}?${query}`}>An address that keeps these figures</TextLink>
      </p>
    </>
  )
}
