const grouped = (n: number) => String(n).replace(/\B(?=(\d{3})+$)/g, ' ')

/** The exact number, in groups of three with no-break spaces: 196 755 bytes. */
export const exactBytes = (n: number): string => `${grouped(n)} ${n === 1 ? 'byte' : 'bytes'}`

/** About how much, with decimal prefixes as the SI defines them: 197 kB, 1.5 MB. */
export function aboutBytes(n: number): string {
  if (n < 1000) return `${n} B`
  const [value, unit] = n < 999_500 ? [n / 1000, 'kB'] : [n / 1_000_000, 'MB']
  return `${value < 10 ? value.toFixed(1) : Math.round(value)} ${unit}`
}

/** How much of it is there: "118 of 197 kB, 60 %". */
export function shareOfBytes(part: number, whole: number): string {
  const unit = whole < 999_500 ? 1000 : 1_000_000
  const digits = whole / unit < 10 ? 1 : 0
  const percent = whole === 0 ? 100 : Math.floor((part / whole) * 100)
  return `${(part / unit).toFixed(digits)} of ${(whole / unit).toFixed(digits)} ${unit === 1000 ? 'kB' : 'MB'}, ${percent} %`
}
