import { Figure } from '~/components/figure'
import { IncidenceChart } from '~/components/incidence-chart'
import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { causeFilterWords, causeNames } from '~/domain/reliability/filter-words'
import type { CauseFilter } from '~/domain/reliability/reliability-filters'
import { tooFew, upperPercent } from '~/domain/reliability/reliability-words'
import { causes } from '~/domain/reports/report-words'
import { CsvLink, GuideLink } from './csv-link'
import { unitOf, type SectionProps } from './curves-section'
import type { ShownTotal } from './page-figures'

type Props = SectionProps & { cause: CauseFilter; everyCause: string }

/** What the failures came from, as their authors say, and how much fails by each cause while the others are there too. */
export function CausesSection({ here, shown, sections, figures, tables, cause, everyCause }: Props) {
  const { all, query } = shown
  return (
    <Section
      number={sections.causes!}
      id="causes"
      heading="What failed"
      margin={<CauseNotes all={all} isOneCause={cause !== 'all'} />}
    >
      <p>
        <CauseWords all={all} cause={cause} everyCause={everyCause} />
      </p>
      {figures.causes !== null && (
        <Figure
          number={figures.causes}
          caption={`Share failed by each cause, all revisions. Causes compete, so the lines add up to the share that failed. Not drawn where fewer than ${tooFew} are followed.`}
        >
          <IncidenceChart causes={shown.causes.rows} unit={unitOf(shown.byRevision)} grain={shown.causes.grain} />
        </Figure>
      )}
      {tables.causes !== null && (
        <div>
          <Table
            number={tables.causes}
            caption={`Percent failed by each cause, with 95\u00a0% interval, while the other causes are there too: after one year, and by the last day on which ${tooFew} were followed.`}
            rows={shown.causes.rows}
            rowKey={(row) => row.name}
            columns={[
              {
                key: 'cause',
                head: 'Cause',
                isRowHead: true,
                cell: (row) => (
                  <>
                    {row.name}
                    {row.name === causeNames.unknown && (
                      <small className="soft block font-normal">counts against the board</small>
                    )}
                  </>
                )
              },
              { key: 'n', head: 'Failures', isFigure: true, cell: (row) => row.failures },
              { key: 'year', head: 'After one year', isFigure: true, cell: (row) => incidenceText(row.atOneYear) },
              {
                key: 'last',
                head: `By day ${shown.causes.until ?? 0}`,
                isFigure: true,
                only: 'wide',
                cell: (row) => incidenceText(row.last)
              }
            ]}
          />
          <CsvLink here={here} query={query} table="incidence" />
        </div>
      )}
    </Section>
  )
}

type Incidence = { estimate: number; lower: number | null; upper: number | null; bound: string | null }

/** "4.2 (2.6 to 6.9)"; without a failure of that cause the upper bound alone. */
function incidenceText(at: Incidence | null): string {
  if (at === null) return 'too few'
  const { estimate, lower, upper, bound } = at
  if (bound !== null || estimate === 0) return upper === null ? 'none' : `none, ≤ ${upperPercent(upper)}`
  const share = (estimate * 100).toFixed(1)
  return lower === null || upper === null ? share : `${share} (${oneDigit(lower, 'down')} to ${oneDigit(upper, 'up')})`
}

/** Percent to one digit, rounded away from the claim. */
const oneDigit = (share: number, direction: 'down' | 'up'): string =>
  ((direction === 'down' ? Math.floor(share * 1000 + 1e-9) : Math.ceil(share * 1000 - 1e-9)) / 10).toFixed(1)

function CauseWords({ all, cause, everyCause }: { all: ShownTotal; cause: CauseFilter; everyCause: string }) {
  const by = all.failuresByCause
  const known = causes.reduce((sum, one) => sum + by[one], 0)
  if (known === 0) return <>Nothing is known to have failed among the {all.n} units in the curve.</>
  const laid = by.board + by.unknown
  const list = causes.filter((one) => by[one] > 0).map((one) => `${causeNames[one].toLowerCase()} ${by[one]}`)
  if (cause !== 'all')
    return (
      <>
        The curves fall only at {causeFilterWords[cause]}:{' '}
        {all.events === known ? `all ${known}` : `${all.events} of the ${known} failures`} ({list.join(', ')}). A unit that failed
        by another cause is followed up to the last day on which it is known to have run.{' '}
        <TextLink href={everyCause}>Every cause beside the others</TextLink>
      </>
    )
  return (
    <>
      Of the {known} failures, {laid} {laid === 1 ? 'is' : 'are'} laid to the board.
      {by.unknown > 0 &&
        ` That includes ${by.unknown} of unknown cause, which ${by.unknown === 1 ? 'counts' : 'count'} against it.`}{' '}
      The curves above fall at every failure, whatever its cause: they say whether the console still works.
    </>
  )
}

function CauseNotes({ all, isOneCause }: { all: ShownTotal; isOneCause: boolean }) {
  return (
    <>
      {all.failuresByCause['wrong-diagnosis'] > 0 && (
        <p>
          <b>Wrong diagnosis:</b> the board was sound, the fault lay elsewhere.{' '}
          <TextLink href="/guides/safety">Check before soldering</TextLink>
        </p>
      )}
      {isOneCause ? (
        <p>
          <b>One cause alone</b> takes it that the others strike without regard to it.{' '}
          <GuideLink to="worked-examples#one-cause">Worked by hand</GuideLink>
        </p>
      ) : (
        <p>
          <b>Aalen-Johansen,</b> failures on the day they were found.{' '}
          <GuideLink to="worked-examples#causes">Worked by hand</GuideLink>
        </p>
      )}
    </>
  )
}
