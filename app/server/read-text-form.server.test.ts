import { describe, expect, it } from 'vitest'
import type { FormValues } from '~/lib/parse-form'
import { readTextForm } from './read-text-form.server'

const boundary = 'frontier7'
const part = (name: string, value: string, file = '') =>
  `--${boundary}\r\nContent-Disposition: form-data; name="${name}"${file && `; filename="${file}"`}\r\n\r\n${value}\r\n`
const end = `--${boundary}--\r\n`
const limits = { fileBytes: 1000, fieldBytes: 100 }

/** A request whose body comes in these pieces; an Error among them breaks it off there. */
function read(pieces: (string | Error)[], values: FormValues = {}, type = `multipart/form-data; boundary=${boundary}`) {
  let i = 0
  const body = new ReadableStream<Uint8Array>({
    pull(controller) {
      const piece = pieces[i++]
      if (piece === undefined) controller.close()
      else if (piece instanceof Error) controller.error(piece)
      else controller.enqueue(Buffer.from(piece))
    }
  })
  const init = { method: 'POST', body, duplex: 'half', headers: { 'Content-Type': type } }
  return readTextForm(new Request('http://localhost/x', init as RequestInit), 'file', limits, values)
}

describe('readTextForm', () => {
  it('gives fields and file, of exactly the limits, whatever the pieces', async () => {
    const whole = part('data', 'å'.repeat(50)) + part('file', 'x'.repeat(1000), 'a.csv') + part('tau', '5') + end
    const { values, file } = await read([whole.slice(0, 90), whole.slice(90, 700), whole.slice(700)])
    expect(values).toEqual({ data: 'å'.repeat(50), tau: '5' })
    expect(Buffer.from(file!).toString()).toBe('x'.repeat(1000))
  })

  it('a file that was not chosen is none', async () => {
    expect((await read([part('data', 'x'), part('file', '', 'a.csv'), end])).file).toBeNull()
  })

  it.each<[string, (string | Error)[], string, string | undefined]>([
    ['a file past the limit', [part('tau', '5'), part('file', 'x'.repeat(1001), 'a.csv'), end], 'too-large', 'file'],
    ['a field past the limit', [part('tau', '5'), part('data', 'x'.repeat(101)), end], 'too-large', 'data'],
    [
      'a body without end',
      [part('tau', '5'), ...Array.from({ length: 40 }, () => part('other', 'x'.repeat(4096), 'b'))],
      'too-large',
      'file'
    ],
    ['one cut in the file', [part('tau', '5'), part('file', 'x', 'a.csv').slice(0, -3)], 'invalid', undefined]
  ])('refuses %s, and keeps the fields that came', async (_, pieces, kind, path) => {
    const values: FormValues = {}
    await expect(read(pieces, values)).rejects.toMatchObject({ name: 'DomainError', kind, errors: path ? [{ path }] : [] })
    expect(values).toEqual({ tau: '5' })
  })

  it('refuses one whose sender goes away', async () => {
    const pieces = [part('file', 'x', 'a.csv'), new Error('aborted')]
    await expect(read(pieces)).rejects.toMatchObject({ name: 'DomainError', kind: 'invalid' })
  })

  it('refuses a form without a boundary', async () => {
    await expect(read([end], {}, 'multipart/form-data')).rejects.toMatchObject({ kind: 'invalid' })
  })
})
