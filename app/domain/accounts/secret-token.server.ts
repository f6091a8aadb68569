import { createHash, randomBytes } from 'node:crypto'

const shape = /^[A-Za-z0-9_-]{43}$/

/** A new secret of 256 random bits, as 43 characters of base64url. It goes to one person; only its hash is stored. */
export const newToken = (): string => randomBytes(32).toString('base64url')

/** SHA-256 in hexadecimal. Enough for a secret of 256 random bits, which no list of guesses can hold. */
export const hashToken = (token: string): string => createHash('sha256').update(token).digest('hex')

/** Whether the text could be one of our secrets; anything else need not be looked up. */
export const isTokenShaped = (text: string | null | undefined): text is string => typeof text === 'string' && shape.test(text)
