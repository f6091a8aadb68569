import type { ComponentProps, ReactNode } from 'react'
import { FieldMessage, fieldWiring } from './field'
import { PlusSign } from './signs'

export type FileFieldProps = Omit<ComponentProps<'input'>, 'type' | 'style' | 'className' | 'name' | 'id'> & {
  name: string
  /** "Choose the bundle". */
  label: ReactNode
  /** What may be chosen, and how large. */
  hint?: ReactNode
  error?: string
  id?: string
}

/** A place to choose a file or to drop one; the whole outline is the target. */
export function FileField({ name, label, hint, error, id = name, ...rest }: FileFieldProps) {
  return (
    <div className={error ? 'field bad' : 'field'}>
      <label className="add">
        <input {...rest} type="file" name={name} id={id} {...fieldWiring(id, undefined, error)} />
        <PlusSign />
        <span>
          <b>{label}</b>
          {hint && <small>{hint}</small>}
        </span>
      </label>
      {error && <FieldMessage id={`${id}-error`}>{error}</FieldMessage>}
    </div>
  )
}
