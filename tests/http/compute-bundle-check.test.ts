import { execFile } from 'node:child_process'
import { readdirSync, readFileSync } from 'node:fs'
import { connect } from 'node:net'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { demoBundle } from './bundles'
import { startSite, type Site } from './harness'

const at = (path: string) => fileURLToPath(new URL(`../../${path}`, import.meta.url))
const maxBytes = 300_000
const path = '/api/v1/compute/bundle-check'

let site: Site
beforeAll(async () => {
  site = await startSite({ env: { UPLOAD_MAX_BYTES: String(maxBytes) } })
})
afterAll(() => site?.close())

const inUploads = () => readdirSync(join(site.dataDir, 'uploads'))
afterEach(() => expect(inUploads()).toEqual([]))

type Send = { query?: string; type?: string; ip?: string } & Record<string, unknown>
const send = (body: BodyInit, { query = '', type = 'application/zip', ip, ...init }: Send = {}) =>
  site.browser(ip).fetch(path + query, { method: 'POST', body, headers: { 'Content-Type': type }, from: null, ...init })
const zip = (name: string) => new Uint8Array(demoBundle(name))

describe('POST /api/v1/compute/bundle-check', () => {
  it('answers what the command line answers, which is what the bundle’s own manifest says', async () => {
    const answer = await send(zip('buttress-1.1.0'), { query: '?layers=4&thickness=0.8' })
    expect(answer.status).toBe(200)
    expect(answer.headers.get('Content-Type')).toMatch(/^application\/json\b/)
    expect(answer.headers.get('Cache-Control')).toBe('no-store')
    const check = await answer.json()

    const file = at('db/seed/bundles/buttress-1.1.0.zip')
    const args = ['--import', 'tsx', at('app/cli/fettle.ts'), 'check', file, '--layers', '4', '--thickness', '0.8']
    const { stdout } = await promisify(execFile)(process.execPath, args, { cwd: at('.') })
    expect(check).toEqual(JSON.parse(stdout))

    // The manifest was written by the script that drew the board.
    const { facts, bundle } = JSON.parse(readFileSync(at('db/seed/manifests/buttress-1.1.0.json'), 'utf8'))
    expect(check).toMatchObject({
      ok: true,
      facts: {
        width: facts.widthMm,
        height: facts.heightMm,
        copperLayers: facts.copperLayers,
        minTrack: facts.minTrackMm,
        minHole: facts.minHoleMm,
        sha256: bundle.sha256
      }
    })
    expect(Object.keys(check).sort()).toEqual(['facts', 'findings', 'layers', 'ok'])
  })

  it('compares with what is declared', async () => {
    const codes = async (query: string) =>
      (await (await send(zip('buttress-1.1.0'), { query })).json()).findings.map((f: { code: string }) => f.code)
    expect(await codes('?layers=2')).toContain('layer-count')
    expect(await codes('?thickness=3.2')).toContain('thickness-conflict')
  })

  it.each([
    ['plain text', 'this is no zip'],
    ['nothing', ''],
    ['a page', '<!doctype html><title>Sign in first</title>']
  ])('checks what is no zip, and stops at that: %s', async (_what, body) => {
    const answer = await send(body)
    expect(answer.status).toBe(200)
    expect(await answer.json()).toMatchObject({ ok: false, findings: [{ code: 'zip-unreadable', severity: 'stop' }] })
  })

  it.each(['text/plain', 'multipart/form-data; boundary=x', 'application/x-zip-compressed', 'application/json'])(
    'refuses the type %s',
    async (type) => {
      const answer = await send('PK', { type })
      expect([answer.status, answer.headers.get('Content-Type')]).toEqual([415, 'application/problem+json'])
      expect(await answer.json()).toMatchObject({ status: 415, detail: expect.stringContaining('application/zip') })
    }
  )

  it('refuses a body that is packed once more', async () => {
    const body = { method: 'POST', body: 'PK', headers: { 'Content-Type': 'application/zip', 'Content-Encoding': 'gzip' } }
    expect((await site.browser().fetch(path, { ...body, from: null })).status).toBe(415)
  })

  it.each([
    ['?layers=two', 'layers'],
    ['?thickness=0', 'thickness'],
    ['?layers=4&layers=4', 'layers'],
    ['?layer=4', 'layer']
  ])('refuses %s at its path, before the zip is read', async (query, name) => {
    const answer = await send(zip('almanac-1.0.0'), { query })
    expect([answer.status, answer.headers.get('Content-Type')]).toEqual([400, 'application/problem+json'])
    expect(await answer.json()).toMatchObject({ status: 400, errors: [{ path: name }] })
  })

  it('refuses what announces too much', async () => {
    const answer = await send(new Uint8Array(maxBytes + 1))
    expect([answer.status, answer.headers.get('Content-Type')]).toEqual([413, 'application/problem+json'])
    expect(await answer.json()).toMatchObject({ status: 413, detail: expect.stringContaining('292 KiB') })
  })

  it('takes a zip of exactly the limit, and counts while it reads what announces nothing', async () => {
    expect((await send(new Uint8Array(maxBytes))).status).toBe(200)
    let sent = 0
    const piece = new Uint8Array(50_000)
    const body = new ReadableStream<Uint8Array>({
      pull(controller) {
        if (sent >= 40 * piece.length) return controller.close()
        sent += piece.length
        controller.enqueue(piece)
      }
    })
    expect((await send(body, { duplex: 'half' })).status).toBe(413)
  })

  it('does not read for ever from a sender who never ends', async () => {
    const { socket, answer } = raw(`Transfer-Encoding: chunked`)
    const piece = Buffer.concat([Buffer.from('4000\r\n'), Buffer.alloc(0x4000), Buffer.from('\r\n')])
    const closed = new Promise<void>((resolve) => socket.once('close', () => resolve()))
    const more = () => {
      while (!socket.destroyed && socket.write(piece));
    }
    socket.on('drain', more)
    more()
    await expect.poll(answer, { timeout: 10_000 }).toContain('HTTP/1.1 413 ')
    await closed
  })

  it('keeps nothing of a caller who leaves half-way, and lets nobody hold more than two places', async () => {
    const callers = [raw('Content-Length: 200000'), raw('Content-Length: 200000')]
    for (const { socket } of callers) socket.write(Buffer.alloc(50_000))
    await expect.poll(inUploads, { timeout: 10_000 }).toHaveLength(2)
    const third = await send(zip('almanac-1.0.0'), { ip: callers[0]!.ip })
    expect([third.status, third.headers.get('Content-Type')]).toEqual([429, 'application/problem+json'])
    expect((await send(zip('almanac-1.0.0'))).status).toBe(200)
    for (const { socket } of callers) socket.destroy()
    await expect.poll(inUploads, { timeout: 10_000 }).toEqual([])
    await expect
      .poll(async () => (await send(zip('almanac-1.0.0'), { ip: callers[0]!.ip })).status, { timeout: 10_000 })
      .toBe(200)
  })

  it('keeps nothing of a caller who leaves while the check runs', async () => {
    const bundle = demoBundle('buttress-2.0.0')
    const { socket } = raw(`Content-Length: ${bundle.length}`)
    socket.write(bundle)
    await expect.poll(inUploads, { timeout: 10_000, interval: 5 }).toHaveLength(1)
    socket.destroy()
    await expect.poll(inUploads, { timeout: 10_000 }).toEqual([])
  })

  it('answers GET with what is allowed', async () => {
    const answer = await site.browser().fetch(path)
    expect([answer.status, answer.headers.get('Allow')]).toEqual([405, 'POST'])
  })

  it('leaves no more in storage than was there, and nothing of ours in the log', async () => {
    expect(await site.query((db) => db.selectFrom('staged_objects').selectAll().execute())).toEqual([])
    expect(site.log()).not.toContain('"level":"error"')
  })
})

/** A caller that writes its body by hand; all of them come from one place. */
function raw(length: string) {
  const { hostname, port } = new URL(site.url)
  const ip = '192.0.2.31'
  const socket = connect(Number(port), hostname)
  let text = ''
  socket.on('data', (part: Buffer) => (text += part.toString('latin1')))
  socket.on('error', () => socket.destroy())
  socket.write(
    `POST ${path} HTTP/1.1\r\nHost: ${hostname}:${port}\r\nX-Forwarded-For: ${ip}\r\n` +
      `Content-Type: application/zip\r\n${length}\r\n\r\n`
  )
  return { socket, ip, answer: () => text }
}
