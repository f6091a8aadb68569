import fc from 'fast-check'
import { addCheckIn, excludeReport, fileReport } from '~/domain/reports/reports.server'
import {
  causes,
  evidenceGrades,
  exclusionKinds,
  firstPowerResults,
  installMethods,
  statements,
  type Cause,
  type Statement
} from '~/domain/reports/report-words'
import { addDays, dayOf, type Day } from '~/lib/dates'
import { DomainError } from '~/lib/domain-error'
import type { Services } from '~/server/services.server'
import type { Db } from '~db/client.server'
import { actorOf } from './report-world'

/** Two batches more than the report world has, of two releases, so that tagged units of several batches and untagged boards are told of. */
export async function addBatches(db: Db): Promise<void> {
  const at = '2020-01-01T00:00:00.000Z'
  for (const [id, release, tags] of [
    ['t2', 'v1', ['BT-2', 'BT-3']],
    ['t3', 'v3', ['BT-4']]
  ] as const) {
    await db
      .insertInto('batches')
      .values({ id, release_id: release, code: id, made_on: '2020-01-01', quantity: 9, assembled_by: 'Ann', created_at: at })
      .execute()
    for (const tag of tags) await db.insertInto('units').values({ tag, batch_id: id, created_at: at }).execute()
  }
}

/** What somebody does: files a report, says something of the n-th one filed so far, has one excluded, or lets days go by. */
export type Step =
  | {
      do: 'file'
      release: 'v1' | 'v2' | 'v3'
      revision: 'tm-1' | 'tm-2'
      tag: string | null
      evidence: (typeof evidenceGrades)[number]
      method: (typeof installMethods)[number] | null
      firstPower: (typeof firstPowerResults)[number]
      cause: Cause
      /** Days ago. */
      fitted: number
    }
  | { do: 'say'; of: number; statement: Statement; daysAgo: number; ranBefore: number | null; cause: Cause }
  | { do: 'exclude'; of: number; kind: (typeof exclusionKinds)[number] }
  | { do: 'wait'; days: number }

type Place = { release: 'v1' | 'v2' | 'v3'; tag: string | null }
const places: Place[] = [
  { release: 'v1', tag: null },
  { release: 'v1', tag: 'BT-1' },
  { release: 'v1', tag: 'BT-2' },
  { release: 'v1', tag: 'BT-3' },
  { release: 'v2', tag: null },
  { release: 'v3', tag: null },
  { release: 'v3', tag: 'BT-4' }
]

const file: fc.Arbitrary<Step> = fc
  .record({
    place: fc.constantFrom(...places),
    revision: fc.constantFrom('tm-1' as const, 'tm-2' as const),
    evidence: fc.constantFrom(...evidenceGrades),
    method: fc.constantFrom(null, ...installMethods),
    firstPower: fc.oneof({ weight: 4, arbitrary: fc.constant('works' as const) }, fc.constantFrom(...firstPowerResults)),
    cause: fc.constantFrom(...causes),
    // In time, late, and so long ago that nobody would believe it.
    fitted: fc.oneof(fc.integer({ min: -1, max: 14 }), fc.integer({ min: 15, max: 400 }), fc.integer({ min: 4_000, max: 20_000 }))
  })
  .map(({ place, ...rest }) => ({ do: 'file', ...place, ...rest }))

const say: fc.Arbitrary<Step> = fc
  .record({
    of: fc.nat(30),
    statement: fc.constantFrom(...statements),
    daysAgo: fc.oneof(fc.integer({ min: -1, max: 5 }), fc.nat(200)),
    ranBefore: fc.option(fc.nat(60)),
    cause: fc.constantFrom(...causes)
  })
  .map((said) => ({ do: 'say', ...said }))

export const steps: fc.Arbitrary<Step[]> = fc.array(
  fc.oneof(
    { weight: 4, arbitrary: file },
    { weight: 6, arbitrary: say },
    {
      weight: 1,
      arbitrary: fc.record({ do: fc.constant('exclude' as const), of: fc.nat(30), kind: fc.constantFrom(...exclusionKinds) })
    },
    { weight: 3, arbitrary: fc.record({ do: fc.constant('wait' as const), days: fc.integer({ min: 1, max: 250 }) }) }
  ),
  { minLength: 12, maxLength: 40, size: 'max' }
)

export type Played = { reports: string[]; today: Day; taken: number; refused: number }

let keys = 0
const newKey = () => String(++keys).padStart(16, '0')

/** Does it all through the use cases, with a clock of its own from 2026-01-01 on. What a use case refuses is left out, and counted. */
export async function play(db: Db, story: readonly Step[]): Promise<Played> {
  const played: Played = { reports: [], today: '2026-01-01', taken: 0, refused: 0 }
  const services = { db, now: () => new Date(`${played.today}T12:00:00.000Z`) } as Services
  for (const step of story) {
    if (step.do === 'wait') {
      played.today = addDays(played.today, step.days)
      continue
    }
    try {
      await doStep(services, step, played.reports)
      played.taken++
    } catch (error) {
      if (!(error instanceof DomainError)) throw error
      played.refused++
    }
  }
  return played
}

async function doStep(services: Services, step: Exclude<Step, { do: 'wait' }>, reports: string[]): Promise<void> {
  const today = dayOf(services.now())
  if (step.do === 'file') {
    const { id } = await fileReport(services, actorOf('ann'), {
      form_key: newKey(),
      release: step.release,
      revision: step.revision,
      ...(step.tag === null ? {} : { unit_tag: step.tag }),
      installed_on: addDays(today, -step.fitted),
      evidence: step.evidence,
      ...(step.method === null ? {} : { method: step.method }),
      first_power: step.firstPower,
      ...(step.firstPower === 'works' ? {} : { cause: step.cause })
    })
    reports.push(id)
    return
  }
  const id = reports[step.of % Math.max(1, reports.length)]
  if (id === undefined) throw new DomainError('not-found', 'Nothing was filed yet.')
  if (step.do === 'exclude')
    return excludeReport(services, actorOf('stu', true), id, { kind: step.kind, reason: 'As somebody else can see.' })
  const on = addDays(today, -step.daysAgo)
  const said = { form_key: newKey(), stated_on: on }
  if (step.statement !== 'failed') return addCheckIn(services, actorOf('ann'), id, { ...said, statement: step.statement })
  return addCheckIn(services, actorOf('ann'), id, {
    ...said,
    statement: 'failed',
    ...(step.ranBefore === null ? {} : { last_running_on: addDays(on, -step.ranBefore) }),
    cause: step.cause
  })
}
