import type { BundleCheck, CheckStep, DeclaredDetails } from './bundle-check.types'
import type { CheckLimits } from './limits'

/** What the server tells the child that checks a bundle. */
export type ChildOrder = { path: string; declared: DeclaredDetails; limits: CheckLimits }

/** What the child reports back, in this order: steps, then the answer. */
export type ChildMessage = { kind: 'step'; step: CheckStep } | { kind: 'checked'; check: BundleCheck }
