import type { FieldError } from '~/lib/domain-error'

const words = ['No field', 'One field', 'Two fields', 'Three fields', 'Four fields', 'Five fields', 'Six fields']

export type ErrorSummaryProps = {
  errors: FieldError[]
  /** What cannot be done yet: "this can be filed". */
  before: string
  /** The labels of the fields by their path; a message that says it all needs none. */
  labels?: Record<string, string>
  /** A field's element id when it is not its path. */
  idOf?: (path: string) => string
}

/** What is wrong in a form, summed up at its head with links to the fields. Nothing when nothing is wrong. */
export function ErrorSummary({ errors, before, labels = {}, idOf = (path) => path }: ErrorSummaryProps) {
  if (errors.length === 0) return null
  const fields = errors.filter((e) => e.path !== '')
  const count = words[fields.length] ?? `${fields.length} fields`
  return (
    <div className="sumerr" role="alert" id="errors" tabIndex={-1}>
      {errors
        .filter((e) => e.path === '')
        .map((e) => (
          <p key={e.message}>
            <b>{e.message}</b>
          </p>
        ))}
      {fields.length > 0 && (
        <>
          <p>
            <b>
              {count} to mend before {before}.
            </b>
          </p>
          <ul>
            {fields.map(({ path, message }) => (
              <li key={path}>
                <a href={`#${idOf(path)}`}>
                  {labels[path] ? `${labels[path]}: ` : ''}
                  {message}
                </a>
              </li>
            ))}
          </ul>
        </>
      )}
    </div>
  )
}
