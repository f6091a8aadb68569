import { readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { betaQuantile, betaUpperQuantile, incompleteBeta } from './beta'
import { chiSquareQuantile, chiSquareUpperTail } from './chi-square'
import { incompleteGamma } from './gamma'
import { gammaQuantile, gammaUpperQuantile } from './gamma-quantile'
import { normalUpperQuantile, normalUpperTail } from './normal'

/*
 * How accurate the special functions are over the range they are used in: relative to mpmath with 45 digits, beside R 4.2.2
 * (tests/fixtures/special, whose README names the generators). The issue asks for 1e-10; each limit is a small multiple of what was measured.
 */

type Row = number[]
const reference: Record<string, Row[]> = JSON.parse(
  readFileSync(new URL('../../../../tests/fixtures/special/reference.json', import.meta.url), 'utf8')
)

type Measured = { name: string; rows: number; limit: number; of: (...args: number[]) => number }

const functions: Measured[] = [
  { name: 'normalUpperTail', rows: 12, limit: 2e-14, of: normalUpperTail },
  { name: 'normalUpperQuantile', rows: 16, limit: 3e-14, of: normalUpperQuantile },
  { name: 'chiSquareUpperTail', rows: 121, limit: 2e-13, of: chiSquareUpperTail },
  { name: 'chiSquareQuantile', rows: 121, limit: 2e-14, of: chiSquareQuantile },
  { name: 'gammaLowerTail', rows: 91, limit: 5e-14, of: (a, x) => incompleteGamma(a, x).lower },
  { name: 'gammaUpperTail', rows: 91, limit: 5e-14, of: (a, x) => incompleteGamma(a, x).upper },
  { name: 'gammaQuantile', rows: 84, limit: 2e-14, of: gammaQuantile },
  { name: 'gammaUpperQuantile', rows: 84, limit: 2e-14, of: gammaUpperQuantile },
  { name: 'betaLowerTail', rows: 207, limit: 2e-11, of: (a, b, x) => incompleteBeta(a, b, x).lower },
  { name: 'betaUpperTail', rows: 207, limit: 2e-11, of: (a, b, x) => incompleteBeta(a, b, x).upper },
  { name: 'betaQuantile', rows: 413, limit: 2e-14, of: betaQuantile },
  { name: 'betaUpperQuantile', rows: 392, limit: 2e-11, of: betaUpperQuantile }
]

test.each(functions)('$name: $rows values within $limit', ({ name, rows, limit, of }) => {
  expect(reference[name]).toHaveLength(rows)
  for (const row of reference[name]!) {
    const [theirs, exact] = [row.at(-1)!, row.at(-2)!]
    const ours = of(...row.slice(0, -2))
    // Two programs that share nothing agree on what is right.
    expect(Math.abs(theirs / exact - 1), `R's own ${name}(${row.join(', ')})`).toBeLessThan(1e-12)
    expect(Math.abs(ours / exact - 1), `${name}(${row.slice(0, -2).join(', ')})`).toBeLessThan(limit)
  }
})

test('every function of the reference is measured', () => {
  expect(functions.map(({ name }) => name).sort()).toEqual(
    Object.keys(reference)
      .filter((key) => Array.isArray(reference[key]))
      .sort()
  )
})
