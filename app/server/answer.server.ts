import { data, redirect } from 'react-router'
import { DomainError, statusOf, type FieldError } from '~/lib/domain-error'
import type { FormValues } from '~/lib/parse-form'
import { problemOf } from '~/lib/problem'

/** What an action gives back when a form cannot be taken: the messages at their fields, and everything as it was entered. */
export type FormAnswer = { errors: FieldError[]; values: FormValues }

const signInPath = (url: URL) => `/sign-in?return=${encodeURIComponent(url.pathname + url.search)}`

function asHttp(url: URL, error: DomainError): never {
  if (error.kind === 'unauthenticated') throw redirect(signInPath(url))
  throw data({ message: error.message }, { status: statusOf[error.kind] })
}

/**
 * Runs the work of a loader or action and turns an expected failure into HTTP: a visitor is sent to sign in and back, everything else
 * shows in the error boundary under its status. Pass the `url` of the arguments (not `request.url`, which is the data request's).
 */
export async function answerPage<T>(url: URL, work: () => Promise<T>): Promise<T> {
  try {
    return await work()
  } catch (error) {
    if (error instanceof DomainError) asHttp(url, error)
    throw error
  }
}

/** The answer to a form that was not taken; a message without a field stands at path ''. */
export const formAnswer = (errors: FieldError[], values: FormValues, status = 400) =>
  data<FormAnswer>({ errors, values }, { status })

/** As `answerPage`, for the action of a form: what the person can mend comes back to the filled-in form. */
export async function answerForm<T>(url: URL, values: FormValues, work: () => Promise<T>) {
  try {
    return await work()
  } catch (error) {
    if (!(error instanceof DomainError)) throw error
    if (['unauthenticated', 'forbidden', 'not-found'].includes(error.kind)) asHttp(url, error)
    return formAnswer(
      error.errors.length > 0 ? error.errors : [{ path: '', message: error.message }],
      values,
      statusOf[error.kind]
    )
  }
}

/** An API answer as JSON; expected failures as problem details (RFC 9457). */
export async function answerApi(work: () => Promise<unknown>, headers: Record<string, string> = {}): Promise<Response> {
  try {
    const body = await work()
    return body instanceof Response ? body : Response.json(body, { headers })
  } catch (error) {
    if (!(error instanceof DomainError)) throw error
    return Response.json(problemOf(error), {
      status: statusOf[error.kind],
      headers: { 'Content-Type': 'application/problem+json' }
    })
  }
}
