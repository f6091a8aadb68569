import type { BundleLayer, LayerFunction } from './bundle-check.types'

const functions: LayerFunction[] = [
  'copper',
  'soldermask',
  'paste',
  'legend',
  'outline',
  'drill-plated',
  'drill-nonplated',
  'drill',
  'fabrication',
  'assembly',
  'job',
  'netlist',
  'bom',
  'placement',
  'source',
  'licence',
  'document',
  'other'
]
const sides = { top: 0, inner: 1, bottom: 2 }

/** The order in which a person reads a board: copper from the top down, then mask, paste and legend, outline, drills, papers. */
export const inStackOrder = (layers: readonly BundleLayer[]): BundleLayer[] =>
  [...layers].sort(
    (a, b) =>
      functions.indexOf(a.function) - functions.indexOf(b.function) ||
      (a.index ?? Infinity) - (b.index ?? Infinity) ||
      (a.side ? sides[a.side] : 3) - (b.side ? sides[b.side] : 3) ||
      (a.file < b.file ? -1 : 1)
  )
