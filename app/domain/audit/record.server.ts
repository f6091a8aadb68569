import type { Tx } from '~db/client.server'
import { newId } from '~/lib/new-id'
import * as auditLog from './audit-log.repo.server'

export type AuditEntry = {
  /** Who did it; null for the system. */
  actorId: string | null
  /** What was done, as `<thing>.<verb>`: `release.publish`. */
  action: string
  subjectKind: string
  subjectId: string
  /** A few plain values; never a secret, an address of a person or a whole text. */
  detail?: Record<string, string | number | boolean | null>
}

/** Writes what was done into the audit log, in the transaction that does it: neither is kept without the other. */
export async function recordAudit(tx: Tx, entry: AuditEntry, now: Date): Promise<void> {
  await auditLog.insert(tx, {
    id: newId(),
    at: now.toISOString(),
    actor_id: entry.actorId,
    action: entry.action,
    subject_kind: entry.subjectKind,
    subject_id: entry.subjectId,
    detail_json: JSON.stringify(entry.detail ?? {})
  })
}
