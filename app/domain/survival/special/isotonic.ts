/**
 * The nondecreasing values nearest to `values` in weighted least squares, none below `least`: neighbours out of order are pooled at their mean.
 *
 * Source: R. E. Barlow, D. J. Bartholomew, J. M. Bremner and H. D. Brunk, Statistical Inference under Order Restrictions (Wiley 1972), section 1.2.
 *
 * @param weight of each value, > 0
 */
export function isotonic(values: ArrayLike<number>, weight: ArrayLike<number>, least = -Infinity): Float64Array {
  const size = values.length
  const mean = new Float64Array(size)
  const total = new Float64Array(size)
  const end = new Int32Array(size)
  let pools = 0
  for (let i = 0; i < size; i++) {
    mean[pools] = values[i]!
    total[pools] = weight[i]!
    end[pools] = i + 1
    while (pools > 0 && mean[pools - 1]! >= mean[pools]!) {
      const sum = total[pools - 1]! + total[pools]!
      mean[pools - 1]! += (total[pools]! / sum) * (mean[pools]! - mean[pools - 1]!)
      total[pools - 1] = sum
      end[pools - 1] = i + 1
      pools--
    }
    pools++
  }
  const fitted = new Float64Array(size)
  for (let pool = 0; pool < pools; pool++) fitted.fill(Math.max(least, mean[pool]!), pool === 0 ? 0 : end[pool - 1]!, end[pool]!)
  return fitted
}
