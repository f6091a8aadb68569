import { fileURLToPath } from 'node:url'
import { reactRouter } from '@react-router/dev/vite'
import tailwindcss from '@tailwindcss/vite'
import { defineConfig, type Plugin } from 'vite'

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url))

/** The router's plugin calls every entry of the server build `index.js`; each needs its own name. */
const namedEntries: Plugin = {
  name: 'named-entries',
  enforce: 'post',
  config: () => ({
    environments: { ssr: { build: { rollupOptions: { output: { entryFileNames: '[name].js' } } } } }
  })
}

/**
 * The server is one bundle (one copy of every module, so that the database client is one), and each
 * child process or worker is an entry of its own beside it.
 */
export default defineConfig({
  cacheDir: '.vite',
  plugins: [tailwindcss(), reactRouter(), namedEntries],
  resolve: { alias: { '~': at('./app'), '~db': at('./db') } },
  environments: {
    ssr: {
      build: {
        rollupOptions: {
          input: {
            index: at('./app/server/start.server.ts'),
            'check-child': at('./app/domain/bundle/check-child.ts'),
            'reliability-worker': at('./app/domain/reliability/reliability-worker.server.ts')
          }
        }
      }
    }
  },
  build: { target: 'es2022', sourcemap: false, assetsInlineLimit: 0 }
})
