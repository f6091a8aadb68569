import { DomainError } from '~/lib/domain-error'

/**
 * Reads a request's body into memory, counting while it reads: the declared length is not trusted, and nothing is read past the limit.
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
      await reader.cancel()
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
