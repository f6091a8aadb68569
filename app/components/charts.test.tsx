import { renderToStaticMarkup as render } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import type { SurvivalPoint } from './chart-geometry'
import { DifferenceCell, differenceReach, differenceText } from './difference-bar'
import { IncidenceChart, drawnCauses } from './incidence-chart'
import { IntervalBar, IntervalCell } from './interval-bar'
import { readingText } from './chart-reading'
import { percentText } from './percent-text'
import { RangeFigure } from './range-bar'
import { RatioCell, ratioText } from './ratio-bar'
import { SmallCurve } from './small-curve'
import { SurvivalChart, drawnSeries } from './survival-chart'
import { SurvivalStrips } from './survival-strips'

const curve = (n: number, falls: number, lastDay = 800): SurvivalPoint[] =>
  Array.from({ length: n }, (_, i) => ({
    time: Math.round(((i + 1) / n) * lastDay),
    survival: 1 - (Math.min(i + 1, falls) / n) * 0.5,
    lower: 0.6,
    upper: 0.99,
    atRisk: n - i,
    censored: i >= falls ? 1 : 0
  }))
const chart = (series: { name: string; points: SurvivalPoint[]; marked: boolean }[]) =>
  render(<SurvivalChart series={series} unit="month" asOf="2026-12-01" />)
const count = (html: string, part: string) => html.split(part).length - 1

describe('percentText', () => {
  it.each([
    [1, 0.592, '≥ 59'],
    [1, null, 'none failed'],
    [0.9999, 0.9, 'over 99'],
    [0.994, 0.9, '99'],
    [0.928, 0.88, '93'],
    [0.001, 0, 'under 1'],
    [0, null, '0']
  ])('%d with lower %s reads %s', (share, lower, text) => expect(percentText(share, lower)).toBe(text))
  it('never says 100', () => {
    for (let n = 0; n <= 10_000; n++) expect(percentText(n / 10_000, 0.9)).not.toBe('100')
  })
  it('gives no figure where fewer than five are followed', () => {
    expect(readingText(curve(8, 1), 700, '1 year')).toBe('too few at 1 year')
    // the bound of the 22 followed on the day, from that of the 23 at the row before: 0.6^(23/22) = 0.586
    expect(readingText(curve(40, 0), 365, '1 year')).toBe('≥ 58 % at 1 year')
  })
})

describe('SurvivalChart', () => {
  const many = ['TM-1', 'TM-2', 'TM-3', 'TM-4', 'TM-5', 'TM-6'].map((name) => ({
    name,
    points: curve(40, 5),
    marked: name === 'TM-3'
  }))
  it('is drawn twice, each with a description that names the marked one and the day', () => {
    const html = chart(many)
    expect(count(html, 'role="img"')).toBe(2)
    expect(html).toMatch(
      /aria-label="Share still working by months after fitting, as of 2026-12-01: TM-3 \(marked\) \d+ % at 1 year/
    )
  })
  it('gives band and ticks to the marked one alone, and draws at most three beside it', () => {
    const html = chart(many)
    expect(count(html, 'data-part="band"')).toBe(2)
    expect(count(html, 'data-part="ticks"')).toBe(2)
    expect(count(html, 'data-curve="other"')).toBe(6)
    expect(drawnSeries(many).map((s) => s.name)).toEqual(['TM-1', 'TM-2', 'TM-4', 'TM-3'])
  })
  it('tells curves by dash before hue', () => {
    const dashes = drawnSeries(many).map((s) => s.ink.dash)
    expect(new Set(dashes).size).toBe(4)
  })
  it('is faint under ten at risk and gone under five', () => {
    const html = chart([{ name: 'TM-6', points: curve(12, 2), marked: true }])
    expect(count(html, 'data-part="full"')).toBe(2)
    expect(count(html, 'data-part="faint"')).toBe(2)
    const few = chart([{ name: 'TM-6', points: curve(7, 2), marked: true }])
    expect([count(few, 'data-part="full"'), count(few, 'data-part="faint"'), count(few, 'data-part="band"')]).toEqual([0, 2, 0])
    const none = chart([{ name: 'TM-6', points: curve(4, 1), marked: true }])
    expect(none).not.toContain('data-part="full"')
    expect(none).not.toContain('data-part="faint"')
    expect(none).toContain('too few at 1 year')
  })
  it('keeps long names whole: they end inside the drawing', () => {
    const named = ['0.9.0-beta.2', '1.1.0'].map((name) => ({ name, points: curve(40, 5), marked: name !== '1.1.0' }))
    const html = chart(named)
    for (const [width, svg] of html
      .split('<svg ')
      .slice(1)
      .map((svg): [number, string] => [svg.startsWith('viewBox="0 0 328') ? 328 : 804, svg])) {
      const at = Number(/<text x="([\d.]+)"[^>]*t-mark[^>]*>0\.9\.0-beta\.2</.exec(svg)![1])
      // 17 px bold is about 8.5 px a character (measured in Chromium with Source Sans 3)
      expect(at + 12 * 8.5).toBeLessThanOrEqual(width)
    }
  })
  it('stands without any data', () => expect(chart([])).toContain('role="img"'))
  it('has no style attribute, no script, no number that is none', () => {
    for (const html of [chart(many), chart([])]) expect(html).not.toMatch(/ style=|<script|NaN|Infinity/)
  })
  it('marks a cut axis, and leaves a whole one alone', () => {
    const stroke = 'l12 -5M'
    expect(chart(many)).toContain(stroke)
    expect(
      chart([{ name: 'A', points: curve(40, 40).map((p) => ({ ...p, survival: p.survival * 0.3 })), marked: true }])
    ).not.toContain(stroke)
  })
})

describe('reading a chart', () => {
  const named = ['TM-1', 'TM-3'].map((name) => ({ name, points: curve(40, 5), marked: name === 'TM-3' }))
  it('stands there at one year before anybody points, and needs no script', () => {
    const html = chart(named)
    expect(html).toContain('Still working on day 365 (1 year), 95\u00a0% interval:')
    expect(html).toMatch(/TM-3 <\/span><span>94 % <\/span><span>60 to 99 <\/span><span class="r">22 followed/)
    // the cursor is offered once scripts have taken over; the place for what it says is there
    expect(html).not.toContain('role="slider"')
    expect(html).toContain('aria-live="polite"')
  })
  it('is described at length: ends, limits, what is not drawn and why', () => {
    const html = chart([...named, { name: 'TM-6', points: curve(4, 1), marked: false }])
    expect(html).toMatch(/TM-3, marked, goes to day 720 .* and ends at 94 % \(95\u00a0% interval 60 to 99\)\./)
    expect(html).toContain('TM-1 goes to day 720 (1 year and 355 days) and ends at 94 %.')
    expect(html).toContain('Not drawn: TM-6, of which never 5 units were followed at once.')
    expect(html).toContain('Only the marked line carries its 95\u00a0% limits.')
    const [, id] = /aria-describedby="([^"]+)"/.exec(html)!
    expect(html).toContain(`id="${id}"`)
  })
  it('keeps inks with their lines when another is pointed at', () => {
    const inks = (pointed: string | null) =>
      Object.fromEntries(drawnSeries(named, pointed).map((s) => [s.name, [s.ink.dash, s.isMarked]]))
    expect(inks(null)).toEqual({ 'TM-3': [undefined, true], 'TM-1': ['9 4', false] })
    expect(inks('TM-1')).toEqual({ 'TM-3': [undefined, false], 'TM-1': ['9 4', true] })
    expect(drawnSeries(named, 'TM-1').at(-1)!.name).toBe('TM-1')
  })
})

describe('where a curve is not determined', () => {
  const open = (name: string, marked: boolean) => ({
    name,
    marked,
    points: curve(40, 5).map((p, i) => (i === 3 ? { ...p, from: p.time - 18 } : p))
  })
  it('a hatched box stands in the marked one, a thin slant in the others', () => {
    const html = chart([open('TM-3', true), open('TM-1', false)])
    expect(count(html, '<pattern ')).toBe(2)
    expect(count(html, 'data-part="open"')).toBe(4)
    expect(html).toMatch(/fill="url\(#[^"]+\)"/)
  })
  it('the description says so', () =>
    expect(chart([open('TM-3', true)])).toContain(
      'the share is not determined: TM-3 in one stretch, from day 62 (about 2 months) to day 80 (about 3 months).'
    ))
})

describe('IncidenceChart', () => {
  const cause = (name: string, share: number, atRisk = 40) => ({
    name,
    points: [
      { time: 100, estimate: share / 2, lower: share / 4, upper: share, atRisk },
      { time: 400, estimate: share, lower: share / 2, upper: share * 2, atRisk }
    ]
  })
  const six = ['Board', 'Fitting', 'Other fault', 'Wrong diagnosis', 'Accident', 'Not known'].map((name, i) =>
    cause(name, 0.2 - i / 50)
  )
  const html = render(<IncidenceChart unit="year" causes={[...six, cause('A seventh', 0.01)]} />)
  it('draws six, told apart by dash and name, the first with its band', () => {
    expect(new Set(drawnCauses(six).map((one) => one.ink.dash)).size).toBe(6)
    expect(count(html, 'data-curve=')).toBe(12)
    expect(count(html, 'data-part="band"')).toBe(2)
    for (const { name } of six) expect(html).toContain(`>${name} <`)
    expect(html).not.toContain('A seventh')
  })
  it('keeps long names whole: they end inside the drawing', () => {
    for (const svg of html.split('<svg ').slice(1)) {
      const width = Number(/^viewBox="0 0 (\d+)/.exec(svg)![1])
      const at = Number(/<text x="([\d.]+)"[^>]*>(?:<tspan>)?Wrong diagnosis/.exec(svg)![1])
      // 14 px semi-bold is about 7.6 px a character (measured in Chromium with Source Sans 3)
      expect(at + (width === 328 ? 15 : 22) * 7.6).toBeLessThanOrEqual(width)
    }
  })
  it('says the shares after a year with their intervals', () =>
    expect(html).toMatch(/Board <\/span><span>10\.0 % <\/span><span>5\.0 to 20\.0 <\/span><span class="r">40 followed/))
  it('says how many are followed only where the rows of all causes agree on it', () => {
    const two = [cause('Board', 0.2), cause('Fitting', 0.1, 30)]
    expect(render(<IncidenceChart unit="year" causes={two} />)).not.toContain('followed<')
  })
  it('is faint under ten at risk and gone under five', () => {
    expect(count(render(<IncidenceChart unit="year" causes={[cause('Board', 0.1, 7)]} />), 'data-part="faint"')).toBe(2)
    const few = render(<IncidenceChart unit="year" causes={[cause('Board', 0.1, 4)]} />)
    expect(few).not.toContain('data-part=')
    expect(few).toContain('Board too few to draw')
    expect(few).not.toMatch(/NaN|Infinity/)
  })
})

describe('bars', () => {
  it('a difference says its direction and interval, rounded away from the claim', () => {
    expect(differenceText({ estimate: 12.4, lower: -3.2, upper: 27.9 })).toBe('12 days more (−4 to 28)')
    expect(differenceText({ estimate: -1.2, lower: -3, upper: 0.4 })).toBe('1 day less (−3 to 1)')
    expect(differenceText({ estimate: 0.2, lower: -3, upper: 4 })).toBe('less than one day (−3 to 4)')
  })
  it('a difference stands on one scale around 0, with an arrowhead where its interval leaves it', () => {
    expect(differenceReach([{ estimate: 12, lower: -3, upper: 27 }, { estimate: -1, lower: -4, upper: 3 }])).toBe(50) // prettier-ignore
    expect(differenceReach([])).toBe(1)
    const html = render(<DifferenceCell estimate={12} lower={-3} upper={120} reach={50} />)
    expect(html).toContain('M85 0V22')
    expect(html).toContain('M159 5L166 10l-7 5')
  })
  it('a flagged ratio is told by a word and a shape', () => {
    const flagged = render(<RatioCell ratio={2.4} lower={1.04} upper={4.61} isFlagged />)
    expect(flagged).toContain('2.4 times (1.04 to 4.7)')
    expect(flagged).toContain('more than chance')
    expect(flagged).not.toContain('<circle')
    const usual = render(<RatioCell ratio={0.8} lower={0.3} upper={1.7} isFlagged={false} />)
    expect(usual).not.toContain('more than chance')
    expect(usual).toContain('<circle')
    expect(ratioText({ ratio: 0, lower: 0, upper: 3.1 })).toBe('0.0 times (0.00 to 3.1)')
    // nothing observed: no point on a logarithmic line
    expect(render(<RatioCell ratio={0} lower={0} upper={3.1} isFlagged={false} />)).not.toMatch(/<circle|NaN|Infinity/)
  })
  it('a small curve is silent, has its tick at one year, and is gone under five', () => {
    const small = render(<SmallCurve points={curve(40, 5)} lastDay={800} floor={50} />)
    expect(small).toContain('aria-hidden="true"')
    expect(count(small, 'data-part="band"')).toBe(1)
    expect(small).toContain('M54.5 30v5')
    expect(render(<SmallCurve points={curve(4, 1)} lastDay={800} floor={50} />)).not.toContain('data-part="f')
  })
})

describe('SurvivalStrips', () => {
  it('says which strip is too small for a band, and shows none', () => {
    const strips = [{ name: 'TM-6', points: curve(7, 1), counts: '7 fitted, 1 failed' }]
    const html = render(<SurvivalStrips strips={strips} unit="year" />)
    expect(html).toContain('aria-label="TM-6: too few for a band, ')
    expect(html).not.toContain('data-part="band"')
    expect(html).not.toMatch(/ style=|NaN/)
  })
})

describe('IntervalBar', () => {
  it('has a point only where something failed', () => {
    expect(render(<IntervalBar estimate={0.93} lower={0.88} upper={0.96} />)).toContain('<circle')
    expect(render(<IntervalBar estimate={1} lower={0.59} upper={1} />)).not.toContain('<circle')
  })
  it('runs to the edge without failures and says the bound, never 100', () => {
    const html = render(<IntervalCell estimate={1} lower={0.59} upper={1} />)
    expect(html).toContain('≥ 59')
    expect(html).toContain('H166')
    expect(html).not.toContain('>100<')
  })
  it('says the interval in the same breath', () =>
    expect(render(<IntervalCell estimate={0.93} lower={0.884} upper={0.957} />)).toContain('95 % interval 88 to 96'))
  it('has an arrowhead where the interval leaves the scale', () =>
    expect(render(<IntervalBar estimate={0.71} lower={0.4} upper={0.9} />)).toContain('L4 10l7 5'))
})

it('RangeFigure and IncidenceChart say their figures in words', () => {
  expect(render(<RangeFigure worst={0.78} reported={0.919} best={0.922} />)).toContain(
    'Worst case 78.0, as reported 91.9, best case 92.2 percent'
  )
  expect(render(<RangeFigure worst={0.78} reported={1} best={1} />)).not.toContain('100.0')
  const html = render(<IncidenceChart unit="year" causes={[{ name: 'Fitting', points: [{ time: 400, estimate: 0.016 }] }]} />)
  expect(html).toContain('Share failed by cause: Fitting 1.6 percent')
  expect(html).not.toMatch(/ style=|NaN/)
})
