/**
 * A reproducible source of uniform numbers in [0, 1) with 32 random bits each: the generator xoshiro128** of D. Blackman and S. Vigna (ACM Transactions on
 * Mathematical Software 47, 2021), its state filled from the seed by a multiplicative hash.
 *
 * @param seed any number; equal seeds give equal sequences
 */
export function seededRandom(seed: number): () => number {
  let filler = Math.trunc(seed) >>> 0
  const word = () => {
    filler = (filler + 0x9e3779b9) >>> 0
    let x = filler
    x = Math.imul(x ^ (x >>> 16), 0x85ebca6b)
    x = Math.imul(x ^ (x >>> 13), 0xc2b2ae35)
    return (x ^ (x >>> 16)) >>> 0
  }
  let [a, b, c, d] = [word(), word(), word(), word() | 1]
  const rotate = (x: number, k: number) => ((x << k) | (x >>> (32 - k))) >>> 0
  return () => {
    const result = Math.imul(rotate(Math.imul(b, 5) >>> 0, 7), 9) >>> 0
    const shifted = (b << 9) >>> 0
    c = (c ^ a) >>> 0
    d = (d ^ b) >>> 0
    b = (b ^ c) >>> 0
    a = (a ^ d) >>> 0
    c = (c ^ shifted) >>> 0
    d = rotate(d, 11)
    return result / 4294967296
  }
}
