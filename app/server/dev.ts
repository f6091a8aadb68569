import type { Handler } from 'express'
import { createServer } from 'vite'
import type { start as Start } from './start.server'

/** The development server: Express as in production, with vite's middleware in front and the sources loaded through it. */
const vite = await createServer({ server: { middlewareMode: true } })
const { start } = (await vite.ssrLoadModule('/app/server/start.server.ts')) as { start: typeof Start }
const running = await start({ FETTLE_MODE: 'development', ...process.env }, [vite.middlewares as unknown as Handler])
process.stdout.write(`Fettle (development) answers at ${running.url}\n`)
