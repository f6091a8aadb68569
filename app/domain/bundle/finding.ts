import type { BundleFinding, FindingPlace } from './bundle-check.types'
import { findingCodes, type FindingCode } from './finding-codes'

export type FindingDetails = {
  file?: string | null
  expected?: string | number | null
  found?: string | number | null
  place?: FindingPlace | null
}

const textOf = (value: string | number | null | undefined) => (value === undefined || value === null ? null : String(value))

/** One finding with the severity its code stands for. */
export function finding(code: FindingCode, message: string, details: FindingDetails = {}): BundleFinding {
  return {
    code,
    severity: findingCodes[code],
    file: details.file ?? null,
    message,
    expected: textOf(details.expected),
    found: textOf(details.found),
    place: details.place ?? null
  }
}

/** A length in mm for people: at most three decimals, no trailing zeros. */
export const mm = (value: number): string => `${Number(value.toFixed(3))} mm`

/** Names in a message: the first few, and how many more there are. */
export function listed(names: readonly string[], most = 8): string {
  if (names.length <= most) return names.join(', ')
  return `${names.slice(0, most).join(', ')} and ${names.length - most} more`
}
