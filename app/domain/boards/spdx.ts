import ids from 'spdx-license-ids/index.json' with { type: 'json' }

const byLower = new Map(ids.map((id) => [id.toLowerCase(), id]))

/** The licences that open hardware is customarily released under, first in the list of choices. Common practice, no source. */
export const customaryLicences = [
  'CERN-OHL-P-2.0',
  'CERN-OHL-W-2.0',
  'CERN-OHL-S-2.0',
  'Apache-2.0',
  'MIT',
  'CC-BY-4.0',
  'CC-BY-SA-4.0',
  'CC0-1.0'
] as const

/** The identifier of the SPDX licence list in its own spelling, or null when the list does not know it (case is forgiven, as SPDX does). */
export const spdxId = (text: string): string | null => byLower.get(text.trim().toLowerCase()) ?? null

/** Every identifier that is not deprecated, for suggestions. */
export const allSpdxIds: readonly string[] = ids
