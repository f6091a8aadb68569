import { describe, expect, it } from 'vitest'
import { codeChallenge } from './pkce.server'
import { hashToken, isTokenShaped, newToken } from './secret-token.server'

describe('a secret', () => {
  it('has 256 bits as base64url, each time others', () => {
    const many = new Set(Array.from({ length: 200 }, newToken))
    expect(many.size).toBe(200)
    for (const token of many) {
      expect(Buffer.from(token, 'base64url')).toHaveLength(32)
      expect(isTokenShaped(token)).toBe(true)
    }
  })

  /* FIPS 180-4's example of SHA-256 on one block, "abc". */
  it('is stored as its SHA-256', () => {
    expect(hashToken('abc')).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad')
  })

  it.each([null, undefined, '', 'short', 'a'.repeat(42), 'a'.repeat(44), `${'a'.repeat(42)}=`, `${'a'.repeat(42)}\n`])(
    'is not %j, which need not be looked up',
    (text) => {
      expect(isTokenShaped(text)).toBe(false)
    }
  )
})

describe('codeChallenge', () => {
  /* RFC 7636, appendix B. */
  it('is that of the standard’s example', () => {
    expect(codeChallenge('dBjftJeZ4CVP-mB92K27uhbUJU1p1r_wW1gFWFOEjXk')).toBe('E9Melhoa2OwvFrEMTJguCHaoeK1t8URWbuGJSstw-cM')
  })
})
