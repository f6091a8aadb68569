import type { PartKind } from './part-reading.types'

/** Powers of ten of SI prefixes as parts lists write them; `u` stands for the Greek letter too. */
const exponents: Record<string, number> = { p: -12, n: -9, u: -6, m: -3, '': 0, k: 3, K: 3, M: 6, G: 9 }

/** A decimal shifted through its digits, so that 4.7 micro is the same number as the literal 4.7e-6. */
const shifted = (digits: string, exponent: number): number => Number(`${digits}e${exponent}`)

const number = String.raw`(\d{1,9}(?:\.\d{0,6})?|\.\d{1,6})`

/** The exponent that a prefix stands for with farads and henries, where upper case is common, but a capital M may be milli, micro or mega. */
function smallPrefix(prefix: string): number | null {
  if (prefix === 'm' || prefix === '') return exponents[prefix]!
  return { p: -12, n: -9, u: -6 }[prefix.toLowerCase()] ?? null
}

/**
 * A capacitance in F: `4.7uF`, `100n`, `4u7`, `4R7` (pF), or three digits as on the part (two and a power of ten, in pF). Null when it is none.
 *
 * Source: IEC 60062 (letter and digit code for values; three-digit code of capacitors), from memory.
 */
export function readCapacitance(token: string): number | null {
  const plain = new RegExp(`^${number}([pnumPNUM]?)(F|f)?$`).exec(token)
  if (plain && (plain[2] !== '' || plain[3] !== undefined)) {
    const exponent = smallPrefix(plain[2]!)
    return exponent === null || (plain[2] === '' && plain[3] === 'f') ? null : shifted(plain[1]!, exponent)
  }
  const inside = /^(\d{1,4})([pnumPNUMR])(\d{1,3})[fF]?$/.exec(token)
  if (inside) {
    const exponent = inside[2] === 'R' ? -12 : smallPrefix(inside[2]!)
    return exponent === null ? null : shifted(`${inside[1]}.${inside[3]}`, exponent)
  }
  const code = /^([1-9]\d)(\d)$/.exec(token)
  if (!code) return null
  const power = code[2] === '9' ? -1 : code[2] === '8' ? -2 : Number(code[2])
  return shifted(code[1]!, power - 12)
}

/** A resistance in ohm: `10k`, `4R7`, `1K5`, `R010`, `10m`, `100ohm`, `0`. Null when it is none. Source: IEC 60062, from memory. */
export function readResistance(token: string): number | null {
  const plain = new RegExp(`^${number}(m|k|K|M|G|Meg|MEG|meg)?(R|ohms?|Ohms?|OHMS?)?$`).exec(token)
  if (plain) {
    const prefix = plain[2] ?? ''
    return shifted(plain[1]!, prefix.length > 1 ? 6 : exponents[prefix]!)
  }
  const inside = /^(\d{0,4})([RrkKM])(\d{1,4})$/.exec(token)
  if (!inside) return null
  return shifted(`${inside[1] || '0'}.${inside[3]}`, inside[2]!.toUpperCase() === 'R' ? 0 : exponents[inside[2]!]!)
}

/** An inductance in H: `4.7uH`, `8n2`, `10u`. Null when it is none; a bare number or an R says no unit that all would agree on. */
export function readInductance(token: string): number | null {
  const plain = new RegExp(`^${number}([pnumPNUM]?)(H|h)?$`).exec(token)
  if (plain && (plain[2] !== '' || plain[3] !== undefined)) {
    const exponent = smallPrefix(plain[2]!)
    return exponent === null ? null : shifted(plain[1]!, exponent)
  }
  const inside = /^(\d{1,4})([pnumPNU])(\d{1,3})[hH]?$/.exec(token)
  const exponent = inside && smallPrefix(inside[2]!)
  return exponent === null || exponent === undefined ? null : shifted(`${inside![1]}.${inside![3]}`, exponent)
}

/** The impedance of a ferrite bead in ohm, with its unit: `600R`, `1k`, `600R@100MHz`. Null when it is none. */
export function readBeadImpedance(token: string): number | null {
  const [impedance = ''] = token.split('@')
  return /^\d+(\.\d+)?$/.test(impedance) ? null : readResistance(impedance)
}

/** How the value of each kind of part is read. */
export const valueReaders: Record<PartKind, (token: string) => number | null> = {
  capacitor: readCapacitance,
  resistor: readResistance,
  inductor: readInductance,
  ferrite: readBeadImpedance
}

/** A voltage in V: `6.3V`, `6V3`, `2kV`, `16WV`, `25VDC`. Null when it is none; an alternating voltage is another rating. */
export function readVoltage(token: string): number | null {
  const inside = /^(\d{1,4})[vV](\d{1,2})$/.exec(token)
  if (inside) return Number(`${inside[1]}.${inside[2]}`)
  const plain = new RegExp(`^${number}(k|K)?(V|v|WV|Vdc|VDC|vdc)$`).exec(token)
  return plain ? shifted(plain[1]!, plain[2] ? 3 : 0) : null
}

/** A number with a unit and an optional milli: current in A, power in W. Null when it is none. */
export function readWithUnit(token: string, unit: 'A' | 'W'): number | null {
  const part = new RegExp(String.raw`^(\d)/(\d{1,2})${unit}$`).exec(token)
  if (part) return Number(part[1]) / Number(part[2])
  const plain = new RegExp(`^${number}(m)?${unit}$`).exec(token)
  return plain ? shifted(plain[1]!, plain[2] ? -3 : 0) : null
}

/** An equivalent series resistance in ohm, which must carry its unit: `9mR`, `0.009ohm`. Null when it is none. */
export function readEsr(token: string): number | null {
  return /(R|ohms?)$/i.test(token) ? readResistance(token) : null
}

/** The class of a ceramic: X7R, Y5V and their like; C0G for NP0, with a letter O for the zero too. Null when it is none. Source: EIA-198, from memory. */
export function readDielectric(token: string): string | null {
  const code = token.toUpperCase()
  if (/^(C[0O]G|NP[0O])$/.test(code)) return 'C0G'
  return /^[XYZ][24-9][A-FLPR-V]$/.test(code) || /^(C0[HJK]|U2[JK]|S2[HJ]|T2[HJ]|R2H|P2H)$/.test(code) ? code : null
}

const inchSizes = new Set(
  '01005 0201 0402 0603 0805 1008 1206 1210 1218 1806 1808 1812 1825 2010 2220 2225 2512 0306 0508 0612'.split(' ')
)
const inchOfMetric: Record<string, string> = {
  '0402': '01005',
  '0603': '0201',
  '1005': '0402',
  '1608': '0603',
  '2012': '0805',
  '2520': '1008',
  '3216': '1206',
  '3225': '1210',
  '3246': '1218',
  '4520': '1808',
  '4532': '1812',
  '5025': '2010',
  '5750': '2220',
  '6332': '2512'
}

/** The size of a chip by its EIA code in inches; a metric code counts only when it says so (`1608M`, `1608Metric`). Null when it is none. */
export function readSize(token: string): string | null {
  const metric = /^(\d{4})(?:m|metric)$/i.exec(token)
  if (metric) return inchOfMetric[metric[1]!] ?? null
  return inchSizes.has(token) ? token : null
}

const letterTolerances: Record<string, number> = { B: 0.001, C: 0.0025, D: 0.005, F: 0.01, G: 0.02, J: 0.05, K: 0.1, M: 0.2 }

/** The tolerance that a letter on the part stands for, as a share. Source: IEC 60062, from memory. */
export const letterTolerance = (letter: string): number | null => letterTolerances[letter] ?? null
