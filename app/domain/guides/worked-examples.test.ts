import { describe, expect, it } from 'vitest'
import { lifeOf } from '../../../tests/factories/life-history'
import { guideSections, numbersIn } from '../../../tests/support/guide-tables'
import { addDays, daysBetween } from '~/lib/dates'
import { chanceLevel } from '../reliability/comparison-words'
import { lowerPercent, tooFew } from '../reliability/reliability-words'
import { dueDays, nextDueDay } from '../reliability/silent-figures'
import { allReports, observationOf, promptDays, type LifeOutcome } from '../reports/observations'
import { firstPowerWords } from '../reports/report-words'
import { aalenJohansen } from '../survival/aalen-johansen'
import { batchWatch } from '../survival/batch-watch'
import { clopperPearson } from '../survival/clopper-pearson'
import { columnsOf } from '../survival/columns'
import { confidenceLimits, curveLimits } from '../survival/confidence-limits'
import { completeness } from '../survival/follow-up'
import { holm } from '../survival/holm'
import { kaplanMeier } from '../survival/kaplan-meier'
import { logRank } from '../survival/log-rank'
import { nelsonAalen } from '../survival/nelson-aalen'
import type { TimedObservation } from '../survival/observation'
import { quantile } from '../survival/quantile'
import { restrictedMean, restrictedMeanDifference } from '../survival/restricted-mean'
import { isSilent, silentAfterDays, silentBounds, type SilentUnit } from '../survival/silent-bounds'
import { spansOf } from '../survival/spans'
import { survivalAt } from '../survival/survival-at'
import { tallyOf } from '../survival/tally'
import { turnbull } from '../survival/turnbull'
import { fitWeibull, weibullLimits } from '../survival/weibull'
import { wearPattern } from '../survival/weibull-quantities'

/*
 * Each example's units are read from the guide's own tables, the figures computed by the functions that the pages and the endpoint use, and
 * what they print compared cell by cell. The numbers in the text between the tables are held one by one as well.
 */

const sections = guideSections('worked-examples')
const asOf = '2026-12-01'
const none = '–'

const seen = new Set<string>()
/** A section's tables; `prose` are the numbers of its text, in order. */
function example(id: string) {
  const section = sections.get(id)!
  seen.add(id)
  return { rows: section.tables.map((table) => table.rows), prose: numbersIn(section.prose) }
}
const fixed = (value: number, digits: number) => value.toFixed(digits)
const percent = (share: number) => fixed(100 * share, 1)
const range = (lower: string, upper: string) => `${lower} to ${upper}`
const curveOf = (rows: TimedObservation[]) => kaplanMeier(tallyOf(columnsOf(rows)))

/** A unit's rows "from, to, end" as an observation. */
function observed(from: string, to: string, end: string): TimedObservation {
  if (end !== 'failed' && end !== 'still ran') throw new Error(`no such end: ${end}`)
  return { entry: Number(from), time: Number(to), event: end === 'failed' ? 1 : 0 }
}
const eight = () => example('curve').rows[0]!.map(([, from, to, end]) => observed(from!, to!, end!))

/** What an outcome's three cells read. */
function outcomeCells(outcome: LifeOutcome, isParted: boolean): string[] {
  if (outcome.kind === 'failed-before-registration') return [none, none, 'failed before it was filed']
  if (outcome.kind !== 'observed') throw new Error(`no example of ${outcome.kind}`)
  const { entry, time, cause, interval } = outcome
  const failed = interval === null ? 'failed' : `failed, after day ${interval.lower}`
  return [String(entry), String(time), cause !== null ? failed : isParted ? 'parted' : 'still ran']
}

describe('the worked examples', () => {
  it('from reports to days', () => {
    const { rows, prose } = example('lives')
    const installedOn = '2026-01-10'
    const computed = rows[0]!.map(([unit, power, filed, later]) => {
      const said = later === 'nothing' ? [] : later!.split(', ')
      // What was found before the report was filed was told with it.
      const facts = said.map((fact) => {
        const [word, day] = fact.split(' ')
        return word === 'failed' ? `failed ${day} unknown, told ${day! > filed! ? day : filed}` : fact
      })
      const life = lifeOf([`fitted ${installedOn}`, `filed ${filed}: ${power!.replace(' ', '-')}`, ...facts].join('; '))
      expect(firstPowerWords[life.firstPower].label.toLowerCase()).toBe(power)
      const outcome = observationOf(life, asOf, allReports)
      return [
        unit,
        ...outcomeCells(
          outcome,
          said.some((fact) => fact.startsWith('parted'))
        )
      ]
    })
    expect(computed).toEqual(rows[1])
    expect(prose).toEqual([installedOn, asOf])
    expect(promptDays).toBe(14) // "within two weeks"
  })

  it('the curve, with its band', () => {
    const { rows, prose } = example('curve')
    const curve = curveOf(eight())
    const limits = curveLimits(curve)
    const falls = [...curve.time.keys()].filter((i) => curve.events[i]! > 0)
    expect(
      falls.map((i) => {
        const n = curve.atRisk[i]!
        const d = curve.events[i]!
        return [String(curve.time[i]), String(n), String(d), `${n - d}/${n}`, percent(curve.survival[i]!)]
      })
    ).toEqual(rows[1])
    expect(
      falls.map((i, k) => {
        const sum = curve.greenwood[i]!
        const before = k === 0 ? 0 : curve.greenwood[falls[k - 1]!]!
        return [
          String(curve.time[i]),
          fixed(sum - before, 4),
          fixed(sum, 4),
          percent(curve.survival[i]! * Math.sqrt(sum)),
          range(percent(limits.lower[i]!), percent(limits.upper[i]!))
        ]
      })
    ).toEqual(rows[2])
    expect(prose).toEqual(['1958', '1926'])
    expect(tooFew).toBe(5) // "under five followed"
    expect(rows[0]!.find(([unit]) => unit === 'L')![1]).not.toBe('0') // "L was filed late", "not yet among those followed"
    expect(Number(rows[0]!.find(([unit]) => unit === 'L')![1])).toBeGreaterThan(curve.time[0]!)
  })

  it('when nothing has failed', () => {
    const { rows, prose } = example('none-failed')
    const least = (n: number) => confidenceLimits({ survival: 1, greenwood: 0, atRisk: n }).lower!
    expect(rows[0]!.map(([n]) => [n, lowerPercent(least(Number(n)))])).toEqual(rows[0])
    expect(prose).toEqual([String(fixed(1 - 0.95, 2)), '1', '95'])
    expect(1 - least(6)).toBeCloseTo(2 / 5, 1) // "two in five could fail"
  })

  it('the median life', () => {
    const { rows, prose } = example('median')
    const curve = curveOf(eight())
    const median = quantile(curve, curveLimits(curve), 0.5)
    const day = (value: number | null) => (value === null ? 'not reached' : String(value))
    expect(rows[0]).toEqual([
      ['Median', day(median.estimate)],
      ['Lower limit', day(median.lower)],
      ['Upper limit', day(median.upper)]
    ])
    expect(prose).toEqual(['1982'])
  })

  it('mean days in a stretch of time', () => {
    const { rows, prose } = example('mean')
    const curve = curveOf(eight())
    const tau = 150
    const mean = restrictedMean(curve, tau)
    const falls = [...curve.time].filter((t, i) => curve.events[i]! > 0 && t < tau)
    const steps = [0, ...falls].map((from, i) => ({ from, to: falls[i] ?? tau, share: survivalAt(curve, from).survival! }))
    expect(steps.map(({ from, to, share }) => [String(from), String(to), percent(share), fixed(share * (to - from), 1)])).toEqual(
      rows[0]
    )
    expect(steps.reduce((sum, { from, to, share }) => sum + share * (to - from), 0)).toBeCloseTo(mean.estimate!, 12)
    expect(rows[1]).toEqual([
      [`Mean of these ${tau} days`, fixed(mean.estimate!, 1)],
      ['Standard error', fixed(mean.standardError!, 1)],
      ['95 % interval', range(fixed(mean.lower!, 1), fixed(mean.upper!, 1))]
    ])
    expect(prose).toEqual(['2013', String(tau)])
  })

  it('failures known to lie between two days', () => {
    const { rows, prose } = example('intervals')
    const units = rows[0]!.map(([, lower, upper]) => ({ lower: Number(lower), upper: upper === none ? null : Number(upper) }))
    const fit = turnbull(spansOf(units))
    const day = (value: number) => (value === Infinity ? none : String(value))
    const cells = [...fit.mass.keys()].filter((k) => fit.mass[k]! > 0)
    expect(
      cells.map((k) => [
        day(fit.left[k]!),
        day(fit.right[k]!),
        percent(fit.mass[k]!),
        fit.right[k] === Infinity ? none : percent(fit.survivalAfter[k]!)
      ])
    ).toEqual(rows[1])
    expect(prose).toEqual(['1976', '1993'])
  })

  it('one cause beside another', () => {
    const { rows, prose } = example('causes')
    const units = rows[0]!.map(([, time, end]) => ({ time: Number(time), event: end === 'still ran' ? 0 : end! }))
    const tally = tallyOf(columnsOf(units, ['board', 'accident']))
    const result = aalenJohansen(tally)
    const falls = [...result.time.keys()].filter((i) => tally.failed[tally.time.indexOf(result.time[i]!)]! > 0)
    expect(
      falls.map((i) => [
        String(result.time[i]),
        String(result.atRisk[i]),
        percent(result.incidence[0]![i]!),
        percent(result.incidence[1]![i]!),
        percent(result.eventFree[i]!)
      ])
    ).toEqual(rows[1])
    expect(prose).toEqual(['1978'])
  })

  it('one cause alone', () => {
    const { rows, prose } = example('one-cause')
    const units = example('causes').rows[0]!
    const curve = curveOf(units.map(([, time, end]) => ({ time: Number(time), event: end === 'board' ? 1 : 0 })))
    const falls = [...curve.time.keys()].filter((i) => curve.events[i]! > 0)
    expect(
      falls.map((i) => {
        const [n, d] = [curve.atRisk[i]!, curve.events[i]!]
        return [String(curve.time[i]), String(n), String(d), `${n - d}/${n}`, percent(curve.survival[i]!)]
      })
    ).toEqual(rows[0])
    // "38.9 of a hundred" as the example before has it, "not" what this curve leaves
    const competing = example('causes').rows[1]!.at(-1)![2]!
    expect(prose).toEqual([competing, percent(1 - curve.survival.at(-1)!)])
  })

  it('two groups', () => {
    const { rows, prose } = example('two-groups')
    const group = (name: string) =>
      rows[0]!.filter(([, revision]) => revision === name).map(([, , to, end]) => observed('0', to!, end!))
    const [old, young] = [group('old'), group('new')]
    expect(old.length + young.length).toBe(rows[0]!.length)
    const test = logRank([[old, young].map((units) => tallyOf(columnsOf(units)))])!
    // One failure a day: the chance that it hits the old group, and the variance of that yes or no.
    const steps = [...old.map((u) => ({ ...u, name: 'old' })), ...young.map((u) => ({ ...u, name: 'new' }))]
      .filter((u) => u.event === 1)
      .sort((a, b) => a.time - b.time)
      .map(({ time, name }) => {
        const followed = [old, young].map((units) => units.filter((u) => u.time >= time).length)
        return { time, name, followed, chance: followed[0]! / (followed[0]! + followed[1]!) }
      })
    expect(
      steps.map(({ time, name, followed, chance }) => [
        String(time),
        ...followed.map(String),
        name,
        fixed(chance, 3),
        fixed(chance * (1 - chance), 3)
      ])
    ).toEqual(rows[1])
    expect(steps.reduce((sum, { chance }) => sum + chance, 0)).toBeCloseTo(test.expected[0]!, 12)
    expect(rows[2]).toEqual([
      ['Failed on the old revision', String(test.observed[0])],
      ['Expected there', fixed(test.expected[0]!, 3)],
      ['Variance', fixed(test.variance[0]![0]!, 3)],
      ['Chi-square', fixed(test.chiSquare, 3)],
      ['*p*', fixed(test.p, 2)]
    ])
    expect(prose).toEqual(['1966'])
    expect(test.observed).toEqual([3, 1]) // "three against one"
    expect(Math.round(1 / test.p)).toBe(6) // "one time in six"
  })

  it('several pairs at once', () => {
    const { rows, prose } = example('several')
    const adjusted = holm(rows[0]!.map(([, p]) => Number(p)))
    expect(rows[0]!.map(([pair, p, times], i) => [pair, p, times, fixed(adjusted[i]!, 3)])).toEqual(rows[0])
    expect(rows[0]!.map(([, , times]) => Number(times))).toEqual([3, 2, 1])
    expect(prose).toEqual(['1979'])
    expect(adjusted.filter((p) => p < chanceLevel)).toHaveLength(1) // "only the first pair"
  })

  it('the difference in days', () => {
    const { rows, prose } = example('difference')
    const tau = 100 // "their first hundred days"
    const units = example('two-groups').rows[0]!
    const means = rows[0]!.map(([name]) => {
      const group = units.filter(([, revision]) => revision === name).map(([, , to, end]) => observed('0', to!, end!))
      return restrictedMean(curveOf(group), tau)
    })
    expect(rows[0]).toEqual(means.map((mean, i) => [['old', 'new'][i], fixed(mean.estimate!, 1), fixed(mean.standardError!, 1)]))
    const { estimate, standardError, lower, upper } = restrictedMeanDifference(means[0]!, means[1]!)!
    expect(rows[1]).toEqual([
      ['New less old', fixed(estimate, 1)],
      ['Standard error', fixed(standardError, 1)],
      ['95 % interval', range(fixed(lower, 1), fixed(upper, 1)).replace('-', '−')]
    ])
    expect(Math.hypot(means[0]!.standardError!, means[1]!.standardError!)).toBeCloseTo(standardError, 12)
    expect(Math.round(upper / 30)).toBe(2) // "two months"
    expect(tooFew).toBe(5) // "five of both"
    expect(prose).toEqual([])
  })

  it('whether failures come early or late', () => {
    const { rows, prose } = example('shape')
    const words = { 'early-failures': 'early failures', 'wear-out': 'wear-out' }
    expect(
      rows[0]!.map(([set, failed, ran]) => {
        const days = (cell: string, event: 0 | 1) => cell.split(', ').map((time) => ({ time: Number(time), event }))
        const fit = fitWeibull(spansOf([...days(failed!, 1), ...days(ran!, 0)]))!
        const { estimate, lower, upper } = weibullLimits(fit, 'shape')
        const pattern = wearPattern(fit)
        return [set, fixed(estimate, 2), range(fixed(lower, 2), fixed(upper, 2)), pattern === null ? 'nothing' : words[pattern]]
      })
    ).toEqual(rows[1])
    expect(prose).toEqual([])
  })

  it('at first power', () => {
    const { rows, prose } = example('first-power')
    const limits = rows[0]!.map(([n, works]) => clopperPearson(Number(works), Number(n))!)
    expect(
      limits.map(({ estimate, lower, upper }, i) => [
        ...rows[0]![i]!.slice(0, 2),
        percent(estimate),
        range(percent(lower), percent(upper))
      ])
    ).toEqual(rows[0])
    expect(prose).toEqual(['1934'])
    const [few, , many] = limits
    expect(Number(rows[0]![2]![0]) / Number(rows[0]![0]![0])).toBe(5) // "five times the reports"
    expect((many!.upper - many!.lower) / (few!.upper - few!.lower)).toBeLessThan(0.5)
  })

  const watched = () =>
    example('follow-up').rows[0]!.map(([unit, seenTo, end, could]) => ({
      unit: unit!,
      observation: observed('0', seenTo!, end!),
      could: Number(could)
    }))
  const installedOn = '2026-02-04'
  const toClose = daysBetween(installedOn, asOf)

  it('how much of the time was seen', () => {
    const { rows, prose } = example('follow-up')
    const units = watched()
    for (const { observation, could } of units) expect(could).toBe(observation.event === 1 ? observation.time : toClose)
    const {
      observed: days,
      potential,
      ratio
    } = completeness(units.map(({ observation: { time, event } }) => ({ time, toClose, isFailed: event === 1 })))
    expect(rows[1]).toEqual([
      ['Days seen', String(days)],
      ['Days that could be seen', String(potential)],
      ['Completeness', percent(ratio!)]
    ])
    expect(prose).toEqual([installedOn, String(toClose), asOf, '2002'])
  })

  it('what the silent could hide', () => {
    const { rows, prose } = example('silent')
    const due = new Map(rows[0]!.map(([unit, day]) => [unit!, day!]))
    for (const { unit, observation } of watched())
      expect(due.get(unit)).toBe(observation.event === 1 ? none : addDays(installedOn, nextDueDay(observation.time)))
    const units = watched().map(({ unit, observation }): SilentUnit => {
      const day = due.get(unit)!
      return { observation, isSilent: day !== none && isSilent(day, asOf), toClose }
    })
    const { worst, best } = silentBounds(units)
    const said = ({ time, event }: TimedObservation) => `${event === 1 ? 'failed' : 'ran'} ${time}`
    expect(
      rows[0]!.map(([unit, day], i) => [unit, day, units[i]!.isSilent ? 'yes' : 'no', said(worst[i]!), said(best[i]!)])
    ).toEqual(rows[0])
    const share = (all: TimedObservation[]) => percent(survivalAt(curveOf(all), 180).survival!)
    expect(rows[1]).toEqual([
      ['At worst', share(worst)],
      ['As reported', share(units.map(({ observation }) => observation))],
      ['At best', share(best)]
    ])
    expect(sections.get('silent')!.tables[1]!.head[0]).toBe('Share on day 180')
    expect(prose).toEqual([String(silentAfterDays), ...dueDays.map(String)])
    expect(units.filter((unit) => unit.isSilent)).toHaveLength(2) // "two silent units of six"
  })

  it('watching a batch', () => {
    const { rows, prose } = example('batch')
    const column = (i: number) => Float64Array.from(rows[0]!, (row) => Number(row[i]))
    const hazard = nelsonAalen({ time: column(0), atRisk: column(1), events: column(2) })
    expect(
      rows[0]!.map(([day, followed, failed], i) => [
        day,
        followed,
        failed,
        fixed(Number(failed) / Number(followed), 3),
        fixed(hazard.cumulative[i]!, 3)
      ])
    ).toEqual(rows[0])
    const batch = rows[1]!.map(([, to, end]) => ({ time: Number(to), isFailed: observed('0', to!, end!).event === 1 }))
    const of = (units: typeof batch) => batchWatch(units, hazard)
    // A unit that left before anything was to be expected has no ratio of its own.
    expect(batch.map((unit, i) => [...rows[1]![i]!.slice(0, 3), fixed(of([unit])?.expected ?? 0, 3)])).toEqual(rows[1])
    const watch = of(batch)!
    expect(rows[2]).toEqual([
      ['Failed', String(watch.observed)],
      ['Expected', fixed(watch.expected, 3)],
      ['Ratio', fixed(watch.ratio, 1)],
      ['95 % interval', range(fixed(watch.lower, 1), fixed(watch.upper, 1))]
    ])
    expect(watch).toMatchObject({ isFlagged: true, laterFailures: 0 })
    expect(prose).toEqual(['1972', '1978', '1936'])
  })

  it('and no section besides these', () => {
    expect([...seen].sort()).toEqual([...sections.keys()].sort())
  })
})
