import { describe, expect, it } from 'vitest'
import { aboutBytes, exactBytes, shareOfBytes } from './byte-size'

describe('byte sizes', () => {
  it.each([
    [1, '1 byte'],
    [999, '999 bytes'],
    [196755, '196 755 bytes'],
    [67108864, '67 108 864 bytes']
  ])('prints %d exactly', (n, text) => expect(exactBytes(n)).toBe(text))
  it.each([
    [0, '0 B'],
    [196755, '197 kB'],
    [1500, '1.5 kB'],
    [999_499, '999 kB'],
    [999_500, '1.0 MB'],
    [67108864, '67 MB']
  ])('prints %d about', (n, text) => expect(aboutBytes(n)).toBe(text))
  it.each([
    [118_000, 197_000, '118 of 197 kB, 59 %'],
    [0, 2_500_000, '0.0 of 2.5 MB, 0 %'],
    [5, 5, '0.0 of 0.0 kB, 100 %']
  ])('prints the share %d of %d', (part, whole, text) => expect(shareOfBytes(part, whole)).toBe(text))
})
