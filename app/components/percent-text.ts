/**
 * A share as whole percent, never as "100": where nothing failed it is the lower bound, "≥ 59"; what rounds to 100 is "over 99",
 * and what rounds to 0 "under 1".
 */
export function percentText(share: number, lower: number | null): string {
  if (share >= 1) return lower === null ? 'none failed' : `≥ ${Math.min(99, Math.floor(lower * 100 + 1e-9))}`
  const percent = Math.round(share * 100)
  if (percent === 100) return 'over 99'
  if (percent === 0 && share > 0) return 'under 1'
  return String(percent)
}
