import { describe, expect, it } from 'vitest'
import { unknownFacts, type BundlePart, type BundleRecord, type LayerFingerprint } from '~/domain/bundle/bundle-check.types'
import type { Placed } from '~/domain/bundle/read-placement'
import { turnBetween } from './compare-placements'
import { isUnchanged, whatChanged } from './what-changed'
import type { ReleaseSide } from './what-changed.types'

const reading = {
  kind: null,
  value: null,
  tolerance: null,
  voltage: null,
  dielectric: null,
  size: null,
  esr: null,
  power: null,
  current: null,
  isNotFitted: false,
  unread: null
}
const part = (designators: string, value: string, more: Partial<BundlePart> = {}): BundlePart => ({
  designators: designators.split(' '),
  quantity: null,
  value,
  footprint: 'C_0603',
  description: '',
  isFitted: true,
  reading,
  ...more
})
const at = (designator: string, x: number, y: number, rotation: number | null = 0, side: 'top' | 'bottom' = 'top'): Placed => ({
  designator,
  x,
  y,
  rotation,
  side
})
const print = (fn: LayerFingerprint['function'], side: LayerFingerprint['side'], index: number | null, text: string) => ({
  function: fn,
  side,
  index,
  file: `${fn}-${side}-${index}.gbr`,
  fingerprint: text
})
const outline = { minX: 0, minY: 0, maxX: 38, maxY: 14 }
const record: BundleRecord = {
  outline,
  fingerprints: [
    print('copper', 'top', 1, 'a'),
    print('copper', 'bottom', 2, 'b'),
    print('outline', null, null, 'o'),
    print('drill', null, null, 'd')
  ],
  parts: [part('C1 C2', '10uF'), part('C3', '100nF'), part('R1', '10k', { footprint: 'R_0603' })],
  placements: [at('C1', 1, 2, 90), at('C2', 3, 2, 90), at('C3', 5, 2, 90), at('R1', 7, 2)]
}
const declared = { layers: 2, thicknessMm: 0.8, copperUm: 35, finish: 'ENIG', mask: null, legend: null, stencil: 'top' }
const facts = {
  ...unknownFacts(),
  width: 38,
  height: 14,
  copperLayers: 2,
  minTrack: 0.2,
  minHole: 0.3,
  holes: { plated: 40, nonPlated: 2, unknown: 0 },
  slots: 0
}
const side = (more: Partial<ReleaseSide> = {}): ReleaseSide => ({
  version: '1.0.0',
  boardRevision: 'A',
  record,
  facts,
  layers: [
    { function: 'copper', side: 'top', index: 1 },
    { function: 'copper', side: 'bottom', index: 2 },
    { function: 'soldermask', side: 'top', index: null },
    { function: 'drill-plated', side: null, index: null }
  ],
  declared,
  ...more
})
const after = (change: Partial<BundleRecord>, more: Partial<ReleaseSide> = {}) =>
  whatChanged(side(), side({ version: '1.1.0', record: { ...record, ...change }, ...more }))

describe('whatChanged', () => {
  it('says nothing of two that are alike', () => {
    const same = after({})
    expect(isUnchanged(same)).toBe(true)
    expect(same.notCompared).toEqual([])
    expect([same.since, same.version]).toEqual(['1.0.0', '1.1.0'])
  })

  it('tells parts added, removed and altered, those alike in one group', () => {
    const c = after({
      parts: [part('C1 C2', '10uF', { footprint: 'C_0805' }), part('R1', '12k', { footprint: 'R_0603' }), part('C10 C9', '1uF')],
      placements: [...record.placements.filter((p) => p.designator !== 'C3'), at('C9', 9, 9), at('C10', 11, 9)]
    })
    const words = { footprint: 'C_0603', description: '', isFitted: true }
    expect(c.added).toEqual([{ designators: ['C9', 'C10'], value: '1uF', ...words }])
    expect(c.removed).toEqual([{ designators: ['C3'], value: '100nF', ...words }])
    expect(c.altered).toEqual([
      { designators: ['C1', 'C2'], changes: [{ name: 'footprint', before: 'C_0603', after: 'C_0805' }] },
      { designators: ['R1'], changes: [{ name: 'value', before: '10k', after: '12k' }] }
    ])
    expect(c.moved).toEqual([])
    expect(c.marks.map(({ designator, kind }) => `${kind} ${designator}`)).toEqual(['added C9', 'added C10', 'removed C3'])
  })

  it('does not take another way of writing for another part', () => {
    const lines = [part('c2', ' 10uF '), part('C1', '10uF'), part('C3', '100nF'), part('R1', '10k', { footprint: 'R_0603' })]
    expect(isUnchanged(after({ parts: lines }))).toBe(true)
    // micro sign and small mu, ohm sign and capital omega
    const written = (micro: string, ohm: string) => ({
      ...record,
      parts: [part('C1', `4.7 ${micro}F`), part('R1', `10 k${ohm}`)]
    })
    const c = whatChanged(side({ record: written('\u00b5', '\u2126') }), side({ record: written('\u03bc', '\u03a9') }))
    expect(isUnchanged(c)).toBe(true)
  })

  it('says once that a part is fitted and so placed, and says it where only the placement file differs', () => {
    const without = record.placements.filter((p) => p.designator !== 'C3')
    const parts = record.parts.map((p) => (p.value === '100nF' ? { ...p, isFitted: false } : p))
    expect(after({ parts, placements: without }).altered).toEqual([
      { designators: ['C3'], changes: [{ name: 'fitted', before: 'yes', after: 'no' }] }
    ])
    expect(after({ placements: without }).altered).toEqual([
      { designators: ['C3'], changes: [{ name: 'placed', before: 'yes', after: 'no' }] }
    ])
  })

  it('tells moved parts by distance, turn and side, and leaves out what is rounding', () => {
    const c = after({
      placements: [at('C1', 1.009, 2, 90.04), at('C2', 3.3, 1.6, 90), at('C3', 5, 2, 360), at('R1', 7, 2, 180, 'bottom')]
    })
    expect(c.moved).toEqual([
      { designators: ['C2'], dx: 0.3, dy: -0.4, distance: 0.5, turn: 0, toSide: null },
      { designators: ['C3'], dx: 0, dy: 0, distance: 0, turn: -90, toSide: null },
      { designators: ['R1'], dx: 0, dy: 0, distance: 0, turn: null, toSide: 'bottom' }
    ])
    expect(c.marks[0]).toEqual({
      designator: 'C2',
      kind: 'moved',
      from: { x: 3, y: 2, side: 'top' },
      to: { x: 3.3, y: 1.6, side: 'top' }
    })
    const fewer = record.placements.map((p, i) => ({ ...p, x: p.x + (i === 0 ? 0.01 : 0) }))
    expect(after({ placements: fewer }).moved.map((m) => m.distance)).toEqual([0.01])
  })

  it.each([
    [0, 360, 0],
    [-90, 270, 0],
    [359.98, 0.01, 0],
    [0, 0.05, 0.05],
    [350, 10, 20],
    [10, 350, -20],
    [0, 180, 180],
    [0, -180, 180],
    [45, 405.5, 0.5]
  ])('turns from %d to %d by %d', (before, to, turn) => expect(turnBetween(before, to)).toBe(turn))

  it('counts places from the corner of the outline', () => {
    const moved = {
      outline: { minX: 100, minY: -50, maxX: 138, maxY: -36 },
      placements: record.placements.map((p) => ({ ...p, x: p.x + 100, y: p.y - 50 }))
    }
    expect(isUnchanged(after(moved))).toBe(true)
  })

  it('says once that all parts lie elsewhere, and then which moved besides', () => {
    const placements = record.placements.map((p) => ({ ...p, x: p.x + 2, y: p.y + (p.designator === 'C3' ? 1 : 0) }))
    const c = after({ placements })
    expect(c.shift).toEqual({ dx: 2, dy: 0, parts: 3, of: 4 })
    expect(c.moved).toEqual([{ designators: ['C3'], dx: 0, dy: 1, distance: 1, turn: 0, toSide: null }])
    expect(c.marks[0]!.from).toEqual({ x: 7, y: 2, side: 'top' })
    // half of the parts are parts that moved
    const half = record.placements.map((p, i) => ({ ...p, x: p.x + (i < 2 ? 2 : 0) }))
    expect(after({ placements: half }).shift).toBeNull()
  })

  it('tells layers by their geometry, outer copper by its side', () => {
    const fingerprints = [
      print('copper', 'top', 1, 'a'),
      print('copper', 'inner', 2, 'x'),
      print('copper', 'inner', 3, 'y'),
      print('copper', 'bottom', 4, 'other'),
      print('outline', null, null, 'o'),
      print('drill', null, null, 'e')
    ]
    const more = { ...facts, copperLayers: 4, minTrack: 0.15, holes: { plated: 77, nonPlated: 2, unknown: 0 } }
    const c = after({ fingerprints }, { facts: more, boardRevision: 'B' })
    expect(c.layers.map(({ change, layer }) => `${change} ${layer.side} ${layer.index}`)).toEqual([
      'added inner 2',
      'added inner 3',
      'changed bottom 4'
    ])
    expect(c.drill).toEqual({
      before: { plated: 40, nonPlated: 2, unknown: 0, slots: 0 },
      after: { plated: 77, nonPlated: 2, unknown: 0, slots: 0 }
    })
    expect(c.outline).toBeNull()
    expect(c.revision).toEqual({ name: 'boardRevision', before: 'A', after: 'B' })
    expect(c.facts).toEqual([
      { name: 'copperLayers', before: 2, after: 4 },
      { name: 'minTrack', before: 0.2, after: 0.15 }
    ])
  })

  it('tells an outline of another size from one of another shape', () => {
    expect(after({}, { facts: { ...facts, width: 40 } }).outline).toEqual({
      before: { width: 38, height: 14 },
      after: { width: 40, height: 14 },
      isSameSize: false
    })
    const fingerprints = record.fingerprints.map((p) => (p.function === 'outline' ? { ...p, fingerprint: 'q' } : p))
    expect(after({ fingerprints }).outline?.isSameSize).toBe(true)
    expect(after({}, { facts: { ...facts, width: 38.009 } }).outline).toBeNull()
  })

  it('tells masks, pastes and legends that came or went', () => {
    const layers = [
      ...side().layers.filter((l) => l.function !== 'soldermask'),
      { function: 'paste' as const, side: 'bottom' as const, index: null }
    ]
    expect(after({}, { layers }).layers).toEqual([
      { change: 'removed', layer: { function: 'soldermask', side: 'top', index: null } },
      { change: 'added', layer: { function: 'paste', side: 'bottom', index: null } }
    ])
  })

  it('tells declared details that differ', () =>
    expect(after({}, { declared: { ...declared, thicknessMm: 1.6, finish: null, mask: 'green' } }).declared).toEqual([
      { name: 'thicknessMm', before: 0.8, after: 1.6 },
      { name: 'finish', before: 'ENIG', after: null },
      { name: 'mask', before: null, after: 'green' }
    ]))

  it('claims nothing of what it cannot compare', () => {
    const without = whatChanged(side({ record: null }), side({ version: '1.1.0' }))
    expect(without.notCompared).toEqual([{ what: 'record', missingIn: 'before' }])
    expect([without.added, without.layers, without.moved]).toEqual([[], [], []])
    expect(after({ parts: [], placements: [] }).notCompared).toEqual([
      { what: 'parts', missingIn: 'after' },
      { what: 'placements', missingIn: 'after' }
    ])
    expect(after({ parts: [], placements: [] }).removed).toEqual([])
    // the file is there, its drawing could not be read
    const fingerprints = record.fingerprints.filter((p) => p.function !== 'drill')
    const c = after({ fingerprints })
    expect([c.drill, c.notCompared]).toEqual([
      null,
      [{ what: 'layer', missingIn: 'after', layer: { function: 'drill', side: null, index: null } }]
    ])
  })

  it('still tells parts by the placement file where a release has no bill of materials', () => {
    const c = after({ parts: [], placements: [...record.placements, at('C9', 9, 9)] })
    expect(c.added.map((g) => g.designators)).toEqual([['C9']])
    expect(c.altered).toEqual([])
  })
})
