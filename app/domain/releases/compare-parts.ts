import type { BundlePart, BundleRecord } from '~/domain/bundle/bundle-check.types'
import type { Placed } from '~/domain/bundle/read-placement'
import { movesOf } from './compare-placements'
import type {
  AlteredGroup,
  NotCompared,
  PartField,
  PartMark,
  PartsGroup,
  PartWords,
  PlaceOnBoard,
  ValueChange,
  WhatChanged
} from './what-changed.types'

export type PartChanges = Pick<WhatChanged, 'added' | 'removed' | 'altered' | 'moved' | 'shift' | 'marks' | 'notCompared'>

const order = new Intl.Collator('en', { numeric: true }).compare

/** Texts are the same when they differ in blanks only, or in the way that a character is encoded (two signs for micro, two for ohm). */
const plain = (text: string) => text.normalize('NFKC').replace(/\s+/g, ' ').trim()

type Listed = { designator: string } & PartWords

/** By the designator in capitals; of a designator that is listed twice the first. */
function byDesignator(parts: readonly BundlePart[]): Map<string, Listed> {
  const map = new Map<string, Listed>()
  for (const { designators, value, footprint, description, isFitted } of parts)
    for (const designator of designators) {
      const key = designator.trim().toUpperCase()
      const words = { value: plain(value), footprint: plain(footprint), description: plain(description), isFitted }
      if (!map.has(key)) map.set(key, { designator: designator.trim(), ...words })
    }
  return map
}

/** As `byDesignator`, with places counted from the outline's lower left corner. */
function places({ placements, outline }: BundleRecord): Map<string, Placed> {
  const map = new Map<string, Placed>()
  for (const part of placements) {
    const key = part.designator.trim().toUpperCase()
    if (!map.has(key)) map.set(key, { ...part, x: part.x - (outline?.minX ?? 0), y: part.y - (outline?.minY ?? 0) })
  }
  return map
}

const missing = (what: 'parts' | 'placements', before: number, after: number): NotCompared[] =>
  before > 0 && after > 0 ? [] : [{ what, missingIn: before > 0 ? 'after' : after > 0 ? 'before' : 'both' }]

/**
 * How the parts of two bundles differ. A part is there when a list names it that both bundles have: the bill of materials, the placement file,
 * or either. Parts that differ alike stand in one group. Places are compared from the lower left corner of each outline, or as the files
 * count where one of them has no outline.
 */
export function compareParts(earlier: BundleRecord, later: BundleRecord): PartChanges {
  const hasOutlines = earlier.outline !== null && later.outline !== null
  const framed = (record: BundleRecord) => places(hasOutlines ? record : { ...record, outline: null })
  const [placedBefore, placedAfter] = [framed(earlier), framed(later)]
  const [before, after] = [byDesignator(earlier.parts), byDesignator(later.parts)]
  const notCompared = [
    ...missing('parts', before.size, after.size),
    ...missing('placements', placedBefore.size, placedAfter.size)
  ]
  const hasLists = before.size > 0 && after.size > 0
  const hasPlaces = placedBefore.size > 0 && placedAfter.size > 0

  const there = (listed: Map<string, Listed>, placed: Map<string, Placed>) =>
    new Set([...(hasLists ? listed.keys() : []), ...(hasPlaces ? placed.keys() : [])])
  const [was, is] = [there(before, placedBefore), there(after, placedAfter)]
  const only = (ones: Set<string>, others: Set<string>) => [...ones].filter((key) => !others.has(key)).sort(order)
  const [addedKeys, removedKeys] = [only(is, was), only(was, is)]
  const wordsOf = (key: string, listed: Map<string, Listed>, placed: Map<string, Placed>): Listed =>
    listed.get(key) ?? {
      designator: placed.get(key)!.designator.trim(),
      value: '',
      footprint: '',
      description: '',
      isFitted: true
    }

  const altered: { designator: string; changes: ValueChange<PartField>[] }[] = []
  for (const key of [...is].filter((k) => was.has(k)).sort(order)) {
    const changes: ValueChange<PartField>[] = []
    const [a, b] = [before.get(key), after.get(key)]
    if (hasLists && a && b) changes.push(...wordChanges(a, b))
    if (hasPlaces) {
      const [p, q] = [placedBefore.has(key), placedAfter.has(key)]
      // a part that is fitted from now on is placed from now on: that need not be said twice
      const isSaid = a && b && a.isFitted !== b.isFitted && b.isFitted === q
      if (p !== q && !isSaid) changes.push({ name: 'placed', before: yes(p), after: yes(q) })
    }
    if (changes.length > 0) altered.push({ designator: wordsOf(key, after, placedAfter).designator, changes })
  }

  const { moved, shift, marks } = hasPlaces ? movesOf(placedBefore, placedAfter) : { moved: [], shift: null, marks: [] }
  const mark = (kind: 'added' | 'removed', key: string, placed: Map<string, Placed>): PartMark[] => {
    const at = placed.get(key)
    if (!at) return []
    const by = kind === 'removed' && shift ? shift : { dx: 0, dy: 0 }
    const place: PlaceOnBoard = { x: at.x + by.dx, y: at.y + by.dy, side: at.side }
    return [
      { designator: at.designator.trim(), kind, from: kind === 'removed' ? place : null, to: kind === 'added' ? place : null }
    ]
  }
  return {
    added: grouped(addedKeys.map((key) => wordsOf(key, after, placedAfter))),
    removed: grouped(removedKeys.map((key) => wordsOf(key, before, placedBefore))),
    altered: groupedChanges(altered),
    moved,
    shift,
    marks: [
      ...marks,
      ...addedKeys.flatMap((key) => mark('added', key, placedAfter)),
      ...removedKeys.flatMap((key) => mark('removed', key, placedBefore))
    ],
    notCompared
  }
}

const yes = (is: boolean) => (is ? 'yes' : 'no')

function wordChanges(a: Listed, b: Listed): ValueChange<PartField>[] {
  const changes: ValueChange<PartField>[] = []
  for (const name of ['value', 'footprint', 'description'] as const)
    if (a[name] !== b[name]) changes.push({ name, before: a[name] || null, after: b[name] || null })
  if (a.isFitted !== b.isFitted) changes.push({ name: 'fitted', before: yes(a.isFitted), after: yes(b.isFitted) })
  return changes
}

function grouped(parts: readonly Listed[]): PartsGroup[] {
  const groups = new Map<string, PartsGroup>()
  for (const { designator, ...words } of parts) {
    const key = JSON.stringify(words)
    const group = groups.get(key)
    if (group) group.designators.push(designator)
    else groups.set(key, { designators: [designator], ...words })
  }
  return [...groups.values()]
}

function groupedChanges(parts: readonly { designator: string; changes: ValueChange<PartField>[] }[]): AlteredGroup[] {
  const groups = new Map<string, AlteredGroup>()
  for (const { designator, changes } of parts) {
    const key = JSON.stringify(changes)
    const group = groups.get(key)
    if (group) group.designators.push(designator)
    else groups.set(key, { designators: [designator], changes })
  }
  return [...groups.values()]
}
