import { Button } from '~/components/button'
import { unitFor } from '~/components/chart-geometry'
import { SelectOptions } from '~/components/field'
import { Figure } from '~/components/figure'
import { Section } from '~/components/section'
import { SurvivalChart } from '~/components/survival-chart'
import { SurvivalStrips } from '~/components/survival-strips'
import { TextLink } from '~/components/text-link'
import { listOf, pText, tooFew } from '~/domain/reliability/reliability-words'
import { GroupTable } from './group-table'
import type { Numbering, ShownFigures, ShownGroup } from './page-figures'

type Props = { here: string; shown: ShownFigures; consoleName: string } & Numbering

export const unitOf = (groups: readonly ShownGroup[]) => unitFor(Math.max(1, ...groups.map((g) => g.points.at(-1)?.time ?? 1)))

/** The curves by console revision: four in one figure, each on its own strip, and all as a table. */
export function RevisionSections({ here, shown, consoleName, sections, figures }: Props) {
  const { byRevision, marked, beside, all } = shown
  const unit = unitOf(byRevision)
  const asOf = new URLSearchParams(shown.query).get('as-of')!
  const series = byRevision
    .filter((g) => g.group === marked || beside.includes(g.group))
    .map((g) => ({ name: g.group, points: g.points, marked: g.group === marked }))
  return (
    <>
      <Section number={1} heading="Time to failure, by console revision" margin={<CurveNotes here={here} shown={shown} />}>
        {byRevision.length > 1 && <CurvePicker here={here} shown={shown} />}
        {figures.curves === null ? (
          <NothingDrawn of="revision" />
        ) : (
          <Figure
            number={figures.curves}
            caption={
              <>
                Share still working, by Kaplan and Meier. Only the marked revision carries its 95&nbsp;% band and, as ticks, the
                last word from its working units. Thin and faint under 10 units followed, not drawn under {tooFew}.
              </>
            }
          >
            <SurvivalChart series={series} unit={unit} asOf={asOf} />
          </Figure>
        )}
      </Section>
      {sections.strips !== null && (
        <Section number={sections.strips} heading="Each on its own strip">
          <Figure
            number={figures.strips!}
            caption={`One revision each with its 95\u00a0% band and ticks, the others as hairlines, all at one scale. ${stripsNote(byRevision)}`}
          >
            <SurvivalStrips
              unit={unit}
              strips={byRevision.map((g) => ({
                name: g.group,
                points: g.points,
                counts: `${g.fitted} fitted, ${g.events} failed`
              }))}
            />
          </Figure>
        </Section>
      )}
      <Section number={sections.revisions} heading="Revision by revision">
        <GroupTable
          number={1}
          what="Revision"
          groups={byRevision}
          total={byRevision.length > 1 ? { ...all, group: consoleName } : null}
        />
      </Section>
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

function CurveNotes({ here, shown }: { here: string; shown: ShownFigures }) {
  const { revisionsDiffer: test, all } = shown
  return (
    <>
      {test && (
        <p>
          <b>Can they be told apart?</b> {test.p < 0.05 ? 'Yes, more than chance would explain' : 'Not yet'}: chi-square{' '}
          {test.chiSquare.toFixed(1)} on {test.degreesOfFreedom}, {pText(test.p)} (log-rank).
        </p>
      )}
      {all.failuresWithinInterval > 0 ? (
        <p>
          <b>
            {all.failuresWithinInterval === 1 ? 'One failure is' : `${all.failuresWithinInterval} failures are`} known only to an
            interval
          </b>{' '}
          of more than 14 days. Turnbull’s estimate keeps both ends: the curve falls at the end of a stretch in which it is not
          known.
        </p>
      ) : (
        <p>
          <b>Kaplan-Meier,</b> as every failure here is known to within 14 days.
        </p>
      )}
      {all.enteredLate > 0 && (
        <p>
          <b>Late reports</b> ({all.enteredLate}) count only from the day they were filed, so that survivors are no proof.
        </p>
      )}
      <p>
        <TextLink document href={`${here}.csv?${shown.query}`}>
          These points as CSV
        </TextLink>
      </p>
    </>
  )
}

/** Which revision is marked, and which stand beside it; works by address, without scripts. */
function CurvePicker({ here, shown }: { here: string; shown: ShownFigures }) {
  const { byRevision, marked, beside } = shown
  return (
    <form action={`${here}#s1`} method="get" key={`${marked} ${beside.join(' ')}`}>
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
