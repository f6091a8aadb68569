import type { BundleCheck, BundleRecord, CheckStep, DeclaredDetails } from './bundle-check.types'
import type { DrawnPart } from './drawn-part'
import type { CheckLimits } from './limits'

/** What the server tells the child that checks a bundle. */
export type ChildOrder = { path: string; declared: DeclaredDetails; limits: CheckLimits; withPictures: boolean }

/**
 * What the child reports back, in this order: steps, the answer, the parts of the pictures when asked for; then that it is free for the next order, with
 * the memory that it holds.
 */
export type ChildMessage =
  | { kind: 'step'; step: CheckStep }
  | { kind: 'checked'; check: BundleCheck; record: BundleRecord | null }
  | { kind: 'drawn'; part: DrawnPart }
  | { kind: 'free'; residentBytes: number }
