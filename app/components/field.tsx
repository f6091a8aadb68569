import type { ComponentProps, ReactNode } from 'react'
import { ErrorSign } from './signs'

type Common = {
  name: string
  label: ReactNode
  hint?: ReactNode
  /** What is wrong and what would be right. */
  error?: string
  /** Says so at the label; the field stays required without a star. */
  isOptional?: boolean
  /** As wide as the column. */
  isLong?: boolean
  /** The element's id; the field's name when absent. Error summaries link to it. */
  id?: string
}

type Native<T extends 'input' | 'select' | 'textarea'> = Omit<ComponentProps<T>, 'style' | 'className' | 'name' | 'id'>

/** What ties a control to its hint and its error. */
export const fieldWiring = (id: string, hint: unknown, error: string | undefined) => ({
  'aria-describedby': [hint ? `${id}-hint` : '', error ? `${id}-error` : ''].filter(Boolean).join(' ') || undefined,
  'aria-invalid': error ? (true as const) : undefined
})

export function FieldMessage({ id, children }: { id?: string; children: ReactNode }) {
  return (
    <p className="err" id={id}>
      <ErrorSign />
      <span>{children}</span>
    </p>
  )
}

function Frame({
  id,
  label,
  hint,
  error,
  isOptional,
  isLong,
  children
}: Omit<Common, 'name'> & { id: string; children: ReactNode }) {
  return (
    <div className={['field', error && 'bad', isLong && 'long'].filter(Boolean).join(' ')}>
      <label htmlFor={id}>
        {label}
        {isOptional && <span className="soft font-normal"> (may stay empty)</span>}
      </label>
      {hint && (
        <span className="hint" id={`${id}-hint`}>
          {hint}
        </span>
      )}
      {children}
      {error && <FieldMessage id={`${id}-error`}>{error}</FieldMessage>}
    </div>
  )
}

const split = <P extends Common>({ name, label, hint, error, isOptional, isLong, id, ...rest }: P) => ({
  frame: { id: id ?? name, label, hint, error, isOptional, isLong },
  control: { name, id: id ?? name, ...fieldWiring(id ?? name, hint, error), ...rest }
})

export type TextFieldProps = Common &
  Native<'input'> & {
    /** Inside the field, at its right: V, mm, boards. */
    unit?: string
    /** A button beside the field, "Scan". */
    beside?: ReactNode
  }

/** Label, hint, one line to fill in, and what is wrong with it. */
export function TextField({ unit, beside, ...props }: TextFieldProps) {
  const { frame, control } = split(props)
  const input = <input {...control} />
  return (
    <Frame {...frame}>
      {unit ? (
        <div className="unit">
          {input}
          <span>{unit}</span>
        </div>
      ) : beside ? (
        <div className="with">
          {input}
          {beside}
        </div>
      ) : (
        input
      )}
    </Frame>
  )
}

export function TextArea(props: Common & Native<'textarea'>) {
  const { frame, control } = split(props)
  return (
    <Frame {...frame}>
      <textarea {...control} />
    </Frame>
  )
}

export type SelectOption = { value: string; label: string; isDisabled?: boolean }
/** Options under a heading of their own. */
export type SelectGroup = { heading: string; options: SelectOption[] }

export function SelectField({
  options,
  empty,
  ...props
}: Common & Native<'select'> & { options: (SelectOption | SelectGroup)[]; empty?: string }) {
  const { frame, control } = split(props)
  return (
    <Frame {...frame}>
      <select {...control}>
        {empty !== undefined && <option value="">{empty}</option>}
        <SelectOptions options={options} />
      </select>
    </Frame>
  )
}

export function SelectOptions({ options }: { options: (SelectOption | SelectGroup)[] }) {
  return options.map((entry) =>
    'heading' in entry ? (
      <optgroup key={entry.heading} label={entry.heading}>
        <SelectOptions options={entry.options} />
      </optgroup>
    ) : (
      <option key={entry.value} value={entry.value} disabled={entry.isDisabled}>
        {entry.label}
      </option>
    )
  )
}
