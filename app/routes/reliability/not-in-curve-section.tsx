import { Definitions } from '~/components/definition'
import { Section } from '~/components/section'
import { exclusionWords } from '~/domain/reports/report-words'
import type { ShownFigures } from './page-figures'

/** What the curves leave out or hold in part, counted. */
export function NotInCurveSection({ number, shown }: { number: number; shown: ShownFigures }) {
  const { all, excludedByKind } = shown
  const excluded = excludedByKind.reduce((sum, e) => sum + e.count, 0)
  const items = [
    { label: 'In the curve', value: `${all.n} of ${all.fitted} reports` },
    { label: 'From their filing day on', value: `${all.enteredLate}, filed more than 14 days after fitting` },
    { label: 'Failed before it was filed', value: `${all.failedBeforeRegistration}, listed and left out` },
    { label: 'Filed late, silent since', value: `${all.notFollowed}, never followed` },
    {
      label: 'Failed within an interval',
      value: `${all.failuresWithinInterval}, known less closely than to 14 days; drawn at the day found`
    },
    {
      label: 'Excluded',
      value:
        excluded === 0
          ? 'none'
          : excludedByKind.map(({ kind, count }) => `${count}: ${exclusionWords[kind].label.toLowerCase()}`).join('; ')
    }
  ]
  return (
    <Section
      number={number}
      id="apart"
      heading="What stands apart"
      margin={<p>Only a steward excludes a report, with a reason that everybody can read on it.</p>}
    >
      <Definitions items={items} />
    </Section>
  )
}
