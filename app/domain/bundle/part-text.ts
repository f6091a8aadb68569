import { isSizeCode } from './part-size'

/** The longest text of a part that is read; longer ones are no values. */
export const longestPartText = 500

const separators = /[\s/;,:()[\]{}"_|]+/

/**
 * One spelling for what is written in several ways: `u` for micro (U+00B5, U+03BC), `Ω` for ohm (U+2126, U+03A9 and the word), a point for
 * a decimal comma, `±` for `+/-`, one blank for any space, and a number joined to the unit behind a blank. Ambiguous figures keep their
 * comma or get a `?`, so that nothing reads them.
 */
export function foldPartText(text: string): string {
  return text
    .replace(/[\s\u00a0\u2000-\u200b\u202f\u3000]+/g, ' ')
    .replace(/[\u00b5\u03bc]/g, 'u')
    .replace(/[\u2126\u03a9]/g, 'Ω')
    .replace(/[\u2010-\u2015\u2212]/g, '-')
    .replace(/\+ ?\/? ?-/g, '±')
    .replace(/(?<![\d.,A-Za-z])(\d{1,5}),(\d{1,9})(?![\d,])/g, decimalComma)
    .replace(/(?<![A-Za-z])MOHMS?(?![A-Za-z])|(?<=\d)MOHMS?(?![A-Za-z])/g, 'M?Ω')
    .replace(/(?<=[\d .](?:meg|[kmgtur])? ?)ohms?(?![a-z])/gi, 'Ω')
    .replace(/(?<=\d[kKmMGTuR]?) Ω/g, 'Ω')
    .replace(/(\d{4}) Metric/gi, '$1Metric')
    .replace(
      /(?<![\w.%])(\d{1,6}(?:\.\d{1,6})?|\.\d{1,6}) ((?:[pnumkKMGUNP]?[FHWAVΩ]|[pnumkKMGUNPR]|[kMG]?Hz|VDC|VAC|pf|nf|uf|%)(?![\w%]))/g,
      joinUnit
    )
}

// Three digits behind a comma may be thousands as well, unless a nought stands before it.
function decimalComma(whole: string, before: string, after: string): string {
  if (isSizeCode(before)) return `${before} ${after}`
  if (after.length === 3 && !before.startsWith('0')) return whole.replace(',', '?')
  return `${before}.${after}`
}

const joinUnit = (whole: string, figure: string, unit: string) => (isSizeCode(figure) ? whole : figure + unit)

/** The words of a folded text. A hyphen between words stands as a word of its own. */
export function partWords(folded: string): string[] {
  return folded
    .replace(/(?<=[A-Za-z0-9%Ω])-(?=[A-Za-z0-9.])/g, ' - ')
    .split(separators)
    .map((word) => word.replace(/[.']+$/, ''))
    .filter((word) => word !== '')
}
