import type { Actor } from '~/domain/accounts/can'
import type { Services } from '~/server/services.server'
import * as repo from './latest.repo.server'
import { causeWords, firstPowerWords } from './report-words'

const maxLatest = 8

export type LatestReport = Awaited<ReturnType<typeof latestReports>>[number]

/** The latest reports on the boards that the actor maintains, newest first, each with what it says in a few words. */
export async function latestReports({ db }: Services, actor: Actor) {
  if (actor.userId === null) return []
  const rows = await repo.listLatestOfMaintainer(db, actor.userId, maxLatest)
  return rows.map((r) => ({
    id: r.id,
    what: `${r.board_name} ${r.version} on ${r.revision_code}`,
    filedOn: r.filed_on,
    by: r.reporter_name,
    isFailure: r.failed_on !== null,
    isExcluded: r.excluded_at !== null,
    says:
      r.first_power !== 'works'
        ? `${firstPowerWords[r.first_power].label.toLowerCase()} at first power`
        : r.failed_on !== null
          ? `failed ${r.failed_on}`
          : 'works',
    cause: r.cause === null ? null : r.cause === 'unknown' ? 'cause not known' : causeWords[r.cause].label.toLowerCase()
  }))
}
