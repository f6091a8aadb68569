import { z } from 'zod'

const control = /[\p{Cc}\p{Cf}\p{Zl}\p{Zp}]/u

/** The name that others see: 1 to 60 characters on one line, without invisible ones that could make two names look alike. */
export const displayNameField = z
  .string('Enter the name that others should see.')
  .transform((text) => text.normalize('NFC').replace(/\s+/g, ' ').trim())
  .refine((text) => text.length > 0, 'Enter the name that others should see.')
  .refine((text) => text.length <= 60, 'Use 60 characters at most.')
  .refine((text) => !control.test(text), 'Leave out invisible control characters.')

/** An e-mail address in lower case; RFC 5321 allows 254 characters. */
export const emailField = z
  .string('Enter your e-mail address.')
  .transform((text) => text.trim().toLowerCase())
  .pipe(
    z
      .email('This does not look like an e-mail address, for example name@example.org.')
      .max(254, 'An e-mail address has 254 characters at most.')
  )

export const askLinkSchema = z.object({ email: emailField })
export const displayNameSchema = z.object({ displayName: displayNameField })

/** A name from somebody else's records made fit for ours; null when nothing is left of it. */
export function cleanDisplayName(text: string | null | undefined): string | null {
  const clean = [...(text ?? '').normalize('NFC').replace(new RegExp(control, 'gu'), ' ').replace(/\s+/g, ' ').trim()]
  return clean.slice(0, 60).join('').slice(0, 60).trim() || null
}
