import { CautionSign, NoteSign, StopSign } from './signs'

export type Severity = 'stop' | 'caution' | 'note'

export const severityWord: Record<Severity, string> = { stop: 'Stop', caution: 'Caution', note: 'Note' }

export function SeveritySign({ severity, size }: { severity: Severity; size?: number }) {
  if (severity === 'stop') return <StopSign size={size} />
  if (severity === 'caution') return <CautionSign size={size} />
  return <NoteSign size={size} />
}

/** Sign and word, never one without the other. */
export function SeverityLabel({ severity, size = 22 }: { severity: Severity; size?: number }) {
  return (
    <span className="sev">
      <SeveritySign severity={severity} size={size} />
      {severityWord[severity]}
    </span>
  )
}
