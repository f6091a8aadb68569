import { stepArea, stepPath, type Run, type Scale, type Step } from './chart-geometry'

/** Where a run is drawn. */
export type Places = { x: Scale; y: Scale }

/** Narrower than this an undetermined stretch is drawn as a plain step, and a known one has no room for a band. */
const tooNarrow = 2

/** Where S is not determined as wide as it can be seen. */
const isOpen = ({ from, time }: Step, x: Scale) => from !== undefined && x(time) - x(from) >= tooNarrow

type Place = [x: number, ...levels: number[]]

/** The places of a run, cut where S is not determined. Each level holds from its place to the next. */
function pieces(run: Run, x: Scale, levelsOf: (step: Step) => number[]): Place[][] {
  const [first, ...steps] = run.steps
  const all: Place[][] = [[[x(first!.time), ...levelsOf(first!)]]]
  let levels = levelsOf(first!)
  for (const step of steps) {
    if (isOpen(step, x)) {
      all.at(-1)!.push([x(step.from!), ...levels])
      all.push([])
    } else if (step.since !== undefined) all.at(-1)!.push([x(step.since), ...levelsOf(step)])
    levels = levelsOf(step)
    all.at(-1)!.push([x(step.time), ...levels])
  }
  return all
}

/** The line of a run where S is known: level, then a fall. */
export const knownPath = (run: Run, { x, y }: Places): string =>
  pieces(run, x, (step) => [y(step.survival)])
    .map((places) => stepPath(places as [number, number][]))
    .join('')

/** The boxes in which S falls nobody knows where: from the last day and level known before to the first after. */
export const openBoxes = (run: Run, { x, y }: Places): { left: number; right: number; top: number; bottom: number }[] =>
  run.steps.flatMap((step, i) =>
    i > 0 && isOpen(step, x)
      ? [{ left: x(step.from!), right: x(step.time), top: y(run.steps[i - 1]!.survival), bottom: y(step.survival) }]
      : []
  )

const px = (n: number) => String(Math.round(n * 10) / 10)

export const boxPath = (boxes: ReturnType<typeof openBoxes>): string =>
  boxes.map((b) => `M${px(b.left)} ${px(b.top)}H${px(b.right)}V${px(b.bottom)}H${px(b.left)}Z`).join('')

/** Across the boxes, from the level before to the level after: joins what is known without claiming where it falls. */
export const slantPath = (boxes: ReturnType<typeof openBoxes>): string =>
  boxes.map((b) => `M${px(b.left)} ${px(b.top)}L${px(b.right)} ${px(b.bottom)}`).join('')

/** The band of a run where S and both limits are known: its area, its edges, and a whisker where the stretch is too short for an area. */
export function bandPaths(run: Run, { x, y }: Places): { area: string; edges: string } {
  const level = (share: number | null) => (share === null ? NaN : y(share))
  const stretches = pieces(run, x, (step) => [level(step.upper), level(step.lower)]).flatMap((piece, i) => known(piece, i > 0))
  let [area, edges] = ['', '']
  for (const places of stretches) {
    const [first, last] = [places[0]!, places.at(-1)!]
    if (last[0] - first[0] < tooNarrow) edges += `M${px(first[0])} ${px(last[1])}V${px(last[2])}`
    else {
      area += stepArea(places)
      edges += stepPath(places.map(([at, high]) => [at, high])) + stepPath(places.map(([at, , low]) => [at, low]))
    }
  }
  return { area, edges }
}

/**
 * The stretches of a piece that have both limits; the limits after its last place belong to no stretch that is drawn, unless it is all that
 * is known between two boxes.
 */
function known(piece: Place[], isAfterBox: boolean): [number, number, number][][] {
  const stretches: [number, number, number][][] = [[]]
  piece.forEach((place, i) => {
    const [at, high, low] = place as [number, number, number]
    const before = stretches.at(-1)!
    if (!Number.isNaN(high + low)) before.push([at, high, low])
    else if (before.length > 0) {
      before.push([at, before.at(-1)![1], before.at(-1)![2]])
      stretches.push([])
    }
    if (i === piece.length - 1 && before.length > 1 && before.at(-1)![0] === at)
      before[before.length - 1] = [at, before.at(-2)![1], before.at(-2)![2]]
  })
  return stretches.filter((s) => s.length > (isAfterBox ? 0 : 1))
}
