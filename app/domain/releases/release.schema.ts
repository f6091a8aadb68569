import { z } from 'zod'
import { stencils } from './stencils'
import { readVersion } from './version'

const decimal = (label: string, min: number, max: number, unit: string) =>
  z
    .string()
    .transform((text, ctx) => {
      const value = Number(text.replace(',', '.'))
      if (!/^\d+([.,]\d+)?$/.test(text) || value < min || value > max) {
        ctx.addIssue({ code: 'custom', message: `${label} is a number from ${min} to ${max} ${unit}.` })
        return z.NEVER
      }
      return value
    })
    .optional()

const words = (label: string, max: number) => z.string().max(max, `${label} may have ${max} characters at most.`).optional()

/** The form of a draft: its version, the board revision, what to order, and the notes. Everything but the first two may wait. */
export const draftSchema = z.object({
  version: z.string('The version is missing.').transform((text, ctx) => {
    const answer = readVersion(text)
    if (answer.ok) return answer.version
    ctx.addIssue({ code: 'custom', message: answer.message })
    return z.NEVER
  }),
  boardRevision: z
    .string('The board revision is missing: A for the first.')
    .regex(/^[A-Z][A-Z0-9]{0,3}$/, 'A capital letter, with digits behind it where needed: A, B, C2'),
  layers: z
    .string()
    .transform((text, ctx) => {
      if (/^([1-9]|[12]\d|3[0-2])$/.test(text)) return Number(text)
      ctx.addIssue({ code: 'custom', message: 'Copper layers are a whole number from 1 to 32.' })
      return z.NEVER
    })
    .optional(),
  thicknessMm: decimal('The thickness', 0.1, 10, 'mm'),
  copperUm: decimal('The copper weight', 5, 420, 'µm'),
  finish: words('The finish', 60),
  mask: words('The mask', 40),
  legend: words('The legend', 40),
  stencil: z.enum(stencils, 'Choose one of the four.').optional(),
  orderNote: z.string().max(2000, 'The order note may have 2 000 characters at most.').default(''),
  notes: z.string().max(20_000, 'The notes may have 20 000 characters at most.').default('')
})
export type Draft = z.output<typeof draftSchema>

/** One answer to a caution, as it is typed. */
export const answerSchema = z.string().trim().max(2000, 'An answer may have 2 000 characters at most.')

/** What the person saw when they pressed the button: it must still be so. */
/** `bundle` is the hash that the person saw, empty where the draft had none. */
export const publishSchema = z.object({
  bundle: z
    .string()
    .regex(/^[0-9a-f]{64}$/)
    .default(''),
  updatedAt: z.string().max(40)
})
export type PublishWish = z.output<typeof publishSchema>

export const withdrawSchema = z.object({
  reason: z
    .string('Say why: it stands on the release page for good.')
    .min(10, 'Say why in a sentence: it stands on the release page for good.')
    .max(1000, 'The reason may have 1 000 characters at most.')
})
