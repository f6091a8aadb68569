import { z } from 'zod'

export const intervalKinds = [
  { value: 'log-log', label: 'log-log (as a rule)' },
  { value: 'log', label: 'log' },
  { value: 'plain', label: 'plain' }
] as const
export const timeUnits = ['days', 'weeks', 'months', 'years', 'hours', 'cycles'] as const

/** A number as people write it, with a decimal point or comma. */
const written = (message: string) =>
  z
    .string()
    .regex(/^\s*(\d+([.,]\d*)?|[.,]\d+)\s*$/, message)
    .transform((text) => Number(text.replace(',', '.')))

/** The fields beside the table itself. */
export const calculatorSchema = z.object({
  confidence: written('The confidence is a number of percent, such as 95.')
    .refine((percent) => percent >= 50 && percent <= 99.9, 'The confidence lies between 50 and 99.9 %.')
    .transform((percent) => Number((percent / 100).toPrecision(12)))
    .default(0.95),
  interval: z.enum(['log-log', 'log', 'plain'], { error: 'Choose one of the three kinds.' }).default('log-log'),
  tau: written('The time is a number above 0, or empty.')
    .refine((tau) => tau > 0 && Number.isFinite(tau), 'The time is a number above 0, or empty.')
    .nullish()
    .transform((tau) => tau ?? null),
  timeUnit: z.enum(timeUnits, { error: 'Choose one of the units.' }).default('days')
})
