import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url))
const alias = { '~': at('../app'), '~db': at('../db') }
const common = { environment: 'node' as const, testTimeout: 30_000, hookTimeout: 120_000 }

/**
 * `unit` needs nothing but the sources; `http` and `e2e` talk to the built server, which their set-up starts.
 * The router's plugin stays out: these are plain modules.
 */
export default defineConfig({
  root: at('..'),
  cacheDir: '.vite/vitest',
  test: {
    pool: 'forks',
    projects: [
      {
        resolve: { alias },
        test: {
          ...common,
          name: 'unit',
          pool: 'threads',
          root: at('..'),
          include: ['app/**/*.test.{ts,tsx}', 'db/**/*.test.ts', 'storage-fake/**/*.test.ts', 'tests/unit/**/*.test.ts']
        }
      },
      {
        resolve: { alias },
        test: {
          ...common,
          name: 'http',
          root: at('..'),
          include: ['tests/http/**/*.test.ts'],
          fileParallelism: false,
          testTimeout: 60_000
        }
      },
      {
        resolve: { alias },
        test: {
          ...common,
          name: 'e2e',
          root: at('..'),
          include: ['tests/e2e/**/*.test.ts'],
          // Each file has a site and a browser of its own.
          maxWorkers: 2,
          maxConcurrency: 2,
          testTimeout: 240_000
        }
      }
    ]
  }
})
