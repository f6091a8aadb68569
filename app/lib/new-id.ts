import { randomBytes } from 'node:crypto'

const alphabet = '0123456789abcdefghjkmnpqrstvwxyz'

/** A new identifier: 16 characters of base 32 without i, l, o and u (80 random bits). */
export function newId(random: (n: number) => Uint8Array = randomBytes): string {
  let text = ''
  for (const byte of random(16)) text += alphabet[byte & 31]
  return text
}
