/** A curve of more rows is thinned, to two rows in each of at most half as many stretches: one for each four pixels or so of the wide drawing. */
const enough = 300

/**
 * A row of a step curve as a drawing carries it. `from`: S is not determined after this time and before the row's own. `since`: rows between this
 * time and the row's own were left out; the line is drawn at the row's level from there on, so that a fall is never drawn later than it was.
 */
export type ThinRow = { time: number; censored?: number; from?: number; since?: number }

/**
 * Curves that are drawn together, each with at most about 300 rows: time is cut into equal stretches `grain` long (1, 2 or 5 times a power of ten)
 * and at the times `exactAt`, and of each stretch the first and the last row are kept, as they are. The value, limits and risk set in force at every multiple of
 * `grain` and at every time of `exactAt` are therefore those of the whole curve. Units censored at a row left out are counted at the last one of its stretch. `grain` is null
 * where nothing had to be left out. Linear in the rows.
 */
export function thinPoints<Row extends ThinRow>(
  curves: readonly Row[][],
  exactAt: readonly number[] = []
): { curves: Row[][]; grain: number | null } {
  const longest = Math.max(0, ...curves.map((curve) => curve.at(-1)?.time ?? 0))
  if (!(longest > 0) || !curves.some((curve) => curve.length > enough)) return { curves: [...curves], grain: null }
  const grain = roundUp(longest / (enough / 2))
  const cuts = [...exactAt].sort((a, b) => a - b)
  return { curves: curves.map((curve) => (curve.length > enough ? thin(curve, grain, cuts) : curve)), grain }
}

/** The next of 1, 2 and 5 times a power of ten. */
function roundUp(width: number): number {
  const power = 10 ** Math.floor(Math.log10(width))
  return [1, 2, 5, 10].map((n) => n * power).find((n) => n >= width * (1 - 1e-12))!
}

/** The k for which k grain <= time < (k + 1) grain, as these products are rounded. */
function stretchOf(time: number, grain: number): number {
  const k = Math.floor(time / grain)
  return k * grain > time ? k - 1 : (k + 1) * grain <= time ? k + 1 : k
}

function thin<Row extends ThinRow>(curve: Row[], grain: number, cuts: number[]): Row[] {
  const kept: Row[] = []
  let [cut, stretch] = [0, -1]
  let first: Row | null = null
  let last: Row | null = null
  let [left, censored, isOpen] = [0, 0, false]
  const close = () => {
    if (last === null || last === first) return
    const since = left === 0 ? {} : isOpen ? { from: first!.time } : { since: first!.time }
    kept.push({ ...last, ...(last.censored === undefined ? {} : { censored: last.censored + censored }), ...since })
  }
  for (const row of curve) {
    const before = cut
    while (cut < cuts.length && cuts[cut]! < row.time) cut++
    const at = stretchOf(row.time, grain)
    if (at !== stretch || cut !== before) {
      close()
      kept.push(row)
      stretch = at
      first = last = row
      ;[left, censored, isOpen] = [0, 0, false]
      continue
    }
    if (last !== first) {
      left++
      censored += last!.censored ?? 0
    }
    isOpen ||= row.from !== undefined
    last = row
  }
  close()
  return kept
}
