import { describe, expect, it } from 'vitest'
import type { BundleLayer } from './bundle-check.types'
import { inStackOrder } from './layer-order'

const layer = (
  file: string,
  fn: BundleLayer['function'],
  side: BundleLayer['side'] = null,
  index: number | null = null
): BundleLayer => ({
  file,
  function: fn,
  side,
  index,
  evidence: 'name'
})

describe('inStackOrder', () => {
  it('puts copper first from the top down, then the other layers by side, then papers by name', () => {
    const wanted = [
      layer('f', 'copper', 'top', 1),
      layer('i1', 'copper', 'inner', 2),
      layer('i2', 'copper', 'inner', 3),
      layer('b', 'copper', 'bottom', 4),
      layer('x', 'copper', 'inner'),
      layer('fm', 'soldermask', 'top'),
      layer('bm', 'soldermask', 'bottom'),
      layer('e', 'outline'),
      layer('p', 'drill-plated'),
      layer('bom', 'bom'),
      layer('a.txt', 'document'),
      layer('b.txt', 'document')
    ]
    expect(inStackOrder([...wanted].reverse()).map((l) => l.file)).toEqual(wanted.map((l) => l.file))
  })
})
