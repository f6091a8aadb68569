import { describe, expect, it } from 'vitest'
import { checkForm, decodeBase64, startChecksum, type ChecksumName } from './checksums'

/** The check value of each algorithm, over the ASCII digits 1 to 9: the catalogue of parametrised CRC algorithms (CRC-32/ISO-HDLC,
 * CRC-32/ISCSI, CRC-64/NVME); SHA-1 and SHA-256 of "abc": FIPS 180-4's examples. */
const cases: [ChecksumName, string, string][] = [
  ['crc32', '123456789', 'cbf43926'],
  ['crc32c', '123456789', 'e3069283'],
  ['crc64nvme', '123456789', 'ae8b14860a799888'],
  ['sha1', 'abc', 'a9993e364706816aba3e25717850c26c9cd0d89d'],
  ['sha256', 'abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad']
]

describe('checksums', () => {
  it.each(cases)('%s has its published check value', (name, text, hex) => {
    const digester = startChecksum(name)
    digester.update(Buffer.from(text))
    expect(digester.digest().toString('hex')).toBe(hex)
  })

  it.each(cases)('%s in pieces is that of the whole', (name, text, hex) => {
    const digester = startChecksum(name)
    for (const letter of text) digester.update(Buffer.from(letter))
    expect(digester.digest().toString('hex')).toBe(hex)
  })

  it('wants base64 of the right size', () => {
    expect(() => checkForm('crc32', 'y/Q5Jg==')).not.toThrow()
    for (const value of ['', 'y/Q5Jg', 'y/Q5Jg== ', 'cbf43926', '!!!!!!=='])
      expect(() => checkForm('crc32', value)).toThrow('invalid')
    expect(decodeBase64('y/Q5Jg==')?.toString('hex')).toBe('cbf43926')
    expect(decodeBase64('y_Q5Jg==')).toBeUndefined()
  })
})
