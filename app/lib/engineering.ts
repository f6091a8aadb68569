const prefixes: Record<number, string> = {
  [-15]: 'f',
  [-12]: 'p',
  [-9]: 'n',
  [-6]: 'µ',
  [-3]: 'm',
  0: '',
  3: 'k',
  6: 'M',
  9: 'G',
  12: 'T'
}

/**
 * A quantity with the SI prefix that leaves one to three digits before the point, at most `digits` figures that count, and a no-break
 * space before the unit: 4.7e-6 with `F` is `4.7 µF`. Beyond the prefixes femto and tera it stands in powers of ten.
 */
export function inEngineeringUnits(value: number, unit: string, digits = 4): string {
  if (!Number.isFinite(value)) return String(value)
  if (value === 0) return `0\u00a0${unit}`
  // Rounding first, as 999.96 may become 1000.
  const [mantissa, power] = value.toExponential(digits - 1).split('e') as [string, string]
  const step = Math.floor(Number(power) / 3) * 3
  const prefix = prefixes[step]
  if (prefix === undefined) return `${Number(mantissa)}e${Number(power)}\u00a0${unit}`
  return `${Number(`${mantissa}e${Number(power) - step}`)}\u00a0${prefix}${unit}`
}
