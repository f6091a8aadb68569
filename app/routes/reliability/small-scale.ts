import { axisFloor, visibleRuns } from '~/components/chart-geometry'
import type { ShownGroup } from './page-figures'

/** One scale for the small curves of a table: to the last day of any, down to under the lowest of all. */
export function smallScale(groups: readonly Pick<ShownGroup, 'points'>[]): { lastDay: number; floor: number } {
  const steps = groups.flatMap((g) => visibleRuns(g.points).flatMap((run) => run.steps))
  return {
    lastDay: Math.max(1, ...steps.map((step) => step.time)),
    floor: Math.min(60, axisFloor(Math.min(1, ...steps.map((step) => step.survival))))
  }
}
