import { sql } from 'kysely'
import { openDb } from '../client.server'
import { migrate } from '../migrate'

/** Runs a migration that makes a table, says so on standard output and then waits to be killed. For migrate.test.ts. */
const db = openDb(process.argv[2]!)
await migrate(db, {
  '0001-half': {
    up: async (tx) => {
      await sql`create table half (x integer) strict`.execute(tx)
      process.stdout.write('half\n')
      await new Promise((resolve) => setTimeout(resolve, 60_000))
    }
  }
})
