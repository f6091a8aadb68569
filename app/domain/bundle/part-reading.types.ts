/** What a part is, told by its designator's letters. */
export type PartKind = 'capacitor' | 'resistor' | 'inductor' | 'ferrite'

/**
 * What was read out of a part's value; SI units (F, ohm, H, V, A, W), shares for tolerances (0.1 is 10 %). What is not stated is null.
 * A value that could not be read is null with the reason in `unread`; nothing is guessed.
 */
export type PartReading = {
  kind: PartKind | null
  value: number | null
  /** Lower and upper limit as shares of the value: [-0.2, 0.8]. */
  tolerance: [number, number] | null
  voltage: number | null
  /** EIA class of a ceramic as three characters (`X7R`; `C0G` for NP0), or null. */
  dielectric: string | null
  /** EIA size code in inches (`0603`), or null. */
  size: string | null
  esr: number | null
  power: number | null
  current: number | null
  isNotFitted: boolean
  unread: string | null
}
