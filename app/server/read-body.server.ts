import { DomainError } from '~/lib/domain-error'
import { log, logError } from './log.server'

const lingerBytes = 64 * 1024 * 1024
const lingerMs = 5_000

/** Reads and forgets what a refused sender still sends, for a while: cut off at once, it would see a broken connection and no answer. */
async function forget(reader: ReadableStreamDefaultReader<Uint8Array>): Promise<void> {
  const stop = () => reader.cancel().catch((error: unknown) => logError('body-cancel-failed', error))
  const timer = setTimeout(stop, lingerMs)
  try {
    for (let seen = 0; seen <= lingerBytes;) {
      const { done, value } = await reader.read()
      if (done) return
      seen += value.byteLength
    }
    await stop()
  } catch (error) {
    // The sender has gone, and with it the need for an answer.
    log('info', 'body-broken-off', { message: error instanceof Error ? error.message : String(error) })
  } finally {
    clearTimeout(timer)
  }
}

/**
 * Reads a request's body into memory, counting while it reads: the declared length is not trusted, and nothing past the limit is kept.
 * @param type the media type that the body must have
 * @throws DomainError `wrong-type`, `too-large`
 */
export async function readBody(request: Request, type: string, maxBytes: number): Promise<ArrayBuffer> {
  const given = request.headers.get('Content-Type')?.split(';')[0]!.trim().toLowerCase() ?? ''
  if (given !== type) throw new DomainError('wrong-type', `Send it as ${type}${given === '' ? '' : `, not as ${given}`}.`)
  const encoding = request.headers.get('Content-Encoding') ?? 'identity'
  if (encoding.toLowerCase() !== 'identity')
    throw new DomainError('wrong-type', 'Send it uncompressed, without Content-Encoding.')
  const tooLarge = () => new DomainError('too-large', `The body may have ${maxBytes / 1024 / 1024} MiB at most.`)
  if (Number(request.headers.get('Content-Length') ?? '0') > maxBytes) throw tooLarge()
  if (request.body === null) return new ArrayBuffer(0)

  const chunks: Uint8Array[] = []
  let size = 0
  const reader = request.body.getReader()
  for (;;) {
    const { done, value } = await reader.read()
    if (done) break
    size += value.byteLength
    if (size > maxBytes) {
      void forget(reader)
      throw tooLarge()
    }
    chunks.push(value)
  }
  const whole = new Uint8Array(size)
  let at = 0
  for (const chunk of chunks) {
    whole.set(chunk, at)
    at += chunk.byteLength
  }
  return whole.buffer
}
