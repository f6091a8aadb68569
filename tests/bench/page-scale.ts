import { statSync } from 'node:fs'
import { join } from 'node:path'
import { sql } from 'kysely'
import { computeReliability } from '~/domain/reliability/compute-reliability.server'
import { areCountsCurrent } from '~/domain/reliability/read-counts.server'
import { recountBoard } from '~/domain/reliability/recount-board.server'
import { readFilters } from '~/domain/reliability/reliability-filters'
import { fileReport } from '~/domain/reports/reports.server'
import { newId } from '~/lib/new-id'
import { pageFigures } from '~/routes/reliability/page-figures'
import type { Services } from '~/server/services.server'
import { openDbReadOnly, type Db } from '~db/client.server'
import { demoPeople } from '~db/seed/people'
import { demoAsOf } from '~db/seed/truth'
import { startSite, type Site } from '../http/harness'
import { median, type Claim } from './claim'
import { fillBoard } from './page-scale-data'

const few = 10_000
const rounds = 9
const writes = 15

/**
 * The reliability page of a board with 10,000 units beside that of the same board with 1,000,000, in turns, nothing remembered: figures and page data
 * by the use case, and the whole page from the built server. Buttress is computed by Kaplan-Meier, Sundial, whose failures are found late, by Turnbull.
 * @param size units of the large board, for a quick look
 * @param only the one board to bench
 */
export async function pageScale(size = '1000000', only?: string): Promise<Claim[]> {
  const claims: Claim[] = []
  for (const board of only === undefined ? ['buttress', 'sundial'] : [only]) claims.push(...(await scaleOf(board, Number(size))))
  return claims
}

type Sized = { units: number; site: Site; db: Db; write: number }

async function scaleOf(board: string, many: number): Promise<Claim[]> {
  const sizes: Sized[] = []
  try {
    for (const units of [few, many]) sizes.push(await open(board, units))
    const [small, large] = sizes as [Sized, Sized]
    const computed = await inTurns(sizes, (sized) => compute(sized, board))
    const served = await inTurns(sizes, (sized) => serve(sized, board))
    const say = (what: string, [a, b]: number[]) =>
      console.log(`${board}, ${what}: ${a!.toFixed(1)} ms with ${few} units, ${b!.toFixed(1)} ms with ${many}`)
    say('figures and page data', computed)
    say('page from the server', served)
    say('a report filed', [small.write, large.write])
    const what = `${board}, ${many} units over ${few}`
    return [
      { claim: `${what}: the whole page`, measured: served[1]! / served[0]!, limit: 1.5 },
      { claim: `${what}: a report filed`, measured: large.write / small.write, limit: 1.5 }
    ]
  } finally {
    for (const { site, db } of sizes) {
      await db.destroy()
      await site.close()
    }
  }
}

/** A site with the board filled and counted, and the time of one report filed before it starts. */
async function open(board: string, units: number): Promise<Sized> {
  let write = NaN
  const site = await startSite({
    prepare: async ({ db }) => {
      const places = await timed(`${board}: ${units} units drawn`, () => fillBoard(db, board, units))
      const { id } = await db.selectFrom('boards').where('slug', '=', board).select('id').executeTakeFirstOrThrow()
      // Counting a million in the usual 2 MB of pages would rewrite each of them many times.
      await sql`pragma cache_size = -2000000`.execute(db)
      await timed(`${board}: ${units} units counted`, () => db.transaction().execute((tx) => recountBoard(tx, id)))
      await sql`pragma cache_size = -2000`.execute(db)
      // One transaction of everything leaves a log as large, which no board that grew report by report has.
      await sql`pragma wal_checkpoint(truncate)`.execute(db)
      write = await writeTime(db, places)
      const isCurrent = await db.transaction().execute((tx) => areCountsCurrent(tx, id, demoAsOf))
      if (!isCurrent) throw new Error('The counts are not current after a report was filed')
    }
  })
  const file = join(site.dataDir, 'fettle.sqlite')
  console.log(`${board}: ${units} units take ${(statSync(file).size / 1e6).toFixed(0)} MB`)
  return { units, site, db: openDbReadOnly(file), write }
}

async function writeTime(db: Db, { release, revision }: { release: string; revision: string }): Promise<number> {
  const services = { db, now: () => new Date(`${demoAsOf}T12:00:00.000Z`) } as Services
  const actor = { userId: demoPeople[0]!.id, displayName: 'Bench', isSteward: false, maintains: new Map() }
  const times: number[] = []
  for (let i = 0; i < writes; i++) {
    const input = {
      ...{ form_key: newId(), release, revision, installed_on: '2026-11-20' },
      ...{ evidence: 'measured' as const, method: 'iron' as const, first_power: 'works' as const }
    }
    times.push(await elapsed(() => fileReport(services, actor, input)))
  }
  return median(times)
}

/** Everything that is behind the page, from the stored counts to what the loader returns. */
async function compute({ db, units }: Sized, board: string): Promise<void> {
  const { filters } = readFilters(new URLSearchParams(), demoAsOf)
  const shown = pageFigures(await computeReliability(db, board, filters, 'page'), new URLSearchParams())
  const isTurnbull = shown.all.estimator === 'turnbull'
  if (shown.reports < units * 0.99 || isTurnbull !== (board === 'sundial'))
    throw new Error(`${shown.reports} of ${units} units were counted, by ${shown.all.estimator}`)
}

/** The page as a visitor gets it, after a change that makes the server forget its figures. */
async function serve({ site }: Sized, board: string): Promise<void> {
  const answer = await fetch(`${site.url}/boards/${board}/reliability`)
  const page = await answer.text()
  if (answer.status !== 200 || !page.includes('units followed')) throw new Error(`The page was answered ${answer.status}`)
}

/** Median time of some work for each size, in turns after one round that does not count; each time nothing is remembered. */
async function inTurns(sizes: readonly Sized[], work: (sized: Sized) => Promise<void>): Promise<number[]> {
  const times = sizes.map((): number[] => [])
  for (let round = -1; round < rounds; round++)
    for (const [i, sized] of sizes.entries()) {
      await sized.site.query(forget)
      const time = await elapsed(() => work(sized))
      if (round >= 0) times[i]!.push(time)
    }
  return times.map(median)
}

/** Makes the server compute its figures again, as a change of a report does. */
const forget = (db: Db) =>
  sql`insert into report_versions (board_id, version) select id, 1 from boards where true
    on conflict (board_id) do update set version = version + 1`.execute(db)

async function elapsed(work: () => Promise<unknown>): Promise<number> {
  const start = performance.now()
  await work()
  return performance.now() - start
}

async function timed<T>(what: string, work: () => Promise<T>): Promise<T> {
  const start = performance.now()
  const result = await work()
  console.log(`${what} in ${((performance.now() - start) / 1000).toFixed(1)} s`)
  return result
}
