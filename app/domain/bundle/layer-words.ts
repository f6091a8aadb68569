import type { LayerSide } from './bundle-check.types'
import { role, type Role } from './layer-role'

/**
 * A name's words: lower case, apart where the capitals begin (`TopMask`), umlauts and accents written plainly, separators as blanks.
 */
export const wordsOf = (name: string): string =>
  name
    .replace(/([a-z0-9])([A-Z])/g, '$1 $2')
    .toLowerCase()
    .normalize('NFC')
    .replace(/[äöü]/g, (letter) => `${letter === 'ä' ? 'a' : letter === 'ö' ? 'o' : 'u'}e`)
    .replace(/ß/g, 'ss')
    .normalize('NFD')
    .replace(/[\u0300-\u036f]/g, '')
    .replace(/[^a-z0-9]+/g, ' ')
    .trim()

/** Words that say a side by themselves; `stop` and `back` within other words do not. */
const strongSide =
  /(?<![a-z])(?:top|front|component|upper|primary|oben|oberseite|dessus|superior)|(?<=copper|mask|paste|silk|layer|overlay|assembly)(?:top|front)|(?<bottom>(?<![a-z])(?:bot(?![a-z])|bottom|back(?!u)|lower|secondary|unten|unterseite|dessous|inferior|solder ?side)|(?<=copper|mask|paste|silk|layer|overlay|assembly)bot)/g
/** One letter before a word for a kind of layer, or standing alone. */
const letterBefore =
  /(?<![a-z])([ftb]) ?(?=(?:cu|mask|paste|silk|cream|stop|place|names|values|docu|copper|sold|res|fab|assy|adhes|court)[a-z]*)/
const loneLetter = /(?<![a-z])([ftb]|comp|sol)(?![a-z])/

/** The side that words stand for, the last one said: project names come first. */
function sideFromWords(words: string): LayerSide | null {
  const strong = [...words.matchAll(strongSide)].at(-1)
  if (strong) return strong.groups?.bottom ? 'bottom' : 'top'
  // German offices number the sides of a film: 0 for the top, 1 for the bottom.
  const film = /(?:^| )(?:stp|sieb|paste?) ?([01])(?: |$)/.exec(words)?.[1]
  if (film) return film === '0' ? 'top' : 'bottom'
  const letter = (letterBefore.exec(words) ?? loneLetter.exec(words))?.[1]
  return letter ? (letter.startsWith('b') || letter === 'sol' ? 'bottom' : 'top') : null
}

/** What kinds of layers are called, in the order in which they are asked: a paste mask is paste, a drill drawing is no drill file. */
const kinds: [RegExp, (side: LayerSide | null) => Role][] = [
  [
    /edge ?cuts?|outline|profile|board ?(edge|shape|cut|dim)|contour|boundary|umriss|kontur|(^| )dimension|mechanical/,
    () => role('outline')
  ],
  [/(^| )[fb] fab( |$)/, (side) => role('assembly', side)],
  [/(^| )fab(rication)?( |$)|dril?l ?(map|drawing|guide|table|chart)/, () => role('fabrication')],
  [
    /court ?yard|(^| )(margin|adhesive|adhes|glue|eco ?\d|(user|cmts|dwgs) ?(user|comments|drawings|eco ?\d|\d)?)( |$)/,
    (side) => role('other', side)
  ],
  [/(^| |top|bottom)(assy|assembly|asm)|bestueckungsplan/, (side) => role('assembly', side)],
  [/paste|stencil|cream/, (side) => role('paste', side)],
  [/mask|resist|stopp?(lack)?( |$)|loetstop|(^| )[tb]?stop|(^| )stp ?\d( |$)/, (side) => role('soldermask', side)],
  [
    /silk|legend|overlay|bestueckung|siebdruck|serigra|screen ?print|(^| )sieb ?\d( |$)|nomenclature|(^| )[tb]?place( |$)/,
    (side) => role('legend', side)
  ],
  [/(^| )npth|non ?plated|unplated|not ?plated|(bohr|drill)[a-z]* ndk( |$)|^ndk /, () => role('drill-nonplated')],
  [/(^| )pth( |$)|(^| )plated( |$)|(bohr|drill)[a-z]* dk( |$)|^dk /, () => role('drill-plated')],
  [/drill|(^| )(holes?|bohr[a-z]*|drl|percages?|taladros?)( |$)/, () => role('drill')]
]

const inner =
  /(?:^| )(?:in|inner|internal|intern|int|inr|mid|plane|pwr|gnd|innen|innenlage)(?: ?(?:layer|plane|lage|copper|cu|signal))? ?(\d{1,2})(?: |$)/
const plane = /^(?:gnd|ground|vcc|vdd|vee|vss|pwr|power|supply)(?: ?(?:plane|layer|cu|copper))?$/
const numbered = /(?:^| )(?:layer|l|copper|cu|lage|signal) ?(\d{1,2})(?: |$)/
const sideAlone =
  /(?:^| |copper|mask|paste|silk|layer)(?:top|front|bottom|bot|back|oben|unten|component|solder)(?: ?(?:side|layer|signal|l ?\d+))?$/

/**
 * The role that words in a name or title customarily stand for; null when they say nothing. English, with the German, French and Spanish
 * words that turn up (common practice, no source).
 */
export function roleFromWords(name: string): Role | null {
  const words = wordsOf(name)
  const side = sideFromWords(words)
  for (const [pattern, make] of kinds) if (pattern.test(words)) return make(side)
  const innerNumber = inner.exec(words)?.[1]
  if (innerNumber) return role('copper', 'inner', Number(innerNumber))
  if (/(^| )(intern(al)?|inner|innenlage)( |$)/.test(words) || plane.test(words)) return role('copper', 'inner')
  const group = /(?:^| )group ?(\d{1,2})(?: |$)/.exec(words)?.[1]
  if (group) return role('copper', null, Number(group))
  const layer = numbered.exec(words)?.[1]
  if (layer && !side) return role('copper', null, Number(layer))
  if (/copper|kupfer|cuivre|cobre|(^| )(cu|etch|traces|conductors?)( |$)/.test(words)) return role('copper', side)
  if (side && sideAlone.test(words)) return role('copper', side)
  return null
}
