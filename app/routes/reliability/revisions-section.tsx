import { Section } from '~/components/section'
import { TextLink } from '~/components/text-link'
import type { ReliabilityFilters } from '~/domain/reliability/reliability-filters'
import { CsvLink, GuideLink } from './csv-link'
import type { SectionProps } from './curves-section'
import { GroupTable } from './group-table'

type Props = SectionProps & {
  consoleName: string
  filters: Pick<ReliabilityFilters, 'cause' | 'firstPower'>
  consoleHref: string
  hrefOf: (revision: string) => string | null
}

/** What a visitor came for: how each console revision does. */
export function RevisionsSection({ here, shown, filters, sections, tables, consoleName, consoleHref, hrefOf }: Props) {
  const { byRevision, all, query } = shown
  const isOne = byRevision.length === 1
  return (
    <Section number={sections.revisions!} id="revisions" heading={isOne ? `In ${byRevision[0]!.group}` : 'Revision by revision'}>
      <div className="wide">
        <GroupTable
          number={tables.revisions!}
          what="Revision"
          groups={byRevision}
          total={byRevision.length > 1 ? { ...all, group: consoleName } : null}
          hrefOf={hrefOf}
          filters={filters}
        />
        <div className="under">
          <p className="small">
            Which one do you own? <TextLink href={consoleHref}>How to tell the revisions of the {consoleName}</TextLink>
          </p>
          <p className="small">
            <GuideLink to="figures#points">How these figures are made</GuideLink>
          </p>
          <CsvLink here={here} query={query} table="groups" />
        </div>
      </div>
    </Section>
  )
}
