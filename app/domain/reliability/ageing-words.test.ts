import { describe, expect, it } from 'vitest'
import { ageingPattern, ageingSentence, limitText } from './ageing-words'
import type { ShapeFigures } from './figures.types'

const limits = { estimate: 900, lower: 500, upper: 2000 }
const shape = (estimate: number, lower: number, upper: number): ShapeFigures => ({
  estimate,
  lower,
  upper,
  standardError: 0.1,
  scaleStandardError: 300,
  logLikelihood: -150,
  scale: 1000,
  scaleLower: 600,
  scaleUpper: 2200,
  failures: 20,
  b10: limits,
  median: limits
})

describe('ageingSentence', () => {
  it('names a pattern only when the interval excludes 1', () => {
    expect(ageingSentence(shape(0.62, 0.481, 0.801))).toBe(
      'Of units that outlasted the day of fitting, failures grow rarer with age: early failures (the shape of a Weibull curve is 0.62, 95\u00a0% interval 0.48 to 0.81).'
    )
    expect(ageingSentence(shape(1.9, 1.3, 2.7))).toContain('more frequent with age: wear-out')
    for (const held of [shape(0.9, 0.7, 1.1), shape(0.8, 0.6, 1), shape(1.4, 1, 1.9)]) {
      expect(ageingSentence(held)).toContain('cannot be told')
      expect(ageingSentence(held)).not.toMatch(/early failures|wear-out/)
    }
    expect(ageingSentence(null)).toContain('too few have failed')
    expect(ageingPattern(null)).toBeNull()
  })
  it('says nothing of fewer than five failures, however far the interval lies from 1', () => {
    const few = { ...shape(5.36, 1.96, 14.6), failures: 4 }
    expect(ageingPattern(few)).toBeNull()
    expect(ageingSentence(few)).toContain('too few have failed after the day of fitting')
    expect(ageingPattern({ ...few, failures: 5 })).toBe('wear-out')
  })
})

it('rounds a limit outwards, but never onto 1', () => {
  expect(limitText(0.7042, 'down')).toBe('0.70')
  expect(limitText(0.7042, 'up')).toBe('0.71')
  expect(limitText(0.9985, 'up')).toBe('0.999')
  expect(limitText(1.0004, 'down')).toBe('1.0004')
  expect(limitText(1.000001, 'down')).toBe('just over 1')
  expect(limitText(1, 'up')).toBe('1.00')
})
