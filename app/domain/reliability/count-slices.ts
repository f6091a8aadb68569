import type { EvidenceGrade, InstallMethod } from '../reports/report-words'
import { observationFilters, type ReliabilityFilters } from './reliability-filters'

/**
 * The version of the rules by which reports are counted and stored. Raise it with any change to `observationOf`, `countOutcome`, `coarseLife`, the
 * slices or the stored form: boards counted by other rules are counted anew when the server starts.
 */
export const countingRules = 1

/** Which of a group's units are counted together: `*` for all of them. */
export type Slice = { evidence: EvidenceGrade | '*'; method: InstallMethod | 'untold' | '*'; firstPower: 'works' | '*' }

/** The slices that a unit is counted in: its own grade, method and result, and each of them left open. */
export function slicesOf(unit: { evidence: EvidenceGrade; method: InstallMethod | null; firstPower: string }): Slice[] {
  const slices: Slice[] = []
  for (const evidence of [unit.evidence, '*'] as const)
    for (const method of [unit.method ?? 'untold', '*'] as const)
      for (const firstPower of unit.firstPower === 'works' ? (['works', '*'] as const) : (['*'] as const))
        slices.push({ evidence, method, firstPower })
  return slices
}

/**
 * The slices whose sum is what filters ask for; `established` is two of them. The other filters choose groups or what is done with them.
 * @throws Error when only units fitted since a day are asked for, which stored counts do not know
 */
export function slicesFor(filters: ReliabilityFilters): Slice[] {
  if (filters.since !== null) throw new Error('Stored counts do not know when a unit was fitted')
  const { evidence } = observationFilters(filters)
  const method = filters.method === 'any' ? '*' : filters.method
  const firstPower = filters.firstPower === 'set-aside' ? 'works' : '*'
  return (evidence === 'any' ? (['*'] as const) : evidence).map((grade) => ({ evidence: grade, method, firstPower }))
}
