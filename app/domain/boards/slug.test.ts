import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { slugOf, slugProblem } from './slug'

describe('slugOf', () => {
  it.each([
    ['Buttress', 'buttress'],
    ['  Rail & Lamp, Mk. II ', 'rail-lamp-mk-ii'],
    ['Größe Ærø', 'grosse-r'],
    ['Äbc--déf', 'abc-def'],
    ['日本', ''],
    ['a'.repeat(39) + ' b', 'a'.repeat(39)]
  ])('makes %j into %j', (name, slug) => expect(slugOf(name)).toBe(slug))

  it('gives nothing that slugProblem refuses, other than too short or reserved', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 80 }), (name) => {
        const slug = slugOf(name)
        const problem = slug.length < 2 ? null : slugProblem(slug)
        expect(problem === null || problem.includes('is kept')).toBe(true)
      }),
      { seed: 3 }
    )
  })
})

describe('slugProblem', () => {
  it.each(['new', 'a', '-ab', 'ab-', 'a--b', 'Ab', 'a b', 'a/b', '../x', 'ä-b', 'a'.repeat(41)])('refuses %j', (slug) =>
    expect(slugProblem(slug)).not.toBeNull()
  )
  it.each(['buttress', 'b2', 'talvi-rail-2'])('takes %j', (slug) => expect(slugProblem(slug)).toBeNull())
})
