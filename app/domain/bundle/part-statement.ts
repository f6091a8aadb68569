import type { PartKind } from './part-reading.types'
import {
  percent,
  picofarads,
  readDielectricWord,
  readRatingWord,
  readToleranceLetter,
  readValueWord,
  scaled,
  type Tolerance
} from './part-quantity'
import { readSizeWord } from './part-size'
import { foldPartText, partWords } from './part-text'

/** All that one text says about a part; several entries where it says several things. */
export type PartStatement = {
  value: number[]
  tolerance: Tolerance[]
  voltage: number[]
  dielectric: string[]
  size: string[]
  esr: number[]
  power: number[]
  current: number[]
  /** Why something that looks like a value was not taken for one. */
  doubts: string[]
}

const emptyStatement = (): PartStatement => ({
  value: [],
  tolerance: [],
  voltage: [],
  dielectric: [],
  size: [],
  esr: [],
  power: [],
  current: [],
  doubts: []
})

/** Reads one text about a part of a kind. Every figure must stand in the text with its unit; a bare one counts only at its start. */
export function readPartStatement(text: string, kind: PartKind): PartStatement {
  const said = emptyStatement()
  const rest = takePhrases(foldPartText(text), kind, said)
  const words = partWords(rest)
  const letters: string[] = []
  let bare: { value: number; tolerance: Tolerance | null } | null = null
  let isStart = true
  words.forEach((word, i) => {
    const size = readSizeWord(word)
    const dielectric = kind === 'capacitor' ? readDielectricWord(word) : null
    if (size) said.size.push(size)
    else if (dielectric) said.dielectric.push(dielectric)
    else {
      const quantity = readRatingWord(word, kind) ?? readValueWord(word, kind)
      if (quantity?.of === 'value' && quantity.isBare) {
        if (isStart && words[i + 1] !== '-') bare = quantity
        isStart = false
      } else if (quantity?.of === 'value') {
        said.value.push(quantity.value)
        if (quantity.tolerance) said.tolerance.push(quantity.tolerance)
      } else if (quantity?.of === 'tolerance') said.tolerance.push(quantity.tolerance)
      else if (quantity) said[quantity.of].push(quantity.value)
      else {
        if (/^[A-Z]$/.test(word) && i > 0) letters.push(word)
        noteDoubt(word, kind, said.doubts)
      }
    }
    if (!/^[A-Za-z]+$/.test(word)) isStart = false
  })
  if (bare && said.value.length === 0) {
    const { value, tolerance } = bare as { value: number; tolerance: Tolerance | null }
    said.value.push(value)
    if (tolerance) said.tolerance.push(tolerance)
  }
  const [value] = said.value
  if (value !== undefined && said.tolerance.length === 0)
    for (const letter of letters) {
      const tolerance = readToleranceLetter(letter, kind, value)
      if (tolerance) said.tolerance.push(tolerance)
    }
  return said
}

const number = String.raw`(\d{1,6}(?:\.\d{1,6})?|\.\d{1,6})`
const temperature =
  /[+-]?\d{1,3} ?(?:°|deg)? ?C? ?(?:\.{2,3}|…|~|to) ?[+-]?\d{1,3} ?(?:°|deg)? ?C(?![A-Za-z0-9])|(?<![\w.])[+-]?\d{2,3} ?(?:°|deg)? ?C(?![A-Za-z0-9])/g
const drift = /±? ?\d{1,4} ?ppm(?: ?\/ ?(?:°|deg)? ?[CK])?/gi
const condition = /@ ?\d{1,6}(?:\.\d{1,6})? ?(?:[kMGmu]?Hz|°C|[mu]?A|V|%)/gi
const wattFraction = /(?<![\d./])([1-9]\d?)\/([1-9]\d{0,2}) ?W(?![A-Za-z0-9])/g
const pair = new RegExp(`([+-]) ?${number} ?%? ?[/,]? ?([+-]) ?${number} ?%`, 'g')
const both = new RegExp(`± ?${number} ?(%|pF)`, 'gi')
const oneSided = new RegExp(`(?:^|(?<= ))[+-] ?${number} ?%`, 'g')
const series = new RegExp(`(?<![A-Za-z])ESR ?[=:<≤]? ?${number}(?:(m)[RΩ]?|[RΩ])(?![A-Za-z0-9])`, 'gi')
const thousands = /(?<![\w.])\d{1,3} \d{3} ?(?:[unpkKMRFHΩ])(?!\w*\d)/

// What spans several words is taken first and leaves a blank.
function takePhrases(folded: string, kind: PartKind, said: PartStatement): string {
  let text = folded.replace(temperature, ' ').replace(drift, ' ').replace(condition, ' ')
  text = text.replace(wattFraction, (_, above: string, below: string) => {
    said.power.push(Number(above) / Number(below))
    return ' '
  })
  text = text.replace(pair, (whole, sign: string, one: string, otherSign: string, other: string) => {
    if (sign === otherSign) return whole
    const [low, high] = sign === '-' ? [one, other] : [other, one]
    said.tolerance.push({ low: scaled(`-${low}`, -2), high: scaled(high!, -2), isAbsolute: false })
    return ' '
  })
  text = text.replace(both, (_, figure: string, unit: string) => {
    said.tolerance.push(
      unit === '%'
        ? { ...percent(-Number(figure), Number(figure)), low: -scaled(figure, -2), high: scaled(figure, -2) }
        : picofarads(figure)
    )
    return ' '
  })
  text = text.replace(oneSided, (whole) => {
    said.doubts.push(`${whole.trim()} states only one side of a tolerance.`)
    return ' '
  })
  if (kind === 'capacitor')
    text = text.replace(series, (_, figure: string, milli: string | undefined) => {
      said.esr.push(scaled(figure, milli ? -3 : 0))
      return ' '
    })
  if (thousands.test(text)) {
    said.doubts.push('A figure is parted by a blank: it may be one number or two.')
    text = text.replace(thousands, '?')
  }
  return text
}

function noteDoubt(word: string, kind: PartKind, doubts: string[]) {
  if (doubts.length >= 4) return
  if (/\d\?\d/.test(word)) doubts.push(`${word.replace('?', ',')} may mean a decimal comma or thousands.`)
  else if (/M\?Ω/.test(word)) doubts.push('MOHM may mean milliohms or megohms.')
  else if (/^-\d/.test(word)) doubts.push(`${word} is negative.`)
  else if (/^\d+[x×*]\d/i.test(word)) doubts.push(`${word} names several values in one part.`)
  else if (kind !== 'resistor' && /^[\d.]+$/.test(word)) doubts.push(`${word} has no unit.`)
  else if ((kind === 'capacitor' || kind === 'inductor') && /^\d+(\.\d+)?M[FH]?$/.test(word))
    doubts.push(`${word}: M means a million, which no ${kind} has.`)
  else if (kind === 'inductor' && /^\d*R\d+[A-Z]?$/.test(word))
    doubts.push(`${word}: R stands for the point of ohms, not of henries.`)
}
