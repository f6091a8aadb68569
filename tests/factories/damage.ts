import fc from 'fast-check'

/** Bytes changed, cut out or doubled somewhere in a file. */
export const damage = fc.array(
  fc.record({
    at: fc.double({ min: 0, max: 1, noNaN: true }),
    kind: fc.constantFrom('set', 'cut', 'double'),
    byte: fc.integer({ min: 0, max: 255 }),
    length: fc.integer({ min: 1, max: 40 })
  }),
  { minLength: 1, maxLength: 12 }
)
export type Damage = typeof damage extends fc.Arbitrary<infer T> ? T : never

export function damaged(bytes: Buffer, changes: Damage): Buffer {
  let result = Buffer.from(bytes)
  for (const { at, kind, byte, length } of changes) {
    const from = Math.floor(at * result.length)
    if (kind === 'set') result.fill(byte, from, Math.min(from + 1, result.length))
    else {
      const parts = [result.subarray(0, from), result.subarray(from, from + length), result.subarray(from + length)]
      result = Buffer.concat(kind === 'cut' ? [parts[0]!, parts[2]!] : [parts[0]!, parts[1]!, parts[1]!, parts[2]!])
    }
  }
  return result
}

/** Every number anywhere inside a value, so that none is NaN or infinite where a test says so. */
export function numbersIn(value: unknown): number[] {
  if (typeof value === 'number') return [value]
  if (typeof value !== 'object' || value === null || value instanceof Uint8Array) return []
  return Object.values(value).flatMap(numbersIn)
}
