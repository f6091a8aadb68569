import type { LayerFunction, LayerSide } from './bundle-check.types'

/** What something says about a file's role; `index` numbers copper layers, or orders them where only the order is known. */
export type Role = { function: LayerFunction; side: LayerSide | null; index: number | null }

export const role = (fn: LayerFunction, side: LayerSide | null = null, index: number | null = null): Role => ({
  function: fn,
  side,
  index
})
