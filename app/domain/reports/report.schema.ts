import { z } from 'zod'
import { isDay } from '~/lib/dates'
import { normalTag } from './filing-rules'
import { causes, evidenceGrades, exclusionKinds, firstPowerResults, installMethods, statements } from './report-words'

const maxNotes = 4000
const day = (message: string) => z.string(message).refine(isDay, 'Write a day of the calendar as 2026-11-30.')
const notes = z
  .string()
  .max(maxNotes, `At most ${maxNotes} characters.`)
  .refine((text) => !hasControls(text), 'Contains characters that cannot be shown.')
const formKey = z
  .string('The form is incomplete. Load it again.')
  .regex(/^[0-9a-z]{16}$/, 'The form is incomplete. Load it again.')
const id = (message: string) => z.string(message).regex(/^[\w-]{1,64}$/, message)
const oneOf = <const T extends readonly [string, ...string[]]>(values: T, message: string) => z.enum(values, message)

// Line breaks and tabs are text; other control characters are not.
const hasControls = (text: string) => [...text].some((c) => (c < ' ' && c !== '\n' && c !== '\r' && c !== '\t') || c === '\u007f')

/** The fields of an install report as the form sends them. */
export const installReportFields = {
  form_key: formKey,
  release: id('Choose the release that was fitted.'),
  revision: id('Choose the revision of the console.'),
  unit_tag: z
    .string()
    .transform(normalTag)
    .refine((tag) => /^[0-9A-Z][0-9A-Z-]{1,31}$/.test(tag), 'A tag has letters, digits and hyphens, like BT-7K4-19.')
    .optional(),
  installed_on: day('Say on which day it was fitted.'),
  evidence: oneOf(evidenceGrades, 'Say how the fault was established.'),
  method: oneOf(installMethods, 'Choose how it was soldered.').optional(),
  first_power: oneOf(firstPowerResults, 'Say what it did at first power.'),
  cause: oneOf(causes, 'Choose what it came from.').optional(),
  notes: notes.optional()
}

/** An install report as the form sends it. The cause is asked only when it did not work at first power. */
export const installReportSchema = z
  .object(installReportFields)
  .refine((report) => report.first_power === 'works' || report.cause !== undefined, {
    path: ['cause'],
    message: 'Say what it came from; “I do not know” is an answer too.',
    when: ({ value }) => firstPowerResults.some((result) => result === (value as { first_power?: unknown } | null)?.first_power)
  })
export type InstallReportInput = z.output<typeof installReportSchema>

const checkInFields = {
  form_key: formKey,
  stated_on: day('Say on which day this was so.'),
  notes: notes.optional()
}

const lastRunningOn = day('Write a day of the calendar as 2026-11-30.').optional()
const failureCause = oneOf(causes, 'Say what it came from; “I do not know” is an answer too.')

/** What of a check-in the stored history may be held against, each field by itself. */
export const checkInStatementFields = {
  statement: oneOf(statements, 'Say how it is.'),
  stated_on: checkInFields.stated_on,
  last_running_on: lastRunningOn,
  cause: failureCause
}

/** A check-in, told apart by its statement. */
export const checkInSchema = z.discriminatedUnion(
  'statement',
  [
    z.object({ statement: z.literal('running'), ...checkInFields }),
    z.object({
      statement: z.literal('failed'),
      ...checkInFields,
      last_running_on: lastRunningOn,
      cause: failureCause
    }),
    z.object({ statement: z.literal('parted'), ...checkInFields })
  ],
  'Say how it is.'
)
export type CheckInInput = z.output<typeof checkInSchema>

/** A steward's exclusion: the kind is counted, the reason is public. */
export const exclusionSchema = z.object({
  kind: oneOf(exclusionKinds, 'Choose the kind of reason.'),
  reason: z
    .string('Write the reason; everybody can read it.')
    .min(10, 'Write a sentence that others can check; everybody can read it.')
    .max(500, 'At most 500 characters.')
})
export type ExclusionInput = z.output<typeof exclusionSchema>
