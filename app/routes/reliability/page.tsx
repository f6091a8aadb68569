import { data } from 'react-router'
import type { Route } from './+types/page'
import { ButtonLink } from '~/components/button'
import { Empty } from '~/components/empty'
import { FilterStrip, Section } from '~/components/section'
import { SiteSheet } from '~/components/site-sheet'
import { TextLink } from '~/components/text-link'
import { Title } from '~/components/title'
import { reliabilityOf, reliabilityQuestion } from '~/domain/reliability/reliability.server'
import { answerPage } from '~/server/answer.server'
import { services } from '~/server/services.server'
import { CausesSection } from './causes-section'
import { FilterSentence } from './filter-sentence'
import { NotInCurveSection } from './not-in-curve-section'
import { numbering, pageFigures, type ShownFigures } from './page-figures'
import { ReleaseSection } from './release-section'
import { RevisionSections } from './revision-sections'
import { StepsSection } from './steps-section'

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: loaderData ? `How long ${loaderData.board.name} lasts · Fettle` : 'Reliability · Fettle' }
]

export function loader({ params, url }: Route.LoaderArgs) {
  return answerPage(url, async () => {
    const query = url.searchParams
    const { board, releases, revisions, filters, errors, today } = await reliabilityQuestion(services(), params.board, query)
    const choices = {
      releases: releases.map((r) => ({
        value: r.version,
        label: r.state === 'released' ? r.version : `${r.version}, ${r.state}`
      })),
      revisions: revisions.map((r) => ({ value: r.code, label: r.code }))
    }
    const asked = Object.fromEntries([...query].map(([name, value]) => [name, value.slice(0, 80)]))
    const shared = {
      board: { slug: board.slug, name: board.name, consoleName: board.console_name },
      choices,
      filters,
      asked,
      today
    }
    if (errors.length > 0) return data({ ...shared, errors, shown: null }, { status: 400 })
    const figures = await reliabilityOf(services(), params.board, filters)
    return data({ ...shared, errors, shown: pageFigures(figures, query) })
  })
}

export default function Reliability({ loaderData }: Route.ComponentProps) {
  const { board, choices, filters, asked, errors, shown } = loaderData
  const here = `/boards/${board.slug}/reliability`
  const isFiltered = shown !== null && shown.reports === 0 && Object.keys(asked).some((name) => asked[name] !== '')
  return (
    <SiteSheet
      current="Boards"
      trail={[{ label: 'Boards', href: '/' }, { label: board.name, href: `/boards/${board.slug}` }, { label: 'Reliability' }]}
      foot={shown ? `As of ${filters.asOf}, from ${shown.reports} reports` : undefined}
    >
      <Title
        heading={`How long ${board.name} lasts`}
        lead={
          shown === null
            ? 'Something below cannot be read as it stands. Mend it, and the figures come.'
            : shown.reports === 0
              ? 'Nothing is known yet, and nothing is claimed.'
              : shown.sentence
        }
        margin={
          shown !== null && shown.reports > 0 ? (
            <>
              <p>
                <b>{shown.all.fitted} fitted</b>, {shown.all.events} failed.
                {shown.followUp !== null && ` ${Math.floor(shown.followUp * 100)} % of the possible follow-up has been had.`}
              </p>
              {shown.excluded !== null && (
                <p>
                  {shown.excluded} <a href="#apart">Why</a>
                </p>
              )}
              <p>As of {filters.asOf}.</p>
            </>
          ) : undefined
        }
      />
      <FilterStrip label="Which reports are counted">
        <FilterSentence here={here} board={board} choices={choices} filters={filters} asked={asked} errors={errors} />
        {errors.length > 0 && (
          <p className="small mt-3">
            <TextLink href={here}>Count all reports instead</TextLink>
          </p>
        )}
      </FilterStrip>
      {shown !== null && shown.reports === 0 && (
        <Section number={1} heading="Time to failure">
          {isFiltered ? (
            <Empty action={<ButtonLink href={here}>Count all reports</ButtonLink>} harmless={<Excluded text={shown.excluded} />}>
              No report answers to these words. Widen them, or count all.
            </Empty>
          ) : (
            <Empty
              action={<ButtonLink href={`/report?board=${board.slug}`}>File the first report</ButtonLink>}
              harmless={<TextLink href={`/boards/${board.slug}`}>Back to {board.name}</TextLink>}
            >
              {`Nobody has reported fitting ${board.name} yet. Each report, of a success or a failure, draws the first of this curve.`}
            </Empty>
          )}
        </Section>
      )}
      {shown !== null && shown.reports > 0 && <Shown here={here} board={board} shown={shown} />}
    </SiteSheet>
  )
}

function Shown({ here, board, shown }: { here: string; board: { name: string; consoleName: string }; shown: ShownFigures }) {
  const { sections, figures } = numbering(shown)
  return (
    <>
      <RevisionSections here={here} shown={shown} consoleName={board.consoleName} sections={sections} figures={figures} />
      <ReleaseSection number={sections.releases} figure={figures.releases} shown={shown} boardName={board.name} />
      <CausesSection number={sections.causes} all={shown.all} />
      <NotInCurveSection number={sections.apart} shown={shown} />
      <StepsSection number={sections.steps} here={here} shown={shown} />
    </>
  )
}

const Excluded = ({ text }: { text: string | null }) => (text === null ? null : <span className="soft">{text}</span>)
