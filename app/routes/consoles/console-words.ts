export const kindWord = { home: 'home console', handheld: 'handheld' } as const

/** "1988 to 1996", "from 1988", "until 1996"; the years are the maker's. */
export function builtYears(from: number | null, to: number | null): string {
  if (from !== null && to !== null) return from === to ? String(from) : `${from} to ${to}`
  if (from !== null) return `from ${from}`
  return to !== null ? `until ${to}` : 'not known'
}

/** "TM-1 to TM-6, six of them"; one or two are named. */
export function revisionSpan(codes: string[]): string {
  if (codes.length === 0) return 'not described yet'
  if (codes.length < 3) return codes.join(' and ')
  return `${codes[0]} to ${codes.at(-1)}, ${codes.length} of them`
}

export const reportsWord = (n: number): string => (n === 0 ? 'no report yet' : n === 1 ? '1 report' : `${n} reports`)
