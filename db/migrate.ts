import { Migrator, type Migration } from 'kysely'
import type { Db } from './client.server'
import * as m0001 from './migrations/0001-ground'
import * as m0002 from './migrations/0002-report-versions'
import * as m0003 from './migrations/0003-latest-reports'
import * as m0004 from './migrations/0004-bundle-record'
import * as m0005 from './migrations/0005-report-counts'

/** Every migration, in order, listed by hand; they only go forward. */
const migrations: Record<string, Migration> = {
  '0001-ground': m0001,
  '0002-report-versions': m0002,
  '0003-latest-reports': m0003,
  '0004-bundle-record': m0004,
  '0005-report-counts': m0005
}

/**
 * Brings the database to the newest schema. All of it is one transaction, so a kill half-way leaves the schema as it was.
 * @returns the names of the migrations that ran
 * @throws the first error, when a migration fails or the file was written by a newer version
 */
export async function migrate(db: Db, list: Record<string, Migration> = migrations): Promise<string[]> {
  const migrator = new Migrator({ db, provider: { getMigrations: async () => list } })
  const { error, results } = await migrator.migrateToLatest()
  if (error) throw error
  return (results ?? []).filter((r) => r.status === 'Success').map((r) => r.migrationName)
}
