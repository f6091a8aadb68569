import { joined, markOf, scatter, waveCount, type Mark } from './geometry-sums'

/**
 * A size in mm as a whole number, in steps of 5 µm. The steps part at 2.53 µm: no multiple of 0.1 µm, and so none of a tenth of a mil, lies on
 * a parting, where the rounding of an export in inches would decide; a size in whole 5 µm may be off by 2.4 µm, as four decimals of an inch are.
 */
export const sizeStep = (mm: number): number => Math.floor(mm * 200 + 0.494)

/** The mark of a standard aperture or tool: its shape, its sizes in mm, and numbers that are no lengths. */
export const sizedMark = (shape: number, sizes: readonly number[], others: readonly number[] = []): Mark =>
  markOf(shape, ...sizes.map(sizeStep), ...others.map((value) => Math.round(value * 100)))

/** Which values of a macro primitive are lengths, from its code (specification 2024.05, section 4.5); the rest are flags, counts and degrees. */
function isLength(code: number, position: number, count: number): boolean {
  if (code === 4) return position >= 2 && position < 2 + 2 * (count + 1)
  if (code === 5) return position >= 2 && position <= 4
  if (code === 6) return position <= 4 || position === 6 || position === 7
  if (code === 7) return position <= 4
  if (code === 1 || code === 21 || code === 22) return position >= 1 && position <= (code === 1 ? 3 : 4)
  return position >= 1 && position <= 5
}

/** Lengths of a macro turn its mark by at most one turn in this many nm: all its flashes share the rounding, which must barely show. */
export const macroWave = 2_000_000

/** Builds the mark of a macro aperture from its primitives with their values, in their order. */
export class MacroMark {
  private readonly smooth = new Int32Array(waveCount)
  private words = 0x51ed270b
  private position = 0

  /** @param unit mm per unit of the values */
  add(code: number, values: readonly number[], unit: number): void {
    this.word(code)
    for (let i = 0; i < values.length; i++) {
      if (isLength(code, i, values[1] ?? 0)) this.length(values[i]! * unit)
      else this.word(Math.round(values[i]! * 100))
    }
  }

  get mark(): Mark {
    return joined(this.smooth, markOf(this.words))
  }

  private word(value: number): void {
    this.words = scatter(this.words ^ scatter(value))
  }

  private length(mm: number): void {
    const nm = Math.round(mm * 1e6)
    const seed = ++this.position * waveCount
    for (let k = 0; k < waveCount; k++) {
      const h = scatter(seed + k)
      const rate = (0.5 + (h >>> 17) / 2 ** 16) * (2 ** 32 / macroWave)
      this.smooth[k] = this.smooth[k]! + Math.imul(Math.round(h & 1 ? rate : -rate), nm)
    }
  }
}
