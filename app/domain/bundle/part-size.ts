/** Sizes of chip parts by their code in inches (EIA), with the same size's metric code. */
const metricOf = new Map([
  ['01005', '0402'],
  ['0201', '0603'],
  ['0402', '1005'],
  ['0603', '1608'],
  ['0805', '2012'],
  ['1008', '2520'],
  ['1206', '3216'],
  ['1210', '3225'],
  ['1806', '4516'],
  ['1808', '4520'],
  ['1812', '4532'],
  ['1825', '4564'],
  ['2010', '5025'],
  ['2220', '5750'],
  ['2225', '5764'],
  ['2512', '6332']
])
const inchOf = new Map([...metricOf].map(([inch, metric]) => [metric, inch]))
inchOf.set('6432', '2512').set('2125', '0805')

/** Whether four or five digits are a size code in inches. */
export const isSizeCode = (digits: string): boolean => metricOf.has(digits)

/** The size that one word of a value names: `0603`, `R0603`, `SMD0603`, `1608M`, `1608Metric`; null when it names none. */
export function readSizeWord(word: string): string | null {
  const metric = /^(\d{4})M(?:etric)?$/i.exec(word)
  if (metric) return inchOf.get(metric[1]!) ?? null
  const inch = /^(?:[CRL]|FB|SMD|SMT|SM|CAP|RES|IND)?(\d{4,5})(?:[CRL]|inch)?$/i.exec(word)
  return inch && metricOf.has(inch[1]!) ? inch[1]! : null
}

/**
 * The size codes in inches that a footprint's name holds, each once: `C_0603_1608Metric`, `0603`, `R0603`, and the metric ones of land
 * pattern names (`CAPC1608X90N`, after IPC-7351). Names of moulded cases (`EIA-3216-18`) name none.
 */
export function readFootprintSizes(footprint: string): string[] {
  const text = footprint.slice(0, 200).replace(/EIA[-_ ]?\d{4}(?:[-_ ]\d{1,2})?/gi, ' ')
  const found = new Set<string>()
  for (const match of text.matchAll(/(?<![\d.]|\d[x×])(\d{4,5})(?![\d.])/gi)) {
    const [digits] = match
    const before = text.slice(0, match.index)
    const after = text.slice(match.index + digits.length)
    if (/(?:^|[^a-z])(?:cap|res|ind|bead|fuse|dio|led|var)[a-z]{0,3}$/i.test(before.slice(-9)) && /^x\d/i.test(after))
      addMetric(found, digits)
    else if (/^[-_ ]?M(?:etric)?(?![a-z])/i.test(after)) addMetric(found, digits)
    else if (metricOf.has(digits)) found.add(digits)
    // Metric codes that no size in inches bears.
    else addMetric(found, digits)
  }
  return [...found]
}

function addMetric(found: Set<string>, digits: string) {
  const inch = inchOf.get(digits)
  if (inch) found.add(inch)
}
