import type { Db } from '~db/client.server'
import type { Config } from './config.server'
import type { Storage } from './storage.server'

/** What a use case is given: the outside of the process, as values that a test can replace. */
export type Services = {
  db: Db
  storage: Storage
  config: Config
  now: () => Date
}

let current: Services | null = null

/** Called once by the start file. */
export function setServices(services: Services | null): void {
  current = services
}

/** The services of this process, for loaders and actions. */
export function services(): Services {
  if (current === null) throw new Error('The services are not started')
  return current
}
