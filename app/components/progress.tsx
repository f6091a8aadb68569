import type { ReactNode } from 'react'
import { DottedSign, NowSign, StopSign, TickSign } from './signs'

export type UploadScaleProps = {
  /** "Uploading buttress-2.1.0.zip". */
  label: string
  /** With bytes and percent: "118 of 197 kB, 60 %". */
  detail: string
  /** 0 to 1. */
  share: number
}

/** A scale that fills. */
export function UploadScale({ label, detail, share }: UploadScaleProps) {
  const filled = Math.min(1, Math.max(0, share))
  return (
    <div className="prog">
      <p className="pl">
        <span>{label}</span>
        <span>{detail}</span>
      </p>
      <svg
        viewBox="0 0 560 30"
        preserveAspectRatio="none"
        role="progressbar"
        aria-label={`${label}, ${detail}`}
        aria-valuemin={0}
        aria-valuemax={100}
        aria-valuenow={Math.floor(filled * 100)}
      >
        <rect x=".75" y=".75" width="558.5" height="13.5" className="ln" strokeWidth="1.5" />
        <rect x="3.5" y="3.5" width={(553 * filled).toFixed(1)} height="8" fill="var(--color-petrol)" />
        {Array.from({ length: 11 }, (_, i) => (
          <path key={i} className="ln" strokeWidth="1" d={`M${(1 + i * 55.8).toFixed(1)} 15v${i % 5 === 0 ? 10 : 5}`} />
        ))}
      </svg>
    </div>
  )
}

export type CheckStepState = 'done' | 'now' | 'waiting' | 'cut-off'
export type CheckStep = { label: ReactNode; detail?: ReactNode; state: CheckStepState }

const stepClass: Record<CheckStepState, string> = { done: 'is-done', now: 'is-now', waiting: 'is-wait', 'cut-off': 'is-cut' }
const stepWord: Record<CheckStepState, string> = { done: 'done', now: 'now', waiting: 'waiting', 'cut-off': 'cut off' }

function StepSign({ state }: { state: CheckStepState }) {
  if (state === 'done') return <TickSign />
  if (state === 'now') return <NowSign />
  if (state === 'cut-off') return <StopSign size={20} />
  return <DottedSign size={20} />
}

/** A check as a list of steps: tick done, quarter ring now, dotted ring waiting, octagon cut off. */
export function CheckSteps({ steps, hint }: { steps: CheckStep[]; hint?: ReactNode }) {
  return (
    <>
      <ol className="chk">
        {steps.map(({ label, detail, state }, i) => (
          <li key={i} className={stepClass[state]} aria-current={state === 'now' ? 'step' : undefined}>
            <StepSign state={state} />
            <span>{label}</span>
            <span className="st">
              {detail ?? stepWord[state]}
              {detail && <span className="vh"> ({stepWord[state]})</span>}
            </span>
          </li>
        ))}
      </ol>
      {hint && <p className="hint">{hint}</p>}
    </>
  )
}
