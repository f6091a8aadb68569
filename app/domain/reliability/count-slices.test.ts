import { createHash } from 'node:crypto'
import { describe, expect, it, test } from 'vitest'
import { lifeOf } from '../../../tests/factories/life-history'
import { causes, evidenceGrades, exclusionKinds, firstPowerResults, installMethods } from '../reports/report-words'
import { coarseLife } from './count-life'
import { countingRules, slicesFor, slicesOf } from './count-slices'
import { countLife, lastFiledOn, type CountsDelta } from './counts-delta'
import { encodeBlock, blockOf, slotOf } from './day-block'
import { readFilters } from './reliability-filters'

describe('slices', () => {
  it('of a unit that worked are eight, of another four', () => {
    const unit = { evidence: 'measured', method: null, firstPower: 'works' } as const
    expect(slicesOf(unit)).toHaveLength(8)
    expect(slicesOf(unit)).toContainEqual({ evidence: '*', method: 'untold', firstPower: 'works' })
    const never = slicesOf({ ...unit, method: 'iron', firstPower: 'worse' })
    expect(never.map((s) => `${s.evidence} ${s.method} ${s.firstPower}`)).toEqual([
      'measured iron *',
      'measured * *',
      '* iron *',
      '* * *'
    ])
  })

  test.each([
    ['', ['* * *']],
    ['evidence=established', ['measured * *', 'code-read * *']],
    ['evidence=none&method=untold&first-power=set-aside', ['none untold works']],
    ['method=hot-air', ['* hot-air *']]
  ])('that filters ask for: %s', (query, expected) => {
    const { filters } = readFilters(new URLSearchParams(query), '2026-12-01')
    expect(slicesFor(filters).map((s) => `${s.evidence} ${s.method} ${s.firstPower}`)).toEqual(expected)
  })

  it('know nothing of the day of fitting', () => {
    const { filters } = readFilters(new URLSearchParams('since=2025-01-01'), '2026-12-01')
    expect(() => slicesFor(filters)).toThrow('fitted')
  })
})

describe('the last day on which anything was filed', () => {
  const fitted = 'fitted 2025-01-01; filed 2025-01-02: works'
  test.each([
    [fitted, '2025-01-02'],
    [`${fitted}; ran 2025-03-01, told 2025-03-04`, '2025-03-04'],
    [`${fitted}; parted 2025-03-01, told 2025-03-04; ran 2025-02-01`, '2025-03-04'],
    [`${fitted}; failed 2025-03-01 board, told 2025-03-05`, '2025-03-05'],
    [`${fitted}; ran 2025-03-01; excluded 2025-08-01 duplicate`, '2025-08-01']
  ])('%s', (history, expected) => {
    expect(lastFiledOn(lifeOf(history))).toBe(expected)
  })
})

/* What each version of the rules makes of the same lives. A change to how reports are counted or stored shows here; raise `countingRules` with it. */
const known: Record<number, string> = {
  1: 'f1e73bcbda5780a4'
}

describe('countingRules', () => {
  it('are raised when the same lives are counted otherwise', () => {
    const delta: CountsDelta = new Map()
    const told = [
      '',
      '; ran 2025-04-10',
      '; ran 2025-04-10; parted 2025-05-01',
      '; excluded 2025-06-01 duplicate',
      '; failed 2025-06-20 board, last ran 2025-06-15',
      '; ran 2025-04-10; failed 2025-06-20 unknown'
    ]
    let n = 0
    for (const filed of ['2025-01-02', '2025-01-24', '2025-01-25', '2025-03-01'])
      for (const what of told)
        for (const firstPower of firstPowerResults) {
          const life = lifeOf(`fitted 2025-01-10; filed ${filed}: ${firstPower}${what}`)
          n++
          life.evidence = evidenceGrades[n % evidenceGrades.length]!
          life.method = [null, ...installMethods][n % 5]!
          life.batchId = n % 3 === 0 ? 't' : null
          if (life.failure) life.failure.cause = causes[n % causes.length]!
          if (life.exclusion) life.exclusion.kind = exclusionKinds[n % exclusionKinds.length]!
          countLife(delta, life, 1)
        }
    const text = [...delta.keys()].sort().map((key) => {
      const { days, totals, lives } = delta.get(key)!.counts
      const blocks = new Map<number, Map<number, number>>()
      for (const [counter, byDay] of days)
        for (const [day, count] of byDay)
          blocks.set(blockOf(day), (blocks.get(blockOf(day)) ?? new Map<number, number>()).set(slotOf(counter, day), count))
      return [
        key,
        JSON.stringify(totals),
        ...[...blocks]
          .sort(([a], [b]) => a - b)
          .map(([block, slots]) => `${block} ${Buffer.from(encodeBlock(slots)).toString('hex')}`),
        ...[...lives!.values()].map((life) => `${JSON.stringify(life)} ${JSON.stringify(coarseLife(life))}`).sort()
      ].join('\n')
    })
    const sum = createHash('sha256').update(text.join('\n')).digest('hex').slice(0, 16)
    expect({ rules: countingRules, sum }).toEqual({ rules: countingRules, sum: known[countingRules] })
  })
})
