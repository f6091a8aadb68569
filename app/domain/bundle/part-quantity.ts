import type { PartKind } from './part-reading.types'

/** A tolerance as shares of the value, or in farads where `isAbsolute`. */
export type Tolerance = { low: number; high: number; isAbsolute: boolean }

/** What one word says: a quantity in SI units, or a bare figure that only counts where nothing better is said. */
export type Quantity =
  | { of: 'value'; value: number; tolerance: Tolerance | null; isBare: boolean }
  | { of: 'voltage' | 'power' | 'current' | 'esr'; value: number }
  | { of: 'tolerance'; tolerance: Tolerance }

// No figure with needless noughts in front: `000` behind a blank is a group of thousands, `0603` a size.
const figure = String.raw`(?:(?:0|[1-9]\d{0,8})(?:\.\d{1,9})?|\.\d{1,9})`
const exponents: Record<string, number> = { p: -12, n: -9, u: -6, m: -3, R: 0, k: 3, M: 6, G: 9, T: 12 }

/** A decimal text times a power of ten, by way of the text, so that 4.7 at -6 is exactly the number that `4.7e-6` is. */
export const scaled = (decimal: string, exponent: number): number => Number(`${decimal}e${exponent}`)

// Letters of IEC 60062 for symmetrical tolerances, in per cent (from memory), and Z; below 10 pF B to G are picofarads.
const percentLetters: Record<string, [number, number]> = {
  B: [-0.1, 0.1],
  C: [-0.25, 0.25],
  D: [-0.5, 0.5],
  F: [-1, 1],
  G: [-2, 2],
  J: [-5, 5],
  K: [-10, 10],
  M: [-20, 20],
  N: [-30, 30],
  Z: [-20, 80]
}
const picofaradLetters: Record<string, string> = { B: '0.1', C: '0.25', D: '0.5', F: '1', G: '2' }

/** A tolerance of so many per cent. */
export const percent = (low: number, high: number): Tolerance => ({
  low: scaled(String(low), -2),
  high: scaled(String(high), -2),
  isAbsolute: false
})

/** A tolerance in picofarads to both sides. */
export const picofarads = (decimal: string): Tolerance => ({
  low: -scaled(decimal, -12),
  high: scaled(decimal, -12),
  isAbsolute: true
})

function toleranceOfLetter(letter: string | undefined, kind: PartKind, value: number): Tolerance | null {
  if (letter === undefined) return null
  if (kind === 'capacitor' && value < 10e-12 && picofaradLetters[letter]) return picofarads(picofaradLetters[letter])
  return percent(...percentLetters[letter]!)
}

const farads = {
  plain: new RegExp(`^(${figure})([pnumPNU])?(F|f)?([BCDGJKMNZ])?$`),
  point: /^(\d{1,6})([pnumPNURF])(\d{1,6})(?:F|f)?([BCDGJKMNZ])?$/,
  leading: /^([pnuR])(\d{1,4})(?:F|f)?([BCDGJKMNZ])?$/
}
const henries = {
  plain: new RegExp(`^(${figure})([pnumPNU])?(H|h)?([GJKMN])?$`),
  point: /^(\d{1,6})([pnumPNUH])(\d{1,6})(?:H|h)?([GJKMN])?$/,
  leading: /^([pnu])(\d{1,4})(?:H|h)?([GJKMN])?$/
}
const ohms = {
  plain: new RegExp(`^(${figure})(m|k|K|M|G|T|[Mm]eg|MEG|u(?=[RΩ]))?([RrΩ])?([BCDFGJKM])?$`),
  point: /^(\d{1,6})([mRrkKMGT])(\d{1,6})(?:Ω)?([BCDFGJKM])?$/,
  leading: /^([Rr])(\d{1,6})(?:Ω)?([BCDFGJKM])?$/
}

/** The value that a word names for a part of this kind (F, H or ohm), with the tolerance of a letter behind it. */
export function readValueWord(word: string, kind: PartKind): Quantity | null {
  const isOhms = kind === 'resistor' || kind === 'ferrite'
  const forms = isOhms ? ohms : kind === 'capacitor' ? farads : henries
  const answer = (decimal: string, exponent: number, letter: string | undefined, isBare = false): Quantity => {
    const value = scaled(decimal, exponent)
    return { of: 'value', value, tolerance: toleranceOfLetter(letter, kind, value), isBare }
  }
  // Three digits are a code on capacitors only: two figures and the number of noughts, in picofarads; 8 and 9 divide by 100 and 10.
  const code = kind === 'capacitor' ? /^([1-9]\d)(\d)([JKMZ])?$/.exec(word) : null
  if (code) return answer(code[1]!, -12 + (code[2] === '9' ? -1 : code[2] === '8' ? -2 : Number(code[2])), code[3], true)

  const plain = forms.plain.exec(word)
  if (plain) {
    const [, decimal, prefix, unit, letter] = plain
    if (prefix === undefined && unit === undefined)
      return isOhms && letter === undefined ? answer(decimal!, 0, undefined, true) : null
    // `10mF` and `10MF` on a resistor speak of farads, a small f or h alone of nothing.
    if (isOhms && letter === 'F' && unit === undefined && /^m|^M/.test(prefix!)) return null
    if (prefix === undefined && /[fh]/.test(unit!)) return null
    return answer(decimal!, prefix === undefined ? 0 : exponentOf(prefix, isOhms), letter)
  }
  const point = forms.point.exec(word)
  if (point) return answer(`${point[1]}.${point[3]}`, pointExponent(point[2]!, kind), point[4])
  const leading = forms.leading.exec(word)
  return leading ? answer(`0.${leading[2]}`, pointExponent(leading[1]!, kind), leading[3]) : null
}

// Farads and henries know no mega and no kilo here, so their capitals fold; a resistor's m and M differ.
function exponentOf(prefix: string, isOhms: boolean): number {
  if (/^meg$/i.test(prefix)) return 6
  return exponents[isOhms ? prefix.replace('K', 'k').replace('r', 'R') : prefix.toLowerCase()]!
}

function pointExponent(letter: string, kind: PartKind): number {
  if (kind === 'capacitor' && letter === 'R') return -12
  if (letter === 'F' || letter === 'H') return 0
  return exponentOf(letter, kind === 'resistor' || kind === 'ferrite')
}

const volts = new RegExp(`^(${figure})([kK])?(?:W?V|v)(?:DC|AC|dc|ac)?$`)
const watts = new RegExp(`^(${figure})(m)?W$`)
const amperes = new RegExp(`^(${figure})(m|u)?A$`)
const esr = new RegExp(`^(${figure})(?:(m)[RΩ]|(m)?Ω)$`)
const share = new RegExp(`^(${figure})%$`)

/** A rating that a word names: volts, watts, amperes, the equivalent series resistance of a capacitor, or a tolerance in per cent. */
export function readRatingWord(word: string, kind: PartKind): Quantity | null {
  const point = /^(\d{1,4})([VAW])(\d{1,2})$/.exec(word)
  if (point)
    return {
      of: ({ V: 'voltage', A: 'current', W: 'power' } as const)[point[2] as 'V' | 'A' | 'W'],
      value: scaled(`${point[1]}.${point[3]}`, 0)
    }
  const volt = volts.exec(word)
  if (volt) return { of: 'voltage', value: scaled(volt[1]!, volt[2] ? 3 : 0) }
  const watt = watts.exec(word)
  if (watt) return { of: 'power', value: scaled(watt[1]!, watt[2] ? -3 : 0) }
  const ampere = amperes.exec(word)
  if (ampere) return { of: 'current', value: scaled(ampere[1]!, ampere[2] ? exponents[ampere[2]]! : 0) }
  const percents = share.exec(word)
  if (percents)
    return { of: 'tolerance', tolerance: { low: -scaled(percents[1]!, -2), high: scaled(percents[1]!, -2), isAbsolute: false } }
  const series = kind === 'capacitor' ? esr.exec(word) : null
  return series ? { of: 'esr', value: scaled(series[1]!, series[2] || series[3] ? -3 : 0) } : null
}

/** A tolerance letter that stands alone behind a value; only letters that are nothing else there. */
export function readToleranceLetter(word: string, kind: PartKind, value: number): Tolerance | null {
  const letters = kind === 'capacitor' || kind === 'inductor' ? /^[JKMZ]$/ : /^[FGJ]$/
  return letters.test(word) ? toleranceOfLetter(word, kind, value) : null
}

/** The class of a ceramic: three characters after EIA-198 (`X7R`), `C0G` also for NP0 and where a letter O was typed. */
export function readDielectricWord(word: string): string | null {
  const key = word.toUpperCase()
  if (/^(C[0O]G|NP[0O])$/.test(key)) return 'C0G'
  return /^([XYZ][2-9][A-FLPR-V]|[CU][0-9][GHJK])$/.test(key) ? key : null
}
