import { CheckSteps } from './progress'

export type CheckStepName = { step: string; name: string }

/** How far taking in and checking a bundle has come, step by step. */
export function BundleChecking({
  isReceived,
  step,
  steps,
  again
}: {
  isReceived: boolean
  step: string | null
  steps: CheckStepName[]
  /** The page to load again where no script asks how far it is. */
  again: string
}) {
  /* The child process takes a moment to begin with the first step. */
  const at = isReceived
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
          { label: 'Take in the file', state: isReceived ? 'done' : 'now' },
          ...steps.map(({ name }, i) => ({ label: name, state: state(i) as 'done' | 'now' | 'waiting' }))
        ]}
        hint="Mostly a few seconds. You can leave; the draft keeps the result."
      />
      <noscript>
        <p className="mt-3">
          <a href={again}>Load this page again</a> to see how far it is.
        </p>
      </noscript>
    </div>
  )
}
