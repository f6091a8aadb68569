import { writeFileSync } from 'node:fs'
import { readConfig } from '~/server/config.server'
import { createStorage } from '~/server/storage.server'
import { holdDataFolder, openDb } from '~db/client.server'
import { migrate } from '~db/migrate'
import { demoPeople } from './people'
import { seedDemo } from './seed'

/**
 * Migrates and seeds the data folder that the environment names (as in .env.example). With PEOPLE_FILE the list of the demo's people is
 * written there as the GitHub fake reads it.
 */
async function main(): Promise<void> {
  const config = readConfig(process.env)
  if (config.mode === 'production') throw new Error('The demo world does not belong in production (FETTLE_MODE).')
  const release = hold(config.databaseFile)
  const db = openDb(config.databaseFile)
  const storage = createStorage(config.storage)
  try {
    await migrate(db)
    const outcome = await seedDemo({ db, storage }, { say: (line) => console.log(line) })
    console.log(outcome === 'seeded' ? 'The demo world is in place.' : 'The demo world was there already.')
    if (process.env.PEOPLE_FILE) writeFileSync(process.env.PEOPLE_FILE, JSON.stringify(githubPeople(), null, 1))
  } finally {
    storage.close()
    await db.destroy()
    release()
  }
}

/** Says in a sentence, without a trace, that somebody else writes there. */
function hold(databaseFile: string): () => void {
  try {
    return holdDataFolder(databaseFile)
  } catch (error) {
    console.error(error instanceof Error ? error.message : error)
    process.exit(1)
  }
}

const githubPeople = () =>
  demoPeople.map(({ githubId, login, name, email, part }) => ({
    id: githubId,
    login,
    name,
    part,
    emails: [{ email, primary: true, verified: true }]
  }))

main().catch((error: unknown) => {
  console.error(error)
  process.exitCode = 1
})
