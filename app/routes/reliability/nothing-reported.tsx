import { ButtonLink } from '~/components/button'
import { Empty } from '~/components/empty'
import { Section } from '~/components/section'
import { TextLink } from '~/components/text-link'
import { filterNames, filtersQuery, type ReliabilityFilters } from '~/domain/reliability/reliability-filters'

type Props = { here: string; board: { slug: string; name: string }; excluded: string | null; filters: ReliabilityFilters }

/** In the figures' place when no report answers: wider words where some were chosen, else the first report. */
export function NothingReported({ here, board, excluded, filters }: Props) {
  const names = [...filtersQuery(filters).keys()]
  const isNarrowed = names.some((name) => name !== filterNames.asOf && name !== filterNames.silent)
  return (
    <Section number={1} heading="Time to failure">
      {isNarrowed ? (
        <Empty
          action={<ButtonLink href={here}>Count all reports</ButtonLink>}
          harmless={excluded === null ? undefined : <span className="soft">{excluded}</span>}
        >
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
  )
}
