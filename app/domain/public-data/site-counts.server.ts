import { dayOf } from '~/lib/dates'
import type { Services } from '~/server/services.server'
import { countRows } from './site-counts.repo.server'

const count = (n: number, one: string, many: string) => `${n} ${n === 1 ? one : many}`

/** What the site holds, in the words of its foot: "3 boards, 2 consoles, 607 reports filed, as of 2026-12-01". Excluded reports stay counted. */
export async function siteCounts({ db, now }: Services): Promise<string> {
  const { boards, consoles, install_reports: reports } = await countRows(db)
  return [
    count(boards, 'board', 'boards'),
    count(consoles, 'console', 'consoles'),
    `${count(reports, 'report', 'reports')} filed`,
    `as of ${dayOf(now())}`
  ].join(', ')
}
