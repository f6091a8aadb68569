import { expect, test } from 'vitest'
import { spansOf } from './spans'

test('every kind of row as a span', () => {
  const spans = spansOf([
    { time: 5, event: 1 },
    { time: 7, event: 0, entry: 2, weight: 3 },
    { lower: 1, upper: 4 },
    { lower: 6, upper: null },
    { time: 9, event: 'board' }
  ])
  expect([...spans.lower]).toEqual([5, 7, 1, 6, 9])
  expect([...spans.upper]).toEqual([5, Infinity, 4, Infinity, 9])
  expect([...spans.entry]).toEqual([0, 2, 0, 0, 0])
  expect([...spans.weight]).toEqual([1, 3, 1, 1, 1])
})

test('an interval that began before the entry begins at it', () => {
  expect(spansOf([{ entry: 3, lower: 1, upper: 6 }]).lower[0]).toBe(3)
})

test('ends that differ by rounding are one', () => {
  const spans = spansOf([
    { lower: 0.1, upper: 0.1 + 0.2 },
    { lower: 0.3, upper: 0.5 }
  ])
  expect(spans.upper[0]).toBe(spans.lower[1])
})
