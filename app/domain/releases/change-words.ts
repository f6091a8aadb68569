import { layerName } from '~/domain/bundle/compare-fingerprints'
import type {
  HoleCounts,
  LayerChange,
  LayerId,
  MovedGroup,
  NotCompared,
  PartField,
  PartWords,
  Shift,
  ValueChange,
  WhatChanged
} from './what-changed.types'

/* The words for what changed, the same in the notes and on the page. */

const surfaces = { soldermask: 'mask', paste: 'paste', legend: 'legend' } as const

/** "copper top", "copper layer 2", "mask bottom": in the middle of a sentence. */
export const layerWords = (layer: LayerId): string =>
  layer.function === 'soldermask' || layer.function === 'paste' || layer.function === 'legend'
    ? `${surfaces[layer.function]} ${layer.side}`
    : layerName({ function: layer.function, side: layer.side, index: layer.index })

/** "77 plated, 2 not plated, 3 of them slots"; "not counted" where nothing is known. */
export function holeWords(holes: HoleCounts | null): string {
  if (!holes) return 'not counted'
  const counts = [
    holes.plated !== null && `${holes.plated} plated`,
    holes.nonPlated !== null && `${holes.nonPlated} not plated`,
    holes.unknown ? `${holes.unknown} with plating not said` : false
  ].filter(Boolean)
  if (counts.length === 0) return 'not counted'
  return counts.join(', ') + (holes.slots ? `, ${holes.slots} of them slots` : '')
}

/** "38.0 × 14.0 mm", to a hundredth where tenths would hide the difference. */
export function sizeWords({ before, after }: NonNullable<WhatChanged['outline']>): {
  before: string | null
  after: string | null
} {
  const tenths = (size: typeof before) => size && `${size.width.toFixed(1)} × ${size.height.toFixed(1)} mm`
  const hundredths = (size: typeof before) => size && `${size.width.toFixed(2)} × ${size.height.toFixed(2)} mm`
  const write = before && after && tenths(before) === tenths(after) ? hundredths : tenths
  return { before: write(before), after: write(after) }
}

const along = (dx: number, dy: number) =>
  [
    Math.abs(dx) >= 0.005 && `${Math.abs(dx).toFixed(2)} mm to the ${dx > 0 ? 'right' : 'left'}`,
    Math.abs(dy) >= 0.005 && `${Math.abs(dy).toFixed(2)} mm ${dy > 0 ? 'up' : 'down'}`
  ]
    .filter(Boolean)
    .join(' and ')

/** "1.47 mm to the right", "turned by 90° to the left", "now on the bottom side"; as seen from the top. */
export function moveWords({ dx, dy, distance, turn, toSide }: MovedGroup): string {
  const degrees = (angle: number) => `${Number(Math.abs(angle).toFixed(1))}°`
  return [
    distance > 0 && along(dx, dy),
    turn && (Math.abs(turn) > 179.95 ? 'turned by 180°' : `turned by ${degrees(turn)} to the ${turn > 0 ? 'left' : 'right'}`),
    toSide && `now on the ${toSide} side`
  ]
    .filter(Boolean)
    .join(', ')
}

export const shiftWords = ({ dx, dy, parts, of }: Shift): string =>
  `${parts === of ? `All ${of}` : `${parts} of ${of}`} placed parts lie ${along(dx, dy)}, counted from the board's lower left corner`

export const factNames: Record<WhatChanged['facts'][number]['name'], { name: string; unit: string; digits: number }> = {
  copperLayers: { name: 'Copper layers', unit: '', digits: 0 },
  minTrack: { name: 'Narrowest track', unit: ' mm', digits: 3 },
  smallestStroke: { name: 'Smallest stroke on copper', unit: ' mm', digits: 3 },
  minHole: { name: 'Smallest hole', unit: ' mm', digits: 3 }
}

/** The facts that differ, without the number of layers where the declared one says the same. */
export const factsToSay = ({ facts, declared }: Pick<WhatChanged, 'facts' | 'declared'>): WhatChanged['facts'] =>
  facts.filter(({ name, after }) => name !== 'copperLayers' || !declared.some((d) => d.name === 'layers' && d.after === after))

export const declaredNames: Record<WhatChanged['declared'][number]['name'], { name: string; unit: string }> = {
  layers: { name: 'Copper layers', unit: '' },
  thicknessMm: { name: 'Thickness', unit: ' mm' },
  copperUm: { name: 'Copper weight', unit: ' µm' },
  finish: { name: 'Finish', unit: '' },
  mask: { name: 'Mask', unit: '' },
  legend: { name: 'Legend', unit: '' },
  stencil: { name: 'Stencil', unit: '' }
}

/** One value of a fact or a declared detail with its unit; a length has two digits at least. */
export function valueWords(value: number | string | null, { unit, digits }: { unit: string; digits?: number }): string {
  if (value === null) return 'not stated'
  if (typeof value === 'string') return value
  if (digits === undefined || digits === 0) return `${value}${unit}`
  const text = value.toFixed(digits)
  return `${text.endsWith('0') ? text.slice(0, -1) : text}${unit}`
}

export const fieldNames: Record<PartField, string> = {
  value: 'value',
  footprint: 'footprint',
  description: 'description',
  fitted: 'fitted',
  placed: 'in the placement file'
}

/** "10uF, C_1206", with what is not fitted said. */
export const partWords = ({ value, footprint, isFitted }: PartWords): string =>
  [value, footprint, !isFitted && 'not fitted'].filter(Boolean).join(', ')

/** A change of a part as one side of a table tells it. */
export function fieldWords({ name }: ValueChange<PartField>, value: number | string | null): string {
  if (name === 'fitted') return value === 'yes' ? 'fitted' : 'not fitted'
  if (name === 'placed') return value === 'yes' ? 'in the placement file' : 'not in the placement file'
  return value === null ? `no ${fieldNames[name]}` : String(value)
}

/** Why something is not compared, as a sentence. */
export function notComparedWords({ what, missingIn, layer }: NotCompared, since: string, version: string): string {
  const where = missingIn === 'both' ? `${since} and ${version}` : missingIn === 'before' ? since : version
  switch (what) {
    case 'record':
      return `Nothing was kept of the files of ${where}, so that parts, places, copper and holes cannot be compared.`
    case 'parts':
      return `No bill of materials could be read in ${where}, so that values and footprints are not compared.`
    case 'placements':
      return `No placement file could be read in ${where}, so that the places of parts are not compared.`
    case 'layer':
      return `${capital(layerWords(layer!))} could not be read in ${where}, and so not compared.`
  }
}

export const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)

/** "a, b and c". */
export const joined = (items: readonly string[]): string =>
  items.length < 2 ? (items[0] ?? '') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)!}`

/** "C1, C2, C3 and 5 more": the first of a long list. */
export const shortened = (items: readonly string[], most: number): string =>
  items.length <= most ? joined(items) : `${items.slice(0, most).join(', ')} and ${items.length - most} more`

/** Designators or layers named in one sentence. */
export const mostNames = 12

/** Which layers are new, gone, or differ: a sentence each. */
export function layerSentences(changes: readonly LayerChange[]): string[] {
  const of = (change: LayerChange['change']) => changes.filter((c) => c.change === change).map((c) => layerWords(c.layer))
  const sentence = (words: string[], one: string, several: string) =>
    words.length === 0 ? [] : [`${capital(shortened(words, mostNames))} ${words.length === 1 ? one : several}.`]
  return [
    ...sentence(of('added'), 'is new', 'are new'),
    ...sentence(of('removed'), 'is gone', 'are gone'),
    ...sentence(of('changed'), 'differs', 'differ')
  ]
}

/** That the drilled holes differ, with how many there are. */
export function drillSentence({ before, after }: NonNullable<WhatChanged['drill']>): string {
  const [was, is] = [holeWords(before), holeWords(after)]
  return was === is
    ? `The drilled holes differ in place or size; their number is the same: ${is}.`
    : `The drilled holes differ: ${is} (before ${was}).`
}

/** That the outline differs, with its size where that is what differs. */
export function outlineSentence(outline: NonNullable<WhatChanged['outline']>): string {
  const { before, after } = sizeWords(outline)
  return outline.isSameSize || !before || !after
    ? 'The outline has another shape.'
    : `The outline differs: ${after} (before ${before}).`
}
