import { z } from 'zod'
import { DomainError, type FieldError } from '~/lib/domain-error'
import { fieldErrors } from '~/lib/parse-form'
import { causesOf } from './columns'
import { checkObservations, isInterval, type Observation } from './observation'

export const maxRows = 200_000
export const maxBytes = 16 * 1024 * 1024
const maxGroups = 100
const maxCauses = 50
const maxUnits = 1e9
const maxErrors = 100

const number = (message: string) => z.number({ error: message })

/** One row as it is sent; which fields belong together is checked afterwards, with messages at the field. */
const rowSchema = z.strictObject(
  {
    time: number('The time must be a number.').optional(),
    event: z.union([z.number(), z.string().max(200)], { error: 'The event must be 0, 1 or the name of a cause.' }).optional(),
    lower: number('The lower end must be a number.').optional(),
    upper: z
      .union([z.number(), z.null()], { error: 'The upper end must be a number, or null when no failure was seen.' })
      .optional(),
    entry: number('The entry must be a number.').optional(),
    weight: number('The weight must be a whole number above 0.').optional(),
    group: z
      .string({ error: 'The group must be a text.' })
      .max(200, { error: 'The name of a group has at most 200 characters.' })
      .optional()
  },
  {
    error: (issue) =>
      issue.code === 'unrecognized_keys'
        ? `Unknown field ${issue.keys.join(', ')}: a row has time and event, or lower and upper, and may have entry, weight and group.`
        : 'Each observation must be an object.'
  }
)

const requestSchema = z.strictObject(
  {
    observations: z.array(rowSchema, { error: 'The observations must be a list.' }).min(1, { error: 'There is no observation.' }),
    timeUnit: z.string({ error: 'The unit of time must be a text.' }).max(20).default('day'),
    confidence: number('The confidence must be a number between 0 and 1.')
      .gt(0, { error: 'The confidence must lie above 0.' })
      .lt(1, { error: 'The confidence must lie below 1: write 0.95 for 95 %.' })
      .default(0.95),
    interval: z.enum(['log-log', 'log', 'plain'], { error: 'The interval must be log-log, log or plain.' }).default('log-log'),
    tau: number('Tau must be a number above 0.').gt(0, { error: 'Tau must lie above 0.' }).nullish(),
    seed: z.int({ error: 'The seed must be a whole number.' }).default(1)
  },
  {
    error: (issue) =>
      issue.code === 'unrecognized_keys'
        ? `Unknown field ${issue.keys.join(', ')}.`
        : 'The request must be an object with observations.'
  }
)

/** A checked request: row i belongs to `groups[groupOf[i]]`; a single group without a name is null. */
export type SurvivalRequest = {
  observations: Observation[]
  groups: (string | null)[]
  groupOf: Uint16Array
  timeUnit: string
  confidence: number
  interval: 'log-log' | 'log' | 'plain'
  tau: number | null
  seed: number
}

/**
 * Checks the body of `POST /api/v1/compute/survival` (METHODS.md section 1).
 *
 * @throws DomainError `too-large` past 200,000 rows, `invalid` for values that are wrong by themselves, `impossible` when all that is wrong are values
 *   that cannot be true together; each with paths such as `observations.3.time`
 */
export function parseSurvivalRequest(input: unknown): SurvivalRequest {
  const sent = (input as { observations?: unknown } | null)?.observations
  if (Array.isArray(sent) && sent.length > maxRows)
    throw tooLarge(
      `There are ${sent.length} observations; at most ${maxRows} can be computed at once. Rows that are alike may share one with a weight.`
    )
  const result = requestSchema.safeParse(input)
  if (!result.success) throw invalid(fieldErrors(result.error))
  const { observations: rows, tau, ...options } = result.data
  const errors: FieldError[] = []
  const observations = rows.map((row, i) => observationOf(row, i, errors))
  if (errors.length > 0) throw invalid(errors)
  const wrong = checkObservations(observations, maxErrors)
  if (wrong.length > 0)
    throw invalid(
      wrong.map(({ path, message }) => ({ path, message })),
      wrong.every(({ kind }) => kind === 'impossible')
    )
  if (observations.reduce((sum, { weight = 1 }) => sum + weight, 0) > maxUnits)
    throw tooLarge(`The weights add up to more than ${maxUnits} units.`)
  const causes = causesOf(observations).length
  if (causes > maxCauses)
    throw invalid([{ path: 'observations', message: `There are ${causes} causes; at most ${maxCauses} can be told apart.` }])
  return { observations, ...groupsOf(rows.map(({ group }) => group)), ...options, tau: tau ?? null }
}

type Row = z.output<typeof rowSchema>

function observationOf(row: Row, i: number, errors: FieldError[]): Observation {
  const say = (field: string, message: string) =>
    void (errors.length < maxErrors && errors.push({ path: `observations.${i}.${field}`, message }))
  const { time, event, lower, upper, entry, weight } = row
  if (lower !== undefined || upper !== undefined) {
    if (time !== undefined) say('time', 'Give either time and event, or lower and upper.')
    if (lower === undefined) say('lower', 'The lower end is missing (0 when the failure may lie anywhere before the upper end).')
    if (upper === undefined) say('upper', 'The upper end is missing (null when no failure was seen).')
    return { lower: lower ?? 0, upper: upper ?? null, ...(event !== undefined && { event }), entry, weight }
  }
  if (time === undefined) say('time', 'The time is missing.')
  if (event === undefined) say('event', 'The event is missing: 0 (still working), 1 (failed) or the name of a cause.')
  return { time: time ?? 0, event: event ?? 0, entry, weight }
}

function groupsOf(names: (string | undefined)[]): { groups: (string | null)[]; groupOf: Uint16Array } {
  const found = new Set(names)
  if (found.size === 1 && found.has(undefined)) return { groups: [null], groupOf: new Uint16Array(names.length) }
  const nameless = names.indexOf(undefined)
  if (nameless >= 0)
    throw invalid([{ path: `observations.${nameless}.group`, message: 'Other rows name their group: name it here too.' }])
  if (found.size > maxGroups)
    throw invalid([{ path: 'observations', message: `There are ${found.size} groups; at most ${maxGroups} can be compared.` }])
  const groups = [...found].map(String).sort()
  const indexOf = new Map(groups.map((group, g) => [group, g]))
  return { groups, groupOf: Uint16Array.from(names, (name) => indexOf.get(name!)!) }
}

const tooLarge = (message: string) => new DomainError('too-large', message, [{ path: 'observations', message }])

const invalid = (errors: FieldError[], isImpossible = false) =>
  new DomainError(
    isImpossible ? 'impossible' : 'invalid',
    errors.length === 1
      ? errors[0]!.message
      : `${errors.length >= maxErrors ? 'Many' : errors.length} values cannot be used; see each message.`,
    errors.slice(0, maxErrors)
  )

/**
 * `parseSurvivalRequest` of JSON text.
 *
 * @throws DomainError as there; `too-large` past 16 MiB, `invalid` for text that is no JSON
 */
export function parseSurvivalText(text: string): SurvivalRequest {
  if (new TextEncoder().encode(text).length > maxBytes)
    throw tooLarge(`The request is larger than ${maxBytes / 1024 / 1024} MiB.`)
  let input: unknown
  try {
    input = JSON.parse(text.replace(/^\uFEFF/, ''))
  } catch (error) {
    throw new DomainError('invalid', `This is not JSON: ${(error as Error).message}`)
  }
  return parseSurvivalRequest(input)
}

/** Whether any row is given as an interval. */
export const hasIntervals = ({ observations }: SurvivalRequest): boolean => observations.some(isInterval)
