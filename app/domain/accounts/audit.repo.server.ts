import type { Tx } from '~db/client.server'
import { newId } from '~/lib/new-id'

export type AuditEntry = {
  at: string
  /** Null when the system itself acts. */
  actorId: string | null
  /** Area and verb, `release.publish`. */
  action: string
  subjectKind: 'user' | 'board' | 'release' | 'report' | 'console' | 'batch' | 'site'
  subjectId: string
  /** What changed, without secrets, addresses of people or long texts. */
  detail?: Record<string, unknown>
}

/** Writes down who did what, in the transaction that does it. */
export const writeAudit = (tx: Tx, entry: AuditEntry) =>
  tx
    .insertInto('audit_log')
    .values({
      id: newId(),
      at: entry.at,
      actor_id: entry.actorId,
      action: entry.action,
      subject_kind: entry.subjectKind,
      subject_id: entry.subjectId,
      detail_json: JSON.stringify(entry.detail ?? {})
    })
    .execute()
