import { readFileSync } from 'node:fs'
import { startGithubFake, type GithubPerson } from './github-fake'
import { startMailFake } from './mail-fake'

/**
 * Starts one fake as a process of its own and prints its address as one JSON line.
 *
 *   tsx app/server/fakes/main.ts mail      PORT, MAIL_API_KEY
 *   tsx app/server/fakes/main.ts github    PORT, GITHUB_CLIENT_ID, GITHUB_CLIENT_SECRET, CALLBACK_URL, PEOPLE_FILE (JSON list)
 */
function setting(name: string, fallback?: string): string {
  const value = process.env[name] || fallback
  if (value === undefined) throw new Error(`${name} is not set`)
  return value
}

async function startNamed(kind: string | undefined) {
  const port = Number(setting('PORT', '0'))
  if (kind === 'mail') return startMailFake({ port, apiKey: setting('MAIL_API_KEY') })
  if (kind === 'github')
    return startGithubFake({
      port,
      people: JSON.parse(readFileSync(setting('PEOPLE_FILE'), 'utf8')) as GithubPerson[],
      clientId: setting('GITHUB_CLIENT_ID'),
      clientSecret: setting('GITHUB_CLIENT_SECRET'),
      callbackUrl: setting('CALLBACK_URL')
    })
  throw new Error('Say which fake: github or mail')
}

try {
  const fake = await startNamed(process.argv[2])
  process.stdout.write(`${JSON.stringify({ url: fake.url })}\n`)
  for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => void fake.close().then(() => process.exit(0)))
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`)
  process.exit(1)
}
