import { DomainError } from '~/lib/domain-error'
import { computeSurvival } from './compute-survival'
import { parseSurvivalText } from './compute-survival.schema'

/**
 * The answer of `POST /api/v1/compute/survival` as JSON text, from the body as it came. Runs in the worker.
 * @throws DomainError `invalid`, `impossible`
 */
export function survivalAnswer(body: ArrayBuffer): string {
  return JSON.stringify(computeSurvival(parseSurvivalText(textOf(body))))
}

function textOf(body: ArrayBuffer): string {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(body)
  } catch (error) {
    if (error instanceof TypeError)
      throw new DomainError('invalid', 'The body is not UTF-8 text.', [{ path: '', message: 'Not UTF-8' }])
    throw error
  }
}
