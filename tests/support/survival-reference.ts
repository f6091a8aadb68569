import { readdirSync, readFileSync } from 'node:fs'
import { expect } from 'vitest'

/**
 * The published data sets under tests/fixtures/survival with the results of R's survival package (each file names its source, software and
 * licence; README.md beside them has the conventions and tolerances).
 */
const folder = new URL('../fixtures/survival/', import.meta.url)

/** The strings "Infinity" and "-Infinity" of the files as numbers. */
export type Ref = number | null

// The files are plain JSON of many shapes; each test reads the few fields it names.
// eslint-disable-next-line @typescript-eslint/no-explicit-any
export type Reference = any

const cache = new Map<string, Reference>()

/** One file by its name without extension. */
export function reference(name: string): Reference {
  let file = cache.get(name)
  if (file === undefined) {
    file = JSON.parse(readFileSync(new URL(`${name}.json`, folder), 'utf8'), (_key, value: unknown) =>
      value === 'Infinity' ? Infinity : value === '-Infinity' ? -Infinity : value
    )
    cache.set(name, file)
  }
  return file
}

/** Names of all files whose name begins with the given word. */
export const referencesNamed = (start: string): string[] =>
  readdirSync(folder)
    .filter((name) => name.startsWith(start) && name.endsWith('.json'))
    .map((name) => name.slice(0, -5))
    .sort()

/** Names of all files that have results of a kind (`kaplan_meier`, `log_rank` …). */
export const referencesWith = (result: string): string[] =>
  referencesNamed('').filter((name) => name !== 'index' && reference(name).results[result] !== undefined)

/** Holds every value to its reference within a relative tolerance (absolute below 1); null, NaN and infinities must agree as such. */
export function expectClose(actual: ArrayLike<number | null>, expected: ArrayLike<Ref>, tolerance: number, what: string): void {
  expect(actual.length, `${what}: length`).toBe(expected.length)
  for (let i = 0; i < expected.length; i++) {
    const a = actual[i] ?? NaN
    const e = expected[i] ?? NaN
    if (Number.isNaN(e) || !Number.isFinite(e)) expect(a, `${what}[${i}]`).toBe(e)
    else if (!(Math.abs(a - e) <= tolerance * Math.max(Math.abs(e), floor)))
      expect.fail(`${what}[${i}]: ${a} differs from ${e} by more than ${tolerance}`)
  }
}

// Values that are 0 by cancellation in one program and 1e-17 in the other have no relative error.
const floor = 1e-3
