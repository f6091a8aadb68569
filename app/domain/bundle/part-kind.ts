import type { PartKind } from './part-reading.types'

// Class letters of reference designations, common practice. Longer words that begin alike name other things: CR a diode, RV a varistor,
// RT a thermistor, RN a network of several resistors, LS a loudspeaker, CN a connector or a network; CP a connector adapter.
const kinds = new Map<string, PartKind>([
  ['C', 'capacitor'],
  ['CE', 'capacitor'],
  ['R', 'resistor'],
  ['L', 'inductor'],
  ['FB', 'ferrite']
])

/** The letters that a designator starts with, in capitals: `C` of `C12`, `FB` of `fb_in`; empty where it starts with none. */
export function designatorLetters(designator: string): string {
  return /^\s*([A-Za-z]{1,12})(?![A-Za-z])/.exec(designator)?.[1]?.toUpperCase() ?? ''
}

/** What a part is, by its designator's letters alone; null for all that is neither capacitor, resistor, inductor nor ferrite. */
export function partKind(designator: string): PartKind | null {
  return kinds.get(designatorLetters(designator)) ?? null
}
