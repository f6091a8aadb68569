import { textOf } from './gerber-attributes'

/** Tools stand near one end of a file; looking through all of a large one for each unknown tool would take too long. */
const within = 64 * 1024

const inMm: Record<string, number> = { mm: 1, mil: 0.0254, mils: 0.0254, in: 25.4, inch: 25.4, '"': 25.4 }

const definition = /^T0*(\d{1,5})(?:[FSBHZ][\d.]+)*C(\d*\.?\d+)/
const remark = /^;?\s*T0*(\d{1,5})\b[^\d.]*?(?:hole ?size[^=]*=\s*)?(\d*\.?\d+)\s*(mm|mils?|inch|in|")?/i
const remarkUnit = /\b(mm|mils?|inch)\b/i

/**
 * Tool sizes that a drill file lists elsewhere than before their first use: in comments (`;T01 0.8mm`, `;T1 Holesize 1. = 12.0 … MILS`) or
 * at its end. Older tools do so (common practice, no source).
 *
 * @param unit mm per unit of the file
 * @returns sizes in the file's unit by the tool's number
 */
export function listedTools(bytes: Uint8Array, unit: number): Map<number, number> {
  const head = textOf(bytes.subarray(0, within))
  const tail = bytes.length > within ? textOf(bytes.subarray(Math.max(within, bytes.length - within))) : ''
  const sizes = new Map<number, number>()
  for (const line of `${head}\n${tail}`.split(/[\r\n]+/)) {
    const defined = definition.exec(line.trim().toUpperCase())
    const told = defined ?? (line.trim().startsWith(';') ? remark.exec(line.trim()) : null)
    if (!told) continue
    const name = (told[3] ?? (defined ? undefined : remarkUnit.exec(line)?.[1]))?.toLowerCase()
    const scale = name === undefined ? 1 : inMm[name]! / unit
    const size = Number(told[2]) * scale
    if (size > 0 && size * unit <= 100 && sizes.size < 1000) sizes.set(Number(told[1]), size)
  }
  return sizes
}

/** What a comment says about the file's format and the tools after it; null where it is silent. */
export type CommentFormat = {
  plating: 'plated' | 'non-plated' | null
  digits: [integer: number, decimals: number] | null
  unit: 'mm' | 'inch' | null
  keeps: 'leading' | 'trailing' | null
}

/** What older tools say about the format in comments: `FILE_FORMAT=2:4`, `FORMAT={3:3/ absolute / metric / suppress leading zeros}`, `TYPE=PLATED`. */
export function formatFromComment(comment: string): CommentFormat {
  const type = /^\s*TYPE\s*=\s*(NON_?)?PLATED/i.exec(comment)
  const digits = /FORMAT\s*=\s*\{?(\d):(\d)/i.exec(comment)
  const words = /FORMAT=\{[^}]*\/\s*(metric|inch)\b[^}]*/i.exec(comment)
  const all = words?.[0] ?? ''
  return {
    plating: type ? (type[1] ? 'non-plated' : 'plated') : null,
    digits: digits ? [Number(digits[1]), Number(digits[2])] : null,
    unit: words ? (words[1]!.toLowerCase() === 'inch' ? 'inch' : 'mm') : null,
    keeps: /suppress leading/i.test(all) ? 'trailing' : /suppress trailing/i.test(all) ? 'leading' : null
  }
}
