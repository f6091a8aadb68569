import { runBundleCheckWithPictures } from '~/domain/bundle/run-bundle-check.server'
import { log } from '~/server/log.server'
import type { Services } from '~/server/services.server'
import type { IntakeDeps } from './take-in-bundle.server'

/** What taking in a bundle needs of this process. */
export const intakeDeps = ({ db, storage, config, now }: Services): IntakeDeps => ({
  db,
  storage,
  now,
  uploadDir: config.uploadDir,
  check: (input) => runBundleCheckWithPictures({ ...input, onCrash: (detail) => log('warn', 'bundle-check-crashed', { detail }) })
})
