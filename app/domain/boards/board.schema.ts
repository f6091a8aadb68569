import { z } from 'zod'
import { fitClaims } from './fit-claim'
import { slugOf, slugProblem } from './slug'
import { spdxId } from './spdx'

const line = (label: string, max: number) =>
  z
    .string(`${label} is missing.`)
    .max(max, `${label} may have ${max} characters at most.`)
    .refine((text) => !/[\p{Cc}\u2028\u2029]/u.test(text), `${label} is one line of text.`)

/** What the form of a board says, whether it is opened or edited. */
const details = {
  name: line('The name', 60),
  summary: line('The summary', 160),
  replaces: line('What it replaces', 240),
  console: z.string('Choose the console that the board is made for.'),
  licence: z.string('Choose a licence by its SPDX identifier.').transform((text, ctx) => {
    const id = spdxId(text)
    if (id === null)
      ctx.addIssue({ code: 'custom', message: `“${text.slice(0, 60)}” is not on the SPDX licence list. Example: CERN-OHL-P-2.0` })
    return id ?? ''
  }),
  description: z.string().max(20_000, 'The description may have 20 000 characters at most.').default('')
}

export const boardEditSchema = z.object(details)
export type BoardEdit = z.output<typeof boardEditSchema>

/** Opening a board also fixes its address; left empty it is made from the name. */
export const boardOpenSchema = z.object({ ...details, slug: z.string().toLowerCase().optional() }).transform((board, ctx) => {
  const slug = board.slug ?? slugOf(board.name)
  const problem = slugProblem(slug)
  if (problem)
    ctx.addIssue({
      code: 'custom',
      path: ['slug'],
      message: board.slug === undefined ? `No address can be made from the name. Write one: ${problem}` : problem
    })
  return { ...board, slug }
})
export type BoardOpening = z.output<typeof boardOpenSchema>

/** The claim for one console revision. Whoever says `with care` or `does not fit` says why. */
export const fitClaimSchema = z
  .object({
    claim: z.enum(fitClaims, 'Choose one of the four.'),
    reason: z.string().max(200, 'The reason may have 200 characters at most.').default('')
  })
  .refine((c) => c.reason !== '' || c.claim === 'fits' || c.claim === 'untested', {
    path: ['reason'],
    message: 'Say in one sentence why, so that an installer knows what to do.'
  })
export type FitClaim = z.output<typeof fitClaimSchema>
