import { IndexLine } from '~/components/index-line'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import { AgeingSection } from './ageing-section'
import { ApartSection } from './apart-section'
import { BatchesSection } from './batches-section'
import { CausesSection } from './causes-section'
import { ComparisonSection } from './comparison-section'
import { CurvesSections } from './curves-section'
import { FollowUpSection } from './follow-up-section'
import type { Hrefs } from './hrefs'
import { numbering, type SectionKey } from './numbering'
import type { ShownFigures } from './page-figures'
import { ReleasesSection } from './releases-section'
import { RevisionsSection } from './revisions-section'
import { StepsSection } from './steps-section'

type Props = {
  here: string
  board: { name: string; consoleName: string; consoleSlug: string }
  shown: ShownFigures
  filters: ReliabilityFilters
  boardRevisionOf: Record<string, string>
  hrefs: Hrefs
}

/** The places of the sections and their words in the index, in the page's order. */
const index: [SectionKey, id: string, word: string][] = [
  ['revisions', 'revisions', 'Revisions'],
  ['curves', 'curves', 'Curves'],
  ['strips', 'strips', 'Strips'],
  ['releases', 'releases', 'Releases'],
  ['causes', 'causes', 'Causes'],
  ['comparison', 'comparison', 'Compared'],
  ['ageing', 'ageing', 'Early or wear'],
  ['followUp', 'silent', 'The silent'],
  ['batches', 'batches', 'Batches'],
  ['apart', 'apart', 'Apart'],
  ['steps', 'steps', 'Every step']
]

/** All that the figures say, section by section; each only where there is something to say. */
export function Shown({ here, board, shown, filters, boardRevisionOf, hrefs }: Props) {
  const numbers = numbering(shown)
  const { sections } = numbers
  const common = { here, shown, ...numbers }
  const entries = index.flatMap(([key, id, word]) => (sections[key] === null ? [] : [{ number: sections[key], word, id }]))
  return (
    <>
      <IndexLine entries={entries} />
      <RevisionsSection
        {...common}
        consoleName={board.consoleName}
        consoleHref={`/consoles/${board.consoleSlug}`}
        hrefOf={hrefs.revision}
        filters={filters}
      />
      <CurvesSections {...common} filters={filters} />
      {sections.releases !== null && (
        <ReleasesSection
          {...common}
          boardName={board.name}
          boardRevisionOf={boardRevisionOf}
          hrefOf={hrefs.release}
          filters={filters}
          hrefOfBoardRevision={hrefs.boardRevision}
        />
      )}
      <CausesSection {...common} cause={filters.cause} everyCause={`${hrefs.to({ cause: null })}#causes`} />
      {sections.comparison !== null && <ComparisonSection {...common} />}
      {sections.ageing !== null && <AgeingSection {...common} />}
      {sections.followUp !== null && (
        <FollowUpSection
          {...common}
          consoleName={board.consoleName}
          hrefOfBounds={hrefs.to({ silent: 'bounds' })}
          hrefOfPlain={hrefs.to({ silent: null })}
        />
      )}
      {sections.batches !== null && <BatchesSection {...common} hrefOf={hrefs.batch} />}
      <ApartSection shown={shown} sections={sections} />
      {sections.steps !== null && <StepsSection {...common} filters={filters} />}
    </>
  )
}
