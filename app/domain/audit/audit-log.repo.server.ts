import type { Insertable } from 'kysely'
import type { Tx } from '~db/client.server'
import type { AuditLogTable } from '~db/schema'

export const insert = (tx: Tx, row: Insertable<AuditLogTable>) => tx.insertInto('audit_log').values(row).execute()
