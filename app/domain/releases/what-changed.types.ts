import type { BundleFacts, BundleLayer, BundleRecord, LayerFingerprint } from '~/domain/bundle/bundle-check.types'
import type { Declared } from './declared-beside-measured'

/** One of two releases of a board that are compared. `record` is null where nothing was kept of its bundle. */
export type ReleaseSide = {
  version: string
  boardRevision: string
  record: BundleRecord | null
  facts: BundleFacts | null
  layers: Pick<BundleLayer, 'function' | 'side' | 'index'>[]
  declared: Declared
}

/** A value that differs; null where it is not stated or was not measured. */
export type ValueChange<Name extends string = string> = {
  name: Name
  before: number | string | null
  after: number | string | null
}

export type Size = { width: number; height: number }
export type HoleCounts = { plated: number | null; nonPlated: number | null; unknown: number | null; slots: number | null }

export type LayerId = {
  function: LayerFingerprint['function'] | 'soldermask' | 'paste' | 'legend'
  side: LayerFingerprint['side']
  index: number | null
}
export type LayerChange = { change: 'added' | 'removed' | 'changed'; layer: LayerId }

/** What a part is, as both lists say; empty texts where only the placement file has it. */
export type PartWords = { value: string; footprint: string; description: string; isFitted: boolean }
export type PartsGroup = { designators: string[] } & PartWords

/** `fitted` and `placed` are `yes` or `no`. */
export type PartField = 'value' | 'footprint' | 'description' | 'fitted' | 'placed'
export type AlteredGroup = { designators: string[]; changes: ValueChange<PartField>[] }

/**
 * Parts that moved alike. mm, right and up positive, counted from the lower left corner of each outline; `turn` in degrees counter-clockwise,
 * over -180 up to 180; null where a side does not state the rotation. `toSide` is set where they went to the board's other side.
 */
export type MovedGroup = {
  designators: string[]
  dx: number
  dy: number
  distance: number
  turn: number | null
  toSide: 'top' | 'bottom' | null
}

/** All parts alike lie elsewhere from the outline's corner: the outline grew, or the placement file counts from elsewhere. */
export type Shift = { dx: number; dy: number; parts: number; of: number }

export type PlaceOnBoard = { x: number; y: number; side: 'top' | 'bottom' }

/** A part to point at, mm from the outline's lower left corner as seen from the top; `from` as if the shift of all had been made. */
export type PartMark = {
  designator: string
  kind: 'moved' | 'added' | 'removed'
  from: PlaceOnBoard | null
  to: PlaceOnBoard | null
}

/** What could not be compared, and in which of the two it is missing. */
export type NotCompared = {
  what: 'record' | 'parts' | 'placements' | 'layer'
  missingIn: 'before' | 'after' | 'both'
  layer?: LayerId
}

export type WhatChanged = {
  since: string
  version: string
  revision: ValueChange | null
  outline: { before: Size | null; after: Size | null; isSameSize: boolean } | null
  layers: LayerChange[]
  drill: { before: HoleCounts | null; after: HoleCounts | null } | null
  facts: ValueChange<'copperLayers' | 'minTrack' | 'smallestStroke' | 'minHole'>[]
  declared: ValueChange<keyof Declared>[]
  added: PartsGroup[]
  removed: PartsGroup[]
  altered: AlteredGroup[]
  moved: MovedGroup[]
  shift: Shift | null
  marks: PartMark[]
  notCompared: NotCompared[]
}
