/**
 * The root of an increasing function within a bracket, by Newton's steps that fall back to halving whenever they would leave the bracket.
 *
 * @param f value and slope at x; f(low) <= 0 <= f(high)
 * @param start a first guess inside
 * @returns x to about the last bit
 */
export function findRoot(f: (x: number) => { value: number; slope: number }, low: number, high: number, start: number): number {
  let x = start
  for (let i = 0; i < 400; i++) {
    const { value, slope } = f(x)
    if (value === 0) return x
    if (value < 0) low = x
    else high = x
    let next = x - value / slope
    // A bracket over many powers of ten is halved on the logarithmic scale.
    if (!(next > low && next < high)) next = low > 0 && high / low > 4 ? Math.sqrt(low) * Math.sqrt(high) : low + (high - low) / 2
    if (Math.abs(next - x) <= 4e-16 * Math.abs(x) || next === low || next === high) return next
    x = next
  }
  return x
}
