import type { Severity } from '~/domain/bundle/finding-codes'

export type DraftToPublish = {
  hasBundle: boolean
  checkState: 'none' | 'running' | 'done'
  isCheckOk: boolean | null
}
export type FindingToPublish = { severity: Severity; answer: string | null }

export type Obstacle = 'no-bundle' | 'check-running' | 'not-checked' | 'stops' | 'cautions'

/** What keeps a draft from being published, in the order to mend it; empty when nothing does. */
export function obstacles(draft: DraftToPublish, findings: readonly FindingToPublish[]): { kind: Obstacle; message: string }[] {
  // Findings without a bundle are those of a file that was refused, of which nothing is kept.
  if (!draft.hasBundle && findings.length === 0) return [{ kind: 'no-bundle', message: 'There is no bundle yet.' }]
  if (draft.checkState === 'running') return [{ kind: 'check-running', message: 'The check is still running.' }]
  if (draft.checkState !== 'done') return [{ kind: 'not-checked', message: 'This bundle has not been checked.' }]
  const list: { kind: Obstacle; message: string }[] = []
  const stops = findings.filter((f) => f.severity === 'stop').length
  if (stops > 0 || draft.isCheckOk !== true)
    list.push({
      kind: 'stops',
      message:
        stops === 1
          ? 'One stop stands: mend the files and upload them again.'
          : `${stops} stops stand: mend the files and upload them again.`
    })
  const open = findings.filter((f) => f.severity === 'caution' && (f.answer ?? '').trim() === '').length
  if (open > 0)
    list.push({
      kind: 'cautions',
      message: open === 1 ? 'One caution wants your answer.' : `${open} cautions want your answer.`
    })
  return list
}
