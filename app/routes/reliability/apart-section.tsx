import { Definitions } from '~/components/definition'
import { Section } from '~/components/section'
import { exclusionWords } from '~/domain/reports/report-words'
import { GuideLink } from './csv-link'
import type { SectionProps } from './curves-section'

/** What the curves leave out or hold in part, counted. */
export function ApartSection({ shown, sections }: Pick<SectionProps, 'shown' | 'sections'>) {
  const { all, excludedByKind } = shown
  const excluded = excludedByKind.reduce((sum, e) => sum + e.count, 0)
  const items = [
    { label: 'In the curve', value: `${all.n} of ${all.fitted} reports` },
    { label: 'From their filing day on', value: `${all.enteredLate}, filed more than 14 days after fitting` },
    { label: 'Failed before it was filed', value: `${all.failedBeforeRegistration}, listed and left out` },
    { label: 'Filed late, silent since', value: `${all.notFollowed}, never followed` },
    {
      label: 'Failed between two days',
      value: `${all.failuresWithinInterval}, more than 14 days apart; both ends are kept`
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
      number={sections.apart!}
      id="apart"
      heading="What stands apart"
      margin={
        <>
          <p>Only a steward excludes a report, with a reason that everybody can read on it.</p>
          <p>
            <GuideLink to="worked-examples#lives">From reports to days</GuideLink>
          </p>
        </>
      }
    >
      <Definitions items={items} />
    </Section>
  )
}
