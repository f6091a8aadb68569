import { describe, expect, it } from 'vitest'
import { customaryLicences, spdxId } from './spdx'

describe('spdxId', () => {
  it('knows the customary ones in their own spelling', () => {
    for (const id of customaryLicences) expect(spdxId(id.toLowerCase())).toBe(id)
  })
  it.each(['', 'CERN', 'Open', 'GPL 3', 'MIT OR Apache-2.0'])('does not know %j', (text) => expect(spdxId(text)).toBeNull())
})
