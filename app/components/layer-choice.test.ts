import { describe, expect, it } from 'vitest'
import { askFor, choiceInWords, layerName, readChoice, type ViewerLayer } from './layer-choice'

const layer = (file: string | null, fn: string, side: ViewerLayer['side'], index: number | null = null): ViewerLayer => ({
  file,
  src: '/x.svg',
  function: fn,
  side,
  index
})
const layers = [
  layer('gerber/F_Cu.gbr', 'copper', 'top', 1),
  layer('gerber/B_Cu.gbr', 'copper', 'bottom', 2),
  layer('gerber/F_Mask.gbr', 'soldermask', 'top'),
  layer(null, 'drill', null)
]
const both = { top: '/top.svg', bottom: '/bottom.svg' }
const read = (query: string, pictures: Parameters<typeof readChoice>[2] = both) =>
  readChoice(new URLSearchParams(query), layers, pictures)

describe('the address of a view', () => {
  it.each([
    ['', { from: 'top', layers: [] }],
    ['view=bottom', { from: 'bottom', layers: [] }],
    ['view=bottom&layer=4&layer=1&layer=4', { from: 'bottom', layers: [0, 3] }],
    ['view=2', { from: 'top', layers: [1] }],
    ['view=B_Cu.gbr', { from: 'top', layers: [1] }],
    ['view=gerber/F_Mask.gbr', { from: 'top', layers: [2] }],
    ['view=sideways&layer=0&layer=5&layer=-1&layer=x&layer=1e3', { from: 'top', layers: [] }]
  ])('reads %s', (query, choice) => expect(read(query)).toEqual(choice))

  it('shows what could be drawn where a side could not', () => {
    expect(read('', { top: null, bottom: null })).toEqual({ from: 'top', layers: [0] })
    expect(read('', { top: null, bottom: '/b.svg' })).toEqual({ from: 'bottom', layers: [] })
    expect(readChoice(new URLSearchParams(), [], { top: null, bottom: null })).toEqual({ from: 'top', layers: [] })
  })

  it('is written as it is read', () => {
    const choice = { from: 'bottom', layers: [1, 3] } as const
    expect(askFor({ ...choice, layers: [1, 3] })).toBe('view=bottom&layer=2&layer=4')
    expect(read(askFor({ ...choice, layers: [1, 3] }))).toEqual(choice)
  })
})

describe('words', () => {
  it('names layers by number, function and side', () =>
    expect(layers.map(layerName)).toEqual(['L1 copper, top', 'L2 copper, bottom', 'soldermask, top', 'all holes']))

  it('says from where layers are seen', () => {
    expect(choiceInWords({ from: 'top', layers: [] }, layers)).toBe('Top side')
    expect(choiceInWords({ from: 'bottom', layers: [1, 3] }, layers)).toBe(
      'L2 copper bottom and all holes, seen from below, left and right changed over'
    )
  })
})
