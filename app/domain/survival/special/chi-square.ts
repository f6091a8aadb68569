import { incompleteGamma } from './gamma'
import { gammaQuantile } from './gamma-quantile'

/** P(X > x) of the chi-square distribution, with full relative accuracy in the tail. */
export const chiSquareUpperTail = (x: number, degreesOfFreedom: number): number =>
  incompleteGamma(degreesOfFreedom / 2, x / 2).upper

/** The x with P(X <= x) = p of the chi-square distribution. */
export const chiSquareQuantile = (p: number, degreesOfFreedom: number): number => 2 * gammaQuantile(p, degreesOfFreedom / 2)
