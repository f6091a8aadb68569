/** Reading the SDK's errors, whose types say less than they carry. */

type Carried = {
  name?: string
  code?: string
  $metadata?: { httpStatusCode?: number }
  $response?: { headers?: Record<string, string> }
}

const carried = (error: unknown): Carried => (typeof error === 'object' && error !== null ? (error as Carried) : {})

/** HTTP status of the answer behind an error; undefined when there was none. */
export const errorStatus = (error: unknown): number | undefined => carried(error).$metadata?.httpStatusCode

/** A header of the answer behind an error. */
export const errorHeader = (error: unknown, name: string): string | undefined => carried(error).$response?.headers?.[name]

/** Whether the error has this S3 code. */
export const isNamed = (error: unknown, name: string): boolean => carried(error).name === name

const connectionCodes = ['ECONNRESET', 'ECONNREFUSED', 'EPIPE', 'ETIMEDOUT']

/** Whether another try may help: no answer in time, a broken connection, an overloaded or faulty server, a write that met another one. */
export function isPassing(error: unknown): boolean {
  const { name, code } = carried(error)
  const status = errorStatus(error)
  if (name === 'TimeoutError' || connectionCodes.includes(code ?? '')) return true
  if (isConflict(error) || name === 'RequestTimeout') return true
  return status !== undefined && (status >= 500 || status === 429) && status !== 501
}

/** Whether a conditional write met another one on the same key; the SDK does not repeat these. */
export const isConflict = (error: unknown): boolean =>
  isNamed(error, 'ConditionalRequestConflict') || isNamed(error, 'OperationAborted')
