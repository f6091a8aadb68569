import { describe, expect, it } from 'vitest'
import type { Run, Step } from './chart-geometry'
import { bandPaths, boxPath, knownPath, openBoxes, slantPath } from './curve-paths'

const step = (time: number, survival: number, more: Partial<Step> = {}): Step => ({
  time,
  survival,
  lower: null,
  upper: null,
  ...more
})
const places = { x: (t: number) => t, y: (s: number) => 100 - s * 100 }
const run = (...steps: Step[]): Run => ({ weight: 'full', steps })

describe('where S is not determined', () => {
  const turnbull = run(step(0, 1), step(30, 0.8, { from: 10 }), step(60, 0.5, { from: 30 }), step(90, 0.5))
  it('the line is left out, and a box stands from the level before to the level after', () => {
    expect(knownPath(turnbull, places)).toBe('M0 0H10V0M30 20H30V20M60 50H90V50')
    expect(boxPath(openBoxes(turnbull, places))).toBe('M10 0H30V20H10ZM30 20H60V50H30Z')
    expect(slantPath(openBoxes(turnbull, places))).toBe('M10 0L30 20M30 20L60 50')
  })
  it('narrower than can be seen, it is a step', () => {
    const narrow = run(step(0, 1), step(11, 0.8, { from: 10 }), step(40, 0.8))
    expect(openBoxes(narrow, places)).toEqual([])
    expect(knownPath(narrow, places)).toBe('M0 0H11V20H40V20')
  })
  it('the band is drawn where S is known, as a whisker where that is one day', () => {
    const limited = run(
      step(0, 1),
      step(30, 0.8, { from: 10, lower: 0.7, upper: 0.9 }),
      step(60, 0.5, { from: 30, lower: 0.4, upper: 0.6 }),
      step(90, 0.5, { lower: 0.4, upper: 0.6 })
    )
    const { area, edges } = bandPaths(limited, places)
    expect(area).toBe('M60 40H90V40V60H60Z')
    expect(edges).toContain('M30 10V30')
  })
})

it('a fall that stands for several is drawn at the first of them', () => {
  expect(knownPath(run(step(0, 1), step(10, 0.9), step(18, 0.6, { since: 10 }), step(30, 0.6)), places)).toBe(
    'M0 0H10V10H10V40H30V40'
  )
})

it('the limits after the last point are not drawn', () => {
  const km = run(step(0, 1), step(10, 0.9, { lower: 0.8, upper: 1 }), step(20, 0.5, { lower: 0.4, upper: 0.6 }))
  expect(bandPaths(km, places).area).toBe('M10 0H20V0V20H10Z')
})
