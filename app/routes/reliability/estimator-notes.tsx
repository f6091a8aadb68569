import { listOf } from '~/domain/reliability/reliability-words'
import { GuideLink } from './csv-link'
import type { ShownGroup } from './page-figures'

type Props = { groups: Pick<ShownGroup, 'group' | 'estimator' | 'failuresWithinInterval' | 'n'>[]; grain: 1 | 14 }

/** Which estimator each curve is by, and why. */
export function EstimatorNotes({ groups, grain }: Props) {
  const drawn = groups.filter((g) => g.n > 0)
  const wide = drawn.filter((g) => g.estimator === 'turnbull')
  const names = (some: typeof drawn) => listOf(some.map((g) => g.group))
  if (wide.length === 0)
    return (
      <p>
        <b>Kaplan-Meier,</b> as every failure here is known to within 14 days.{' '}
        <GuideLink to="worked-examples#curve">Worked by hand</GuideLink>
      </p>
    )
  const failures = wide.reduce((sum, g) => sum + g.failuresWithinInterval, 0)
  return (
    <p>
      <b>Turnbull{wide.length < drawn.length && ` for ${names(wide)}`}:</b> {failures}{' '}
      {failures === 1 ? 'failure there lies' : 'failures there lie'} somewhere between two days more than 14 apart. Where a box is
      hatched or a line slants, it is not known when the curve falls.
      {wide.length < drawn.length &&
        ` Kaplan-Meier for ${names(drawn.filter((g) => g.estimator === 'kaplan-meier'))}, where all days are known.`}
      {grain > 1 && ' With so many units, days are counted in fortnights.'}{' '}
      <GuideLink to="worked-examples#intervals">Worked by hand</GuideLink>
    </p>
  )
}
