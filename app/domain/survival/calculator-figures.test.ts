import { describe, expect, it } from 'vitest'
import { expectClose, reference } from '../../../tests/support/survival-reference'
import { calculatorExamples } from './calculator-examples'
import { calculatorFigures, type CalculatorOptions } from './calculator-figures'

const usual: CalculatorOptions = { confidence: 0.95, interval: 'log-log', tau: null, timeUnit: 'weeks' }
const bytes = (text: string) => new Uint8Array(new TextEncoder().encode(text)).buffer
const figuresOf = (text: string, options: Partial<CalculatorOptions> = {}) =>
  calculatorFigures(bytes(text), { ...usual, ...options })

describe('published data', () => {
  // Remission in acute leukaemia, Blood 21:699-716 (1963); expected values from R's survival package.
  const { data, results } = reference('right-remission42')
  const table = ['weeks;status;arm', ...data.time.map((t: number, i: number) => `${t};${data.event[i]};${data.group[i]}`)].join(
    '\n'
  )

  it('42 remissions: medians, means and the log-rank test', () => {
    const figures = figuresOf(table, { tau: results.rmst[0].tau })
    figures.groups.forEach((group, g) => {
      const expected = results.kaplan_meier.by_group[g]
      expect(group).toMatchObject({ name: expected.group, n: expected.n, events: expected.events })
      expect(group.median.estimate).toBe(expected.median_print.value)
      expectClose([group.mean!.estimate], [results.rmst[0].rmst[g]], 1e-12, 'mean')
    })
    expectClose([figures.logRank!.chiSquare], [results.log_rank.unstratified.chisq], 1e-12, 'log-rank')
    expect(figures.reading).toBe('42 rows; time from “weeks”, event from “status”, group from “arm”')
    expect(figures.sentence).toMatch(/^Of 42 units followed, in 2 groups, 30 failed\..*log-rank p < 0\.001\)\.$/)
    expect(JSON.parse(figures.json!).groups).toHaveLength(2)
    expect(figures.csv!.split('\r\n')[0]).toBe('group,time,atRisk,events,censored,survival,standardError,lower,upper,bound')
  })
})

describe('words', () => {
  it('claim no more than the exact bound where nothing failed', () => {
    // 0.05^(1/20) = 0.8609 (Clopper and Pearson 1934)
    expect(figuresOf('5,0\n'.repeat(20)).sentence).toMatch(
      /none failed\. None had failed; with 20 at risk, at least 86 of 100 still work/
    )
  })

  it('say nothing of too few', () => {
    expect(figuresOf('5,1\n6,0').sentence).toBe('Of 2 units followed, 1 failed. Too few were followed at any time to say more.')
  })

  it('say wear only where the interval of the shape excludes 1', () => {
    const { text } = calculatorExamples[0]!
    const { groups, shapeSentence } = figuresOf(text)
    expect(groups.every(({ shape }) => shape!.lower < shape!.estimate && shape!.estimate < shape!.upper)).toBe(true)
    const wear = groups.filter(({ shape }) => shape!.lower > 1)
    if (wear.length === 0) expect(shapeSentence).toMatch(/holds 1/)
    for (const { name } of wear) expect(shapeSentence).toContain(name)
  })
})

it('incidences end where too few are at risk', () => {
  // 8 units: causes a at 1, b at 2, a at 5 (4 at risk then). Share by hand: a 1/8, b 7/8 * 1/7 = 1/8.
  const [group] = figuresOf('time,cause\n1,a\n2,b\n3,0\n4,0\n5,a\n6,0\n7,0\n8,0').groups
  expect(group!.causes.map(({ name, until }) => [name, until])).toEqual([
    ['a', 4],
    ['b', 4]
  ])
  for (const { last } of group!.causes) expect(last).toBeCloseTo(1 / 8, 12)
})

describe('bounds', () => {
  it('a curve of many steps is cut down for the page, and its answer left to the endpoint', () => {
    const figures = figuresOf(Array.from({ length: 6000 }, (_, i) => `${i + 0.5},${i % 3 === 0 ? 1 : 0}`).join('\n'))
    expect(figures.groups[0]!.stepCount).toBe(6000)
    expect(figures.groups[0]!.steps).toHaveLength(600)
    expect(figures.groups[0]!.points!.length).toBeLessThan(450)
    expect(figures.grain).toBe(50)
    expect(figures).toMatchObject({ json: null, csv: null })
  })

  it('errors of values stand at their lines', () => {
    expect(() => figuresOf('time,event\n5,1\n\n-3,0')).toThrow(
      expect.objectContaining({ errors: [{ path: 'data.4', message: 'line 4: The time must be a number, 0 or above.' }] })
    )
    expect(() => figuresOf('entry,time,event\n5,5,1')).toThrow(expect.objectContaining({ kind: 'impossible' }))
    expect(() => calculatorFigures(new Uint8Array([0x50, 0x4b, 3, 4, 0xff]).buffer, usual)).toThrow(/not a text in UTF-8/)
  })
})

it.each(calculatorExamples)('the example $name computes', ({ text, name }) => {
  const figures = figuresOf(text)
  expect(figures.method).toBe(name === 'check-ins' ? 'turnbull' : 'kaplan-meier')
  expect(figures.groups.length).toBe(name === 'batches' ? 2 : 1)
  expect(figures.groups[0]!.causes.length).toBe(name === 'causes' ? 2 : 0)
  expect(figures.groups[0]!.events).toBeGreaterThan(5)
})
