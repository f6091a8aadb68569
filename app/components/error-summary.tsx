import { useEffect, useRef } from 'react'
import type { FieldError } from '~/lib/domain-error'
import { jumpWithin } from '~/lib/jump-within'

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

/**
 * What is wrong in a form, summed up at its head with links to the fields. Nothing when nothing is wrong. With scripts it takes the focus
 * whenever the form comes back. While it stands, links within the page move the focus themselves: to the router they would be
 * navigations, and a navigation forgets what the form was answered.
 */
export function ErrorSummary({ errors, before, labels = {}, idOf = (path) => path }: ErrorSummaryProps) {
  const box = useRef<HTMLDivElement>(null)
  const told = errors.map((e) => `${e.path} ${e.message}`).join('\n')
  useEffect(() => box.current?.focus(), [errors, told])
  useEffect(() => {
    if (told === '') return
    document.addEventListener('click', jumpWithin, true)
    return () => document.removeEventListener('click', jumpWithin, true)
  }, [told])
  if (errors.length === 0) return null
  const fields = errors.filter((e) => e.path !== '')
  const count = words[fields.length] ?? `${fields.length} fields`
  return (
    <div className="sumerr" role="alert" id="errors" tabIndex={-1} ref={box}>
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
