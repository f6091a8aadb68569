/** One thing that is claimed, and what was measured; smaller is better. */
export type Claim = { claim: string; measured: number; limit: number }

/** The middle value; of an even number the upper of the two. NaN of none. */
export const median = (values: readonly number[]): number =>
  [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN
