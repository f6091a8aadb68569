import { describe, expect, it } from 'vitest'
import { readBody } from './read-body.server'

const post = (body: BodyInit | null, headers: Record<string, string> = {}) =>
  new Request('http://127.0.0.1/', {
    method: 'POST',
    body,
    headers: { 'Content-Type': 'application/json', ...headers },
    duplex: 'half'
  } as RequestInit)

/** A body without a length that says afterwards how much of it was asked for. */
function endless() {
  const state = { pulled: 0 }
  let cancel!: () => void
  const cancelled = new Promise<void>((resolve) => (cancel = resolve))
  const stream = new ReadableStream<Uint8Array>({
    pull(controller) {
      state.pulled += 65_536
      controller.enqueue(new Uint8Array(65_536))
    },
    cancel() {
      cancel()
    }
  })
  return { stream, state, cancelled }
}

describe('readBody', () => {
  it('reads the whole of a body within the limit', async () => {
    expect(
      new TextDecoder().decode(
        await readBody(post('{"a":1}', { 'Content-Type': 'Application/JSON; charset=utf-8' }), 'application/json', 100)
      )
    ).toBe('{"a":1}')
    expect((await readBody(post(null), 'application/json', 100)).byteLength).toBe(0)
    expect((await readBody(post('x'.repeat(100)), 'application/json', 100)).byteLength).toBe(100)
  })
  it('refuses past the limit, whatever length was declared, and lets go of a sender that does not stop', async () => {
    const { stream, state, cancelled } = endless()
    await expect(readBody(post(stream), 'application/json', 10_000)).rejects.toMatchObject({ kind: 'too-large' })
    await cancelled
    expect(state.pulled).toBeLessThan(65 * 1024 * 1024)
  })
  it('refuses a declared length before reading', async () => {
    const request = {
      headers: new Headers({ 'Content-Type': 'application/json', 'Content-Length': '101' }),
      body: null
    } as Request
    await expect(readBody(request, 'application/json', 100)).rejects.toMatchObject({ kind: 'too-large' })
  })
  it.each([[{ 'Content-Type': 'text/plain' }], [{ 'Content-Type': '' }], [{ 'Content-Encoding': 'gzip' }]])(
    'refuses %j',
    async (headers) => {
      await expect(readBody(post('{}', headers as Record<string, string>), 'application/json', 100)).rejects.toMatchObject({
        kind: 'wrong-type'
      })
    }
  )
})
