import { statusOf, type DomainError, type ErrorKind, type FieldError } from './domain-error'

/** RFC 9457 problem details, as the API and the command line answer bad input. */
export type Problem = { type: string; title: string; status: number; detail: string; errors: FieldError[] }

const titles: Record<ErrorKind, string> = {
  invalid: 'The input is not valid',
  unauthenticated: 'Sign in first',
  forbidden: 'Not allowed',
  'not-found': 'Not found',
  conflict: 'In conflict with what is stored',
  'too-large': 'Too large',
  'wrong-type': 'Wrong media type',
  impossible: 'Well-formed, but impossible',
  'rate-limited': 'Too many requests',
  unavailable: 'Not possible just now'
}

/** Turns an expected failure into the object that carries it. `type` is a relative reference, resolved against the site. */
export function problemOf(error: DomainError): Problem {
  return {
    type: `/guides/problems#${error.kind}`,
    title: titles[error.kind],
    status: statusOf[error.kind],
    detail: error.message,
    errors: error.errors
  }
}
