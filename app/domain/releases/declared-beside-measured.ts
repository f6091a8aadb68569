import type { BundleFacts } from '~/domain/bundle/bundle-check.types'

/** One fact; values as they are printed, absent when not stated or not measured. `differs` names the finding code that says so. */
export type DeclaredFact = { fact: string; declared?: string; measured?: string; isMeasuredOnly?: true; differs?: string }

export type Declared = {
  layers: number | null
  thicknessMm: number | null
  copperUm: number | null
  finish: string | null
  mask: string | null
  legend: string | null
  stencil: string | null
}

const mm = (value: number | null, digits: number) => (value === null ? undefined : value.toFixed(digits))
const count = (value: number | null) => (value === null ? undefined : String(value))
const stated = (value: number | string | null) => (value === null || value === '' ? undefined : String(value))

/**
 * The rows of the table of facts: what the maintainer declares beside what was measured. Lengths in mm, copper in µm. Only the number of copper
 * layers can differ in the files; a conflict of thickness is a finding of its own, given by its code.
 * @param conflicts codes among the findings
 */
export function declaredBesideMeasured(
  declared: Declared,
  facts: BundleFacts | null,
  conflicts: ReadonlySet<string>
): DeclaredFact[] {
  const size =
    facts && facts.width !== null && facts.height !== null ? `${facts.width.toFixed(1)} × ${facts.height.toFixed(1)}` : undefined
  const layersDiffer = declared.layers !== null && facts?.copperLayers != null && declared.layers !== facts.copperLayers
  const rows: DeclaredFact[] = [
    { fact: 'Size, mm', measured: size, isMeasuredOnly: true },
    {
      fact: 'Copper layers',
      declared: stated(declared.layers),
      measured: count(facts?.copperLayers ?? null),
      ...(layersDiffer ? { differs: 'layer-count' } : {})
    },
    {
      fact: 'Thickness, mm',
      declared: stated(declared.thicknessMm),
      ...(conflicts.has('thickness-conflict') ? { differs: 'thickness-conflict' } : {})
    },
    { fact: 'Copper weight, µm', declared: stated(declared.copperUm) },
    { fact: 'Finish', declared: stated(declared.finish) },
    { fact: 'Mask', declared: stated(declared.mask) },
    { fact: 'Legend', declared: stated(declared.legend) },
    { fact: 'Stencil', declared: stated(declared.stencil) }
  ]
  if (!facts) return rows
  const narrowest = facts.minTrack !== null ? { fact: 'Narrowest track, mm', measured: mm(facts.minTrack, 2) } : null
  const stroke =
    facts.smallestStroke !== null ? { fact: 'Smallest stroke on copper, mm', measured: mm(facts.smallestStroke, 2) } : null
  const measured: DeclaredFact[] = [
    narrowest ?? stroke ?? { fact: 'Narrowest track, mm' },
    { fact: 'Smallest hole, mm', measured: mm(facts.minHole, 2) },
    { fact: 'Holes, plated', measured: count(facts.holes.plated) },
    { fact: 'Holes, not plated', measured: count(facts.holes.nonPlated) },
    ...(facts.holes.unknown ? [{ fact: 'Holes, plating not said', measured: count(facts.holes.unknown) }] : []),
    ...(facts.slots ? [{ fact: 'Slots among the holes', measured: count(facts.slots) }] : []),
    { fact: 'Parts to place, top', measured: count(facts.placements.top) },
    { fact: 'Parts to place, bottom', measured: count(facts.placements.bottom) },
    { fact: 'Parts listed', measured: count(facts.bom.parts) },
    { fact: 'Parts not fitted', measured: count(facts.bom.notFitted) }
  ]
  return [...rows, ...measured.map((row) => ({ ...row, isMeasuredOnly: true as const }))]
}
