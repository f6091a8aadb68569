import type { ReactNode } from 'react'
import { FieldMessage } from './field'

export type Choice = {
  value: string
  label: ReactNode
  /** A second, softer line; of a disabled choice its reason. */
  note?: ReactNode
  isDisabled?: boolean
}

export type ChoiceProps = {
  name: string
  /** The question. */
  legend: ReactNode
  hint?: ReactNode
  error?: string
  choices: Choice[]
  /** One of several, or any of several. */
  kind?: 'one' | 'any'
  /** What is chosen on arrival. */
  chosen?: string | string[]
  isRequired?: boolean
  id?: string
}

function Group({
  id,
  legend,
  hint,
  error,
  kind,
  children
}: Omit<ChoiceProps, 'choices' | 'name'> & { id: string; children: ReactNode }) {
  const describedBy = [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ') || undefined
  const isOne = kind !== 'any'
  return (
    <fieldset
      className={error ? 'bad' : undefined}
      role={isOne ? 'radiogroup' : undefined}
      aria-invalid={isOne && error ? true : undefined}
      aria-describedby={describedBy}
    >
      <legend>{legend}</legend>
      {hint && (
        <span className="hint" id={`${id}-hint`}>
          {hint}
        </span>
      )}
      {children}
      {error && <FieldMessage id={`${id}-error`}>{error}</FieldMessage>}
    </fieldset>
  )
}

/** The first control carries the group's id, so that an error summary leads to it. */
const controls = ({ choices, kind = 'one', chosen, name, id = name, isRequired, error }: ChoiceProps) =>
  choices.map(({ value, isDisabled }, i) => ({
    type: kind === 'one' ? 'radio' : 'checkbox',
    name,
    value,
    id: i === 0 ? id : `${id}-${i + 1}`,
    defaultChecked: Array.isArray(chosen) ? chosen.includes(value) : chosen === value,
    disabled: isDisabled,
    required: kind === 'one' && isRequired ? true : undefined,
    'aria-invalid': kind === 'any' && error ? (true as const) : undefined
  }))

/** Choices as ruled rows, 52 px each; the chosen one has wash, a petrol edge, and is bold. */
export function ChoiceRows(props: ChoiceProps) {
  const inputs = controls(props)
  return (
    <Group {...props} id={props.id ?? props.name}>
      <ul className="opts">
        {props.choices.map(({ value, label, note }, i) => (
          <li key={value}>
            <label className="opt">
              <input {...inputs[i]} />
              <span>
                {label} {note && <small>{note}</small>}
              </span>
            </label>
          </li>
        ))}
      </ul>
    </Group>
  )
}

/** Choices that are short codes, in a grid: console revisions. `isWords` leaves room for a word or two. */
export function ChoiceGrid({ isWords, ...props }: ChoiceProps & { isWords?: boolean }) {
  const inputs = controls(props)
  return (
    <Group {...props} id={props.id ?? props.name}>
      <div className={isWords ? 'revs words' : 'revs'}>
        {props.choices.map(({ value, label }, i) => (
          <label key={value}>
            <input {...inputs[i]} />
            <span>{label}</span>
          </label>
        ))}
      </div>
    </Group>
  )
}

/** One thing to say yes to. */
export function CheckLine({
  name,
  label,
  note,
  isChecked,
  value = 'on'
}: {
  name: string
  label: ReactNode
  note?: ReactNode
  isChecked?: boolean
  value?: string
}) {
  return (
    <label className="opt max-w-[560px] border-y border-hair">
      <input type="checkbox" name={name} id={name} value={value} defaultChecked={isChecked} />
      <span>
        {label} {note && <small>{note}</small>}
      </span>
    </label>
  )
}
