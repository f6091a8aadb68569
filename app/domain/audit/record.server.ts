import type { Tx } from '~db/client.server'
import type { Instant } from '~/lib/dates'
import { newId } from '~/lib/new-id'
import * as auditLog from './audit-log.repo.server'

export type AuditEntry = {
  /** Who did it; null for the system. */
  actorId: string | null
  /** Area and verb, `release.publish`. */
  action: string
  subjectKind: 'user' | 'board' | 'release' | 'report' | 'console' | 'batch' | 'site'
  subjectId: string
  /** What changed, without secrets, addresses of people or long texts. */
  detail?: Record<string, unknown>
}

/** Writes what was done into the audit log, in the transaction that does it: neither is kept without the other. */
export async function recordAudit(tx: Tx, entry: AuditEntry, at: Instant): Promise<void> {
  await auditLog.insert(tx, {
    id: newId(),
    at,
    actor_id: entry.actorId,
    action: entry.action,
    subject_kind: entry.subjectKind,
    subject_id: entry.subjectId,
    detail_json: JSON.stringify(entry.detail ?? {})
  })
}
