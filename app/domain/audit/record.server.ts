import type { Tx } from '~db/client.server'
import { writeAudit, type AuditEntry } from '~/domain/accounts/audit.repo.server'

/** Writes what was done into the audit log, in the transaction that does it: neither is kept without the other. */
export async function recordAudit(tx: Tx, entry: Omit<AuditEntry, 'at'>, now: Date): Promise<void> {
  await writeAudit(tx, { ...entry, at: now.toISOString() })
}
