import { Button } from '~/components/button'
import { unitFor } from '~/components/chart-geometry'
import { SelectOptions } from '~/components/field'
import { Figure } from '~/components/figure'
import { Section } from '~/components/section'
import { SurvivalChart } from '~/components/survival-chart'
import { SurvivalStrips } from '~/components/survival-strips'
import { shareWords } from '~/domain/reliability/filter-words'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import { listOf, tooFew } from '~/domain/reliability/reliability-words'
import { CsvLink } from './csv-link'
import { EstimatorNotes } from './estimator-notes'
import type { Numbering } from './numbering'
import type { ShownFigures, ShownGroup } from './page-figures'

export type SectionProps = { here: string; shown: ShownFigures } & Numbering

export const unitOf = (groups: readonly ShownGroup[]) => unitFor(Math.max(1, ...groups.map((g) => g.points.at(-1)?.time ?? 1)))
export const asOfOf = (shown: ShownFigures) => new URLSearchParams(shown.query).get('as-of')!

/** Four curves by console revision in one figure, and each on its own strip. */
export function CurvesSections({
  here,
  shown,
  sections,
  figures,
  filters
}: SectionProps & { filters: Pick<ReliabilityFilters, 'cause'> }) {
  const { byRevision, marked, beside, all, grain, query } = shown
  const unit = unitOf(byRevision)
  const share = shareWords[filters.cause]
  const series = byRevision
    .filter((g) => g.group === marked || beside.includes(g.group))
    .map((g) => ({ name: g.group, points: g.points, marked: g.group === marked }))
  return (
    <>
      <Section
        number={sections.curves!}
        id="curves"
        heading={byRevision.length > 1 ? 'Time to failure, by console revision' : 'Time to failure'}
        margin={
          <>
            <EstimatorNotes groups={byRevision} grain={grain} />
            {all.enteredLate > 0 && (
              <p>
                <b>Late reports</b> ({all.enteredLate}) count only from the day they were filed, so that survivors are no proof.
              </p>
            )}
            <CsvLink here={here} query={query} table="curve">
              These curves as CSV
            </CsvLink>
          </>
        }
      >
        {byRevision.length > 1 && <CurvePicker here={here} shown={shown} />}
        {figures.curves === null ? (
          <NothingDrawn of="revision" />
        ) : (
          <Figure
            number={figures.curves}
            caption={
              <>
                Share {share}. {series.length > 1 ? 'Only the marked revision carries' : 'With'} its 95&nbsp;% band and, as ticks,
                the last word from its working units. Thin and faint under 10 units followed, not drawn under {tooFew}.
              </>
            }
          >
            <SurvivalChart series={series} unit={unit} asOf={asOfOf(shown)} grain={shown.drawnGrain.revision} share={share} />
          </Figure>
        )}
      </Section>
      {sections.strips !== null && (
        <Section number={sections.strips} id="strips" heading="Each on its own strip">
          <Figure
            number={figures.strips!}
            caption={`One revision each with its 95\u00a0% band and ticks, the others as hairlines, all at one scale. ${stripsNote(byRevision)}`}
          >
            <SurvivalStrips
              unit={unit}
              share={share}
              grain={shown.drawnGrain.revision}
              strips={byRevision.map((g) => ({
                name: g.group,
                points: g.points,
                counts: `${g.fitted} fitted, ${g.events} failed`
              }))}
            />
          </Figure>
        </Section>
      )}
    </>
  )
}

/** In a chart's place when nobody is followed in numbers. */
export const NothingDrawn = ({ of }: { of: 'revision' | 'release' }) => (
  <p>
    No {of} here has {tooFew} units followed, and under {tooFew} no curve is drawn. The table has what is known.
  </p>
)

function stripsNote(groups: readonly ShownGroup[]): string {
  const small = groups.filter((g) => !g.points.some((p) => p.atRisk >= tooFew)).map((g) => g.group)
  return small.length === 0 ? '' : `${listOf(small)} ${small.length === 1 ? 'is' : 'are'} too small to draw.`
}

/** Which revision is marked, and which stand beside it; works by address, without scripts. */
function CurvePicker({ here, shown }: { here: string; shown: ShownFigures }) {
  const { byRevision, marked, beside } = shown
  return (
    <form action={`${here}#curves`} method="get" key={`${marked} ${beside.join(' ')}`}>
      {[...new URLSearchParams(shown.query)].map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <div className="mk">
        <label htmlFor="mark">Marked, with its band</label>
        <select id="mark" name="mark" defaultValue={marked ?? undefined}>
          <SelectOptions options={byRevision.map((g) => ({ value: g.group, label: g.group }))} />
        </select>
      </div>
      <fieldset className="pick">
        <legend>Beside it, three at most</legend>
        {byRevision.map((g) => (
          <label key={g.group}>
            <input type="checkbox" name="beside" value={g.group} defaultChecked={beside.includes(g.group)} />
            {g.group}
          </label>
        ))}
        <Button kind="outline">Draw</Button>
      </fieldset>
    </form>
  )
}
