import type { Tx } from '~db/client.server'

export type AuditRow = {
  id: string
  at: string
  actor_id: string | null
  action: string
  subject_kind: string
  subject_id: string
  detail_json: string
}

export const insert = (tx: Tx, row: AuditRow) => tx.insertInto('audit_log').values(row).execute()
