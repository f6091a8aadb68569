import type { BundleCheck, BundlePictures, CheckStep, DeclaredDetails } from './bundle-check.types'
import type { CheckLimits } from './limits'

/** What the server tells the child that checks a bundle. */
export type ChildOrder = { path: string; declared: DeclaredDetails; limits: CheckLimits; withPictures: boolean }

/**
 * What the child reports back, in this order: steps, the answer, the pictures when asked for; then that it is free for the next order, with
 * the memory that it holds.
 */
export type ChildMessage =
  | { kind: 'step'; step: CheckStep }
  | { kind: 'checked'; check: BundleCheck }
  | { kind: 'drawn'; pictures: BundlePictures | null }
  | { kind: 'free'; residentBytes: number }
