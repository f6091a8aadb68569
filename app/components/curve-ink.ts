/** The inks of curves, four and two more for causes: told apart by dash and direct label first, hue second. Class names are whole, so that they are found. */
export type CurveInk = { stroke: string; dash: string | undefined; textClass: string }

export const curveInks: readonly CurveInk[] = [
  { stroke: 'var(--color-curve-1)', dash: undefined, textClass: 'fill-curve-1' },
  { stroke: 'var(--color-curve-2)', dash: '9 4', textClass: 'fill-curve-2' },
  { stroke: 'var(--color-curve-3)', dash: '2 4', textClass: 'fill-curve-3' },
  { stroke: 'var(--color-curve-4)', dash: '9 3 2 3', textClass: 'fill-curve-4' },
  { stroke: 'var(--color-curve-3)', dash: '16 4', textClass: 'fill-curve-3' },
  { stroke: 'var(--color-curve-2)', dash: '5 3 1.5 3 1.5 3', textClass: 'fill-curve-2' }
]
