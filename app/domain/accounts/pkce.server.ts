import { createHash } from 'node:crypto'

/** The S256 code challenge of a code verifier: BASE64URL(SHA256(ASCII(verifier))). RFC 7636, section 4.2. */
export const codeChallenge = (verifier: string): string => createHash('sha256').update(verifier, 'ascii').digest('base64url')
