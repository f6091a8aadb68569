import { fileURLToPath } from 'node:url'
import { reactRouter } from '@react-router/dev/vite'
import tailwindcss from '@tailwindcss/vite'
import { defineConfig } from 'vite'

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url))

/**
 * The server is one bundle (one copy of every module, so that the database client is one), and each
 * child process or worker is an entry of its own beside it.
 */
export default defineConfig({
  cacheDir: '.vite',
  plugins: [tailwindcss(), reactRouter()],
  resolve: { alias: { '~': at('./app'), '~db': at('./db') } },
  environments: {
    ssr: {
      build: {
        rollupOptions: {
          input: {
            index: at('./app/server/start.server.ts'),
            'reliability-worker': at('./app/domain/reliability/reliability-worker.server.ts')
          },
          output: { entryFileNames: '[name].js' }
        }
      }
    }
  },
  build: { target: 'es2022', sourcemap: false, assetsInlineLimit: 0 }
})
