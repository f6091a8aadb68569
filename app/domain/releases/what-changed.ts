import type { BundleFacts, BundleLayer } from '~/domain/bundle/bundle-check.types'
import { compareFingerprints, layerKey } from '~/domain/bundle/compare-fingerprints'
import { compareParts } from './compare-parts'
import type { Declared } from './declared-beside-measured'
import type {
  HoleCounts,
  LayerChange,
  LayerId,
  NotCompared,
  ReleaseSide,
  Size,
  ValueChange,
  WhatChanged
} from './what-changed.types'

/** Lengths of facts that differ by less are the same, in mm: a hundredth of what a board house can hold. */
const leastLength = 0.001
const leastSize = 0.01

const noParts = { added: [], removed: [], altered: [], moved: [], shift: null, marks: [], notCompared: [] }

/**
 * What differs between two releases of a board, as far as their bundles and declared details show it: parts, places, copper, outline, drilled
 * holes, layers that came or went, what was measured and what is declared. Where nothing was kept of a bundle, or a list or layer is
 * missing in one of them, that stands in `notCompared` instead of a difference. Lengths in mm.
 */
export function whatChanged(before: ReleaseSide, after: ReleaseSide): WhatChanged {
  const [earlier, later] = [before.record, after.record]
  const geometry = earlier && later ? geometryChanges(before, after) : { layers: [], notCompared: [] }
  const parts = earlier && later ? compareParts(earlier, later) : noParts
  const isOtherShape = geometry.layers.some(({ layer }) => layer.function === 'outline')
  const isOtherDrill = geometry.layers.some(({ layer }) => layer.function === 'drill')
  return {
    since: before.version,
    version: after.version,
    revision:
      before.boardRevision === after.boardRevision
        ? null
        : { name: 'boardRevision', before: before.boardRevision, after: after.boardRevision },
    outline: outlineChange(before.facts, after.facts, isOtherShape),
    layers: [
      ...geometry.layers.filter(({ layer }) => layer.function === 'copper').sort((a, b) => depth(a.layer) - depth(b.layer)),
      ...layersCameOrWent(before.layers, after.layers)
    ],
    drill: drillChange(before.facts, after.facts, isOtherDrill),
    facts: factChanges(before.facts, after.facts),
    declared: declaredChanges(before.declared, after.declared),
    ...parts,
    notCompared: [
      ...(earlier && later ? [] : [{ what: 'record' as const, missingIn: missingIn(earlier, later) }]),
      ...geometry.notCompared,
      ...parts.notCompared
    ]
  }
}

/** Whether nothing differs that could be compared. */
export const isUnchanged = (c: WhatChanged): boolean =>
  !c.revision &&
  !c.outline &&
  !c.drill &&
  !c.shift &&
  [c.layers, c.facts, c.declared, c.added, c.removed, c.altered, c.moved].every((list) => list.length === 0)

/** Copper from the top down. */
const depth = ({ side, index }: LayerId) => (side === 'top' ? 0 : side === 'bottom' ? Infinity : (index ?? 0) + 1)

const missingIn = (before: unknown, after: unknown): NotCompared['missingIn'] => (before ? 'after' : after ? 'before' : 'both')

const asPrinted = (layer: Pick<BundleLayer, 'function' | 'side' | 'index'>): LayerId | null => {
  const fn = layer.function.startsWith('drill') ? 'drill' : layer.function
  return fn === 'copper' || fn === 'outline' || fn === 'drill' ? { function: fn, side: layer.side, index: layer.index } : null
}

const keyOf = (layer: LayerId) => layerKey(layer as Parameters<typeof layerKey>[0])

/** Copper, outline and drilled holes. A layer that both have but only one could read is no difference: it was not compared. */
function geometryChanges(before: ReleaseSide, after: ReleaseSide): { layers: LayerChange[]; notCompared: NotCompared[] } {
  const has = (side: ReleaseSide, key: string) =>
    side.layers.some((layer) => {
      const its = asPrinted(layer)
      return its !== null && keyOf(its) === key
    })
  const layers: LayerChange[] = []
  const notCompared: NotCompared[] = []
  for (const { kind, layer } of compareFingerprints(before.record!.fingerprints, after.record!.fingerprints)) {
    const id: LayerId = { function: layer.function, side: layer.side, index: layer.index }
    const other = kind === 'added' ? before : kind === 'removed' ? after : null
    if (other && has(other, keyOf(id)))
      notCompared.push({ what: 'layer', missingIn: other === before ? 'before' : 'after', layer: id })
    else layers.push({ change: kind, layer: id })
  }
  return { layers, notCompared }
}

/** Mask, paste and legend by being there; nothing is kept of what they draw. */
function layersCameOrWent(before: ReleaseSide['layers'], after: ReleaseSide['layers']): LayerChange[] {
  if (before.length === 0 || after.length === 0) return []
  const changes: LayerChange[] = []
  for (const fn of ['soldermask', 'paste', 'legend'] as const)
    for (const side of ['top', 'bottom'] as const) {
      const has = (layers: ReleaseSide['layers']) => layers.some((layer) => layer.function === fn && layer.side === side)
      if (has(before) === has(after)) continue
      changes.push({ change: has(after) ? 'added' : 'removed', layer: { function: fn, side, index: null } })
    }
  return changes
}

const sizeOf = (facts: BundleFacts | null): Size | null =>
  facts && facts.width !== null && facts.height !== null ? { width: facts.width, height: facts.height } : null

function outlineChange(a: BundleFacts | null, b: BundleFacts | null, isOtherShape: boolean): WhatChanged['outline'] {
  const [before, after] = [sizeOf(a), sizeOf(b)]
  const isFar = (p: number, q: number) => Math.abs(p - q) >= leastSize - 1e-9
  const isOtherSize = before && after && (isFar(before.width, after.width) || isFar(before.height, after.height))
  return isOtherShape || isOtherSize ? { before, after, isSameSize: Boolean(before && after && !isOtherSize) } : null
}

const holesOf = (facts: BundleFacts | null): HoleCounts | null => facts && { ...facts.holes, slots: facts.slots }

function drillChange(a: BundleFacts | null, b: BundleFacts | null, isOtherDrill: boolean): WhatChanged['drill'] {
  const [before, after] = [holesOf(a), holesOf(b)]
  const total = (h: HoleCounts | null) =>
    h && [h.plated, h.nonPlated, h.unknown].some((n) => n !== null)
      ? (h.plated ?? 0) + (h.nonPlated ?? 0) + (h.unknown ?? 0)
      : null
  const isOtherCount = total(before) !== null && total(after) !== null && total(before) !== total(after)
  return isOtherDrill || isOtherCount ? { before, after } : null
}

function factChanges(a: BundleFacts | null, b: BundleFacts | null): WhatChanged['facts'] {
  if (!a || !b) return []
  const changes: WhatChanged['facts'] = []
  const isFar = (p: number, q: number) => Math.abs(p - q) >= leastLength - 1e-9
  const compare = (name: WhatChanged['facts'][number]['name']) => {
    const [before, after] = [a[name], b[name]]
    if (before !== null && after !== null && isFar(before, after)) changes.push({ name, before, after })
  }
  compare('copperLayers')
  // the smallest stroke stands in where the files do not say which lines are conductors
  if (a.minTrack === null && b.minTrack === null) compare('smallestStroke')
  else compare('minTrack')
  compare('minHole')
  return changes
}

const declaredNames = ['layers', 'thicknessMm', 'copperUm', 'finish', 'mask', 'legend', 'stencil'] as const

function declaredChanges(a: Declared, b: Declared): ValueChange<keyof Declared>[] {
  const plain = (value: number | string | null) => (typeof value === 'string' ? value.trim() || null : value)
  return declaredNames
    .map((name) => ({ name, before: plain(a[name]), after: plain(b[name]) }))
    .filter(({ before, after }) => before !== after)
}
