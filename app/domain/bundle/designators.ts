/** Largest number of designators that one range may stand for. */
const largestRange = 5000

/** `R1-R4` (also `R1…R4`, `R1..R4`) as R1, R2, R3, R4: only letters and a number to the same letters and a larger number; anything else stays as it is. */
export function expandRange(text: string): string[] {
  const match = /^([A-Za-z_]+)(\d{1,6})(?:[-–—…~]|\.{2,3})([A-Za-z_]+)(\d{1,6})$/.exec(text)
  if (!match || match[1] !== match[3]) return [text]
  const from = Number(match[2])
  const to = Number(match[4])
  if (to <= from || to - from >= largestRange) return [text]
  return Array.from({ length: to - from + 1 }, (_, i) => `${match[1]}${from + i}`)
}

/**
 * The designators in a cell of a parts list, which may be separated by commas, semicolons or blanks and hold ranges. Reading ends soon after
 * `most` of them, so that a longer answer means too many.
 */
export function readDesignators(cell: string, most = 20_000): string[] {
  const names: string[] = []
  const parts = cell
    .replace(/([A-Za-z_]{1,20}\d{1,6})\s{0,3}(?:[-–—…~]|\.{2,3})\s{0,3}([A-Za-z_]{1,20}\d{1,6})/g, '$1-$2')
    .split(/[,;/&|，、；\s]+/)
    .filter((part) => part !== '')
  for (const part of parts) {
    for (const name of expandRange(part)) names.push(name)
    if (names.length > most) break
  }
  return names
}
