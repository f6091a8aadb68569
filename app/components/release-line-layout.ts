import { dayNumber } from '~/lib/dates'

/** The lying release line: places in pixels of a drawing 1088 wide. */
export const line = { first: 118, today: 989, y: 58, width: 1088 }

export type LineRelease = {
  version: string
  state: 'trial' | 'released' | 'withdrawn'
  /** The day it was published. */
  on: string
  boardRevision: string
  href: string
}

/** Days to places: the first release and today are fixed, at least a month apart. */
export function timeScale(firstOn: string, today: string): (day: string) => number {
  const start = dayNumber(firstOn)
  const span = Math.max(30, dayNumber(today) - start)
  return (day) => Math.round((line.first + ((dayNumber(day) - start) / span) * (line.today - line.first)) * 100) / 100
}

export type YearMark = { x: number; kind: 'year' | 'quarter' | 'month'; label?: string }

/** Month marks between the line's start and today; years carry their number. */
export function yearMarks(firstOn: string, today: string): YearMark[] {
  const at = timeScale(firstOn, today)
  const marks: YearMark[] = []
  let [year, month] = [Number(firstOn.slice(0, 4)) - 5, 1]
  for (;;) {
    const day = `${year}-${String(month).padStart(2, '0')}-01`
    const x = at(day)
    if (x > line.today - 2) return marks
    if (x >= 2)
      marks.push({
        x,
        kind: month === 1 ? 'year' : month % 3 === 1 ? 'quarter' : 'month',
        label: month === 1 ? String(year) : undefined
      })
    month = month === 12 ? 1 : month + 1
    if (month === 1) year += 1
  }
}

export type NamePlace = { anchor: 'start' | 'end'; row: 0 | 1 } | null

/** About the room that a release's name (16 px, bold) and the line below it (14 px) need. */
export const nameRoom = (version: string, below: string): number => Math.max(version.length * 8.8, below.length * 6.4) + 10

/**
 * Where each name stands: right of its dot, or left of it when its right neighbour is near, or one row down; null where there is no
 * room left, then only the dot is drawn.
 */
export function namePlaces(names: readonly { x: number; room: number }[]): NamePlace[] {
  const taken: [number, number][][] = [[], []]
  return names.map(({ x, room }, i) => {
    const next = names[i + 1]?.x ?? Infinity
    const sides = next - x >= room ? (['start', 'end'] as const) : (['end', 'start'] as const)
    for (const row of [0, 1] as const)
      for (const anchor of sides) {
        const [from, to] = anchor === 'start' ? [x - 5, x - 5 + room] : [x + 5 - room, x + 5]
        const isFree = from >= 0 && to <= line.width && taken[row]!.every(([a, b]) => to <= a || from >= b)
        if (!isFree) continue
        taken[row]!.push([from, to])
        return { anchor, row }
      }
    return null
  })
}

/** Board revisions as stretches from their first release to the next revision's. */
export function revisionStretches(
  releases: readonly LineRelease[],
  today: string
): { revision: string; from: string; to: string; isOpen: boolean }[] {
  const firsts = releases.filter((r, i) => i === 0 || r.boardRevision !== releases[i - 1]!.boardRevision)
  return firsts.map((r, i) => ({
    revision: r.boardRevision,
    from: r.on,
    to: firsts[i + 1]?.on ?? today,
    isOpen: i === firsts.length - 1
  }))
}
