import { shareOnFlashes, type FlashIndex } from './alignment'
import type { CheckLimits } from './limits'
import type { DrillFile, DrillFormat } from './drill-file.types'
import { readExcellon } from './read-excellon'

const inchDigits = [
  [2, 4],
  [2, 3],
  [2, 5],
  [3, 3],
  [3, 4]
] as const
const mmDigits = [
  [3, 3],
  [3, 2],
  [4, 2],
  [4, 3],
  [3, 4],
  [4, 4]
] as const

/** The formats that a file's silence leaves open, the customary one first. */
function candidates(file: DrillFile): Partial<DrillFormat>[] {
  const units = file.declared.unit ? [file.declared.unit] : (['inch', 'mm'] as const)
  const keeps = file.declared.keeps ? [file.declared.keeps] : (['trailing', 'leading'] as const)
  const all: Partial<DrillFormat>[] = []
  for (const unit of units) {
    for (const keep of keeps) {
      const digits = file.declared.digits
        ? [[file.format.integer, file.format.decimals] as const]
        : unit === 'inch'
          ? inchDigits
          : mmDigits
      for (const [integer, decimals] of digits) all.push({ unit, integer, decimals, keeps: keep })
    }
  }
  return all
}

export type SettledDrill = { file: DrillFile; assumed: boolean }

/**
 * Reads a drill file whose format is not fully declared: of the formats it may have, the customary one when its holes fall on the pads,
 * else the one that brings most holes onto pads. `assumed` says that the choice was a guess the maintainer should confirm.
 */
export function settleDrillFormat(bytes: Uint8Array, first: DrillFile, pads: FlashIndex[], limits: CheckLimits): SettledDrill {
  if (first.problem || first.holes.length === 0 || first.doubts.size === 0) return { file: first, assumed: false }
  const isGuess = first.doubts.has('unit') || first.doubts.has('zeros')
  const shareOf = (file: DrillFile) => Math.max(0, ...pads.map((index) => shareOnFlashes(index, file.holes)))
  const customary = shareOf(first)
  if (pads.length === 0 || customary >= 0.8) return { file: first, assumed: isGuess }
  let best = { file: first, share: customary }
  for (const assume of candidates(first)) {
    const file = readExcellon(bytes, limits, assume)
    const share = shareOf(file)
    if (!file.problem && share > best.share) best = { file, share }
  }
  const isBetter = best.file !== first && best.share >= 0.5
  return isBetter ? { file: best.file, assumed: true } : { file: first, assumed: isGuess }
}
