import { Definitions } from '~/components/definition'
import { Section } from '~/components/section'
import { TextLink } from '~/components/text-link'
import {
  evidenceFact,
  firstPowerWords,
  methodWords,
  type EvidenceGrade,
  type FirstPower,
  type InstallMethod
} from '~/domain/reports/report-words'

export type ReportOnPage = {
  boardName: string
  boardSlug: string
  version: string
  isWithdrawn: boolean
  consoleName: string
  revisionCode: string
  unitTag: string | null
  reporterName: string | null
  installedOn: string
  filedOn: string
  evidence: EvidenceGrade
  method: InstallMethod | null
  firstPower: FirstPower
  notes: string
}

/** What was said when it was filed. */
export function ReportFacts({ report }: { report: ReportOnPage }) {
  const firstPower = firstPowerWords[report.firstPower]
  const items = [
    {
      label: 'Release',
      value: (
        <>
          <TextLink href={`/boards/${report.boardSlug}/releases/${encodeURIComponent(report.version)}`}>
            {report.boardName} {report.version}
          </TextLink>
          {report.isWithdrawn && ', withdrawn'}
        </>
      )
    },
    { label: 'Console', value: `${report.consoleName}, revision ${report.revisionCode}` },
    { label: 'Unit tag', value: report.unitTag ?? 'none' },
    { label: 'Fitted', value: `${report.installedOn}, filed ${report.filedOn}` },
    { label: 'Fault', value: evidenceFact[report.evidence] },
    { label: 'Fitted with', value: report.method ? methodWords[report.method].label.toLowerCase() : 'not said' },
    { label: 'First power', value: firstPower.hint ? `${firstPower.label}: ${firstPower.hint}` : firstPower.label },
    { label: 'Filed by', value: report.reporterName ?? 'an account that is gone' }
  ]
  return (
    <Section number={1} heading="What was reported">
      <Definitions items={items} />
      {report.notes && <p className="mt-4 max-w-[66ch] whitespace-pre-line [overflow-wrap:anywhere]">{report.notes}</p>}
    </Section>
  )
}
