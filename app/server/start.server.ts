import { mkdirSync, rmSync } from 'node:fs'
import { createServer, type Server } from 'node:http'
import { fileURLToPath } from 'node:url'
import type { Handler } from 'express'
import { countMissing } from '~/domain/reliability/recount-board.server'
import { holdDataFolder, openDb } from '~db/client.server'
import { migrate } from '~db/migrate'
import { ConfigError, readConfig } from './config.server'
import { createApp } from './express.server'
import { log, logError } from './log.server'
import { startMailWorker } from './mail-worker.server'
import { setServices, type Services } from './services.server'
import { createStorage } from './storage.server'
import { startSweeping } from './sweep-timer.server'

export type Running = { url: string; services: Services; close(): Promise<void> }

/**
 * Starts Fettle: configuration, the data folder's lock, migrations, storage, then the server. Whatever fails here fails the start; nothing
 * is served by a half-migrated database.
 */
export async function start(env: Record<string, string | undefined>, before: Handler[] = []): Promise<Running> {
  const config = readConfig(env)
  const releaseFolder = holdDataFolder(config.databaseFile)
  const db = openDb(config.databaseFile)
  for (const name of await migrate(db)) log('info', 'migrated', { name })
  await countMissing(db, (board, { reports }) => log('info', 'reports-counted', { board, reports }))
  // What a killed process was receiving: nobody else writes here while the data folder is held.
  rmSync(config.uploadDir, { recursive: true, force: true })
  mkdirSync(config.uploadDir, { recursive: true })
  const storage = createStorage(config.storage)
  await storage.ensureBucket()
  const services: Services = { db, storage, config, now: () => new Date() }
  setServices(services)

  const clientDir = fileURLToPath(new URL('../client', import.meta.url))
  const app = createApp(services, () => import('virtual:react-router/server-build'), clientDir, before)
  const server = createServer(app)
  server.headersTimeout = 20_000
  server.requestTimeout = 15 * 60_000
  await listen(server, config.port, config.host)
  const workers = [startMailWorker(services), startSweeping(services)]
  log('info', 'listening', { url: config.publicOrigin, mode: config.mode })

  const close = async () => {
    server.closeIdleConnections()
    await new Promise<void>((resolve) => {
      const force = setTimeout(() => server.closeAllConnections(), 5_000)
      server.close(() => {
        clearTimeout(force)
        resolve()
      })
    })
    await Promise.all(workers.map((worker) => worker.close()))
    setServices(null)
    await db.destroy()
    releaseFolder()
  }
  return { url: config.publicOrigin, services, close }
}

const listen = (server: Server, port: number, host: string) =>
  new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, host, () => resolve())
  })

async function main() {
  try {
    const running = await start(process.env)
    process.stdout.write(`Fettle answers at ${running.url}\n`)
    for (const signal of ['SIGINT', 'SIGTERM'] as const)
      process.once(signal, () => {
        running.close().then(
          () => process.exit(0),
          (error) => {
            logError('stop-failed', error)
            process.exit(1)
          }
        )
      })
  } catch (error) {
    if (error instanceof ConfigError) process.stderr.write(`${error.message}\n`)
    else logError('start-failed', error)
    process.exit(1)
  }
}

if (import.meta.env.PROD) await main()
