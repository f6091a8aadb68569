/** What can go wrong in a use case. Pages and API turn each kind into HTTP in one place (`server/problem.server.ts`). */
export type ErrorKind =
  | 'invalid'
  | 'unauthenticated'
  | 'forbidden'
  | 'not-found'
  | 'conflict'
  | 'too-large'
  | 'wrong-type'
  | 'impossible'
  | 'rate-limited'
  | 'unavailable'

/** A message for one field of the input; `path` is dotted (`observations.3.time`), empty for the whole. */
export type FieldError = { path: string; message: string }

/** HTTP status of each kind. */
export const statusOf: Record<ErrorKind, number> = {
  invalid: 400,
  unauthenticated: 401,
  forbidden: 403,
  'not-found': 404,
  conflict: 409,
  'too-large': 413,
  'wrong-type': 415,
  impossible: 422,
  'rate-limited': 429,
  unavailable: 503
}

/** An expected failure whose message is meant for the person who asked. Anything else that is thrown is a defect. */
export class DomainError extends Error {
  readonly kind: ErrorKind
  readonly errors: FieldError[]

  constructor(kind: ErrorKind, message: string, errors: FieldError[] = []) {
    super(message)
    this.name = 'DomainError'
    this.kind = kind
    this.errors = errors
  }
}
