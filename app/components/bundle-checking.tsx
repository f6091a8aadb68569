import { CheckSteps } from './progress'

export type CheckStepName = { step: string; name: string }

/** How far storing and checking a bundle has come, step by step. */
export function BundleChecking({ isStored, step, steps }: { isStored: boolean; step: string | null; steps: CheckStepName[] }) {
  /* The child process takes a moment to begin with the first step. */
  const at = isStored
    ? Math.max(
        0,
        steps.findIndex((s) => s.step === step)
      )
    : -1
  const state = (i: number) => (i < at ? 'done' : i === at ? 'now' : 'waiting')
  return (
    <div role="status">
      <CheckSteps
        steps={[
          { label: 'Store the bundle', state: isStored ? 'done' : 'now' },
          ...steps.map(({ name }, i) => ({ label: name, state: state(i) as 'done' | 'now' | 'waiting' }))
        ]}
        hint="20 seconds at most. You can leave; the draft keeps the result."
      />
    </div>
  )
}
