import { readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { connect } from 'node:net'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { FindingCode } from '~/domain/bundle/finding-codes'
import { defaultLimits } from '~/domain/bundle/limits'
import { objectsOfRelease } from '~/domain/releases/store-pictures.server'
import { demoFiles, zipOf } from '../factories/demo-bundle'
import { rawZip } from '../factories/raw-zip'
import type { Browser } from './browser'
import { addConsole, boardForm, demoBundle, upload } from './bundles'
import { startSite, type Site } from './harness'

const mib = 1024 * 1024
const api = '/api/v1/compute/bundle-check'
const draft = '/boards/buttress/releases/1.0.0'

const fixture = (name: string) => readFileSync(fileURLToPath(new URL(`../fixtures/bundles/${name}.zip`, import.meta.url)))
const layer = { name: 'board/top.gbr', data: 'G04 top*\nM02*\n' }
const top = 'gerber/almanac-F_Cu.gbr'

/** A clean bundle with one file changed; a change that changes nothing is a mistake of the test. */
async function changed(path: string, change: (text: string) => string): Promise<Buffer> {
  const files = await demoFiles('almanac-1.0.1')
  const before = files.get(path)!.toString('latin1')
  if (change(before) === before) throw new Error(`${path} stays as it is`)
  return zipOf(files.set(path, Buffer.from(change(before))))
}

const more = (text: string, commands: string) => text.replace('M02*', `${commands}M02*`)
/** Blocks D900 to D911, each of ten flashes of the one before: 10^12 objects. */
const nested = Array.from({ length: 12 }, (_, i) => `%ABD${900 + i}*%\nD${i ? 899 + i : 10}*\n${'X0Y0D03*\n'.repeat(10)}%AB*%\n`)

/** What is sent, and what it must be told. A refused zip is not kept; one whose layers are bombs is a zip like another. */
const sets: [name: string, code: FindingCode, isRefused: boolean, make: () => Buffer | Promise<Buffer>][] = [
  ['a ratio bomb', 'zip-too-large', true, () => rawZip([{ name: 'top.gbr', data: Buffer.alloc(60 * mib) }])],
  ['600 MiB that say they are 1,000 bytes', 'zip-too-large', true, () => fixture('OB62-zip-bomb-lying-size')],
  ['200 entries that overlap, 2.4 GB', 'zip-too-large', true, () => fixture('OB63-zip-bomb-overlap')],
  ['4,000 entries that share a record, 4 GB', 'zip-too-large', true, () => fixture('OB64-zip-bomb-shared-entry')],
  ['zips in zips', 'zip-nested', true, () => fixture('OB65-zip-bomb-nested')],
  ['an encrypted zip', 'zip-encrypted', true, () => rawZip([{ ...layer, flags: 0x801 }])],
  ['a link', 'zip-link', true, () => rawZip([layer, { name: 'link.gbr', data: '/etc/passwd', mode: 0o120777 }])],
  ['a parent path', 'zip-path-unsafe', true, () => rawZip([layer, { ...layer, name: '../../fettle.sqlite' }])],
  ['no zip', 'zip-unreadable', true, () => Buffer.from('<!doctype html><title>Sign in first</title>')],
  [
    'a million draws by step and repeat',
    'layer-too-complex',
    false,
    () => changed(top, (text) => more(text, '%SRX1000Y1000I0.01J0.01*%\nD10*\nX0Y0D02*\nX1000Y0D01*\n%SR*%\n'))
  ],
  ['10^12 nested blocks', 'layer-too-complex', false, () => changed(top, (t) => more(t, `${nested.join('')}D911*\nX0Y0D03*\n`))],
  [
    '10^8 holes by repeat',
    'drill-too-complex',
    false,
    () => changed('drill/almanac-PTH.drl', (text) => text.replace('M30', 'R99999999X0.01\nM30'))
  ]
]

let site: Site
let owner: Browser
beforeAll(async () => {
  site = await startSite()
  await site.query(addConsole)
  owner = await site.signInByGithub('vigga')
  await owner.fetch('/boards/new', { form: boardForm })
  await owner.fetch('/boards/buttress/releases/new', { form: { version: '1.0.0', boardRevision: 'A' } })
})
afterAll(() => site?.close())

const inUploads = () => readdirSync(join(site.dataDir, 'uploads'))
const row = () =>
  site.query((db) => db.selectFrom('releases').selectAll().where('version', '=', '1.0.0').executeTakeFirstOrThrow())
const sendToApi = (zip: Buffer) =>
  site.browser().fetch(api, {
    method: 'POST',
    body: new Uint8Array(zip),
    headers: { 'Content-Type': 'application/zip' },
    from: null
  })
/** Of the server's process, in bytes, as Linux counts them. */
const memory = (field: 'VmRSS' | 'VmHWM') =>
  Number(new RegExp(`${field}:\\s+(\\d+) kB`).exec(readFileSync(`/proc/${site.pid}/status`, 'utf8'))![1]) * 1024

/** Every object in storage is one that a release refers to, or that waits to be swept. */
async function expectNothingLeft(): Promise<void> {
  expect(inUploads()).toEqual([])
  const known = await site.query(async (db) => {
    const releases = await db.selectFrom('releases').selectAll().execute()
    const staged = await db.selectFrom('staged_objects').select('object_key').execute()
    const referred = await Promise.all(releases.map((release) => objectsOfRelease(db, release)))
    return new Set([...referred.flat(), ...staged.map((one) => one.object_key)])
  })
  expect((await site.storedKeys()).filter((key) => !known.has(key))).toEqual([])
}

describe('hostile bundles', () => {
  type Told = { status: number; codes: string[]; ok?: boolean }
  const byApi = new Map<string, Told>()
  const onDraft = new Map<string, Told & { bundle: string | null; state: string }>()
  const others: number[] = []
  /** What came into storage with a zip that was refused. */
  const storedOfRefused: string[] = []
  let growth = 0

  beforeAll(async () => {
    const zips = new Map<string, Buffer>()
    for (const [name, , , make] of sets) zips.set(name, await make())
    expect((await upload(owner, draft, demoBundle('almanac-1.0.1'), { isScript: true })).status).toBe(200)
    expect((await sendToApi(demoBundle('almanac-1.0.1'))).status).toBe(200)
    // From here on the highest that the server's memory has been counts anew.
    writeFileSync(`/proc/${site.pid}/clear_refs`, '5')
    const before = memory('VmRSS')

    let isOver = false
    const visit = async () => {
      const visitor = site.browser()
      while (!isOver)
        for (const path of ['/', '/boards', '/boards/buttress', '/health']) {
          const answer = await visitor.fetch(path)
          others.push(answer.status)
          await answer.arrayBuffer()
          await new Promise((resolve) => setTimeout(resolve, 50))
        }
    }
    const sendAllToApi = () =>
      Promise.all(
        sets.map(async ([name]) => {
          const answer = await sendToApi(zips.get(name)!)
          const { findings, ok } = (await answer.json()) as { findings: { code: string }[]; ok: boolean }
          byApi.set(name, { status: answer.status, codes: findings.map((f) => f.code), ok })
        })
      )
    const sendAllToDraft = async () => {
      for (const [name, , isRefused] of sets) {
        const before = await site.storedKeys()
        const { status } = await upload(owner, draft, zips.get(name)!, { isScript: true })
        const { id, bundle_sha256: bundle, check_state: state } = await row()
        const findings = await site.query((db) =>
          db.selectFrom('findings').select('code').where('release_id', '=', id).where('severity', '=', 'stop').execute()
        )
        onDraft.set(name, { status, codes: findings.map((f) => f.code), bundle, state })
        if (isRefused) storedOfRefused.push(...(await site.storedKeys()).filter((key) => !before.includes(key)))
      }
    }
    const visiting = visit()
    try {
      await Promise.all([sendAllToApi(), sendAllToDraft()])
    } finally {
      isOver = true
      await visiting
    }
    growth = memory('VmHWM') - before
  })

  it.each(sets)('%s: told by the API and on the draft (%s)', (name, code, isRefused) => {
    const told = byApi.get(name)!
    expect([told.status, told.ok]).toEqual([200, false])
    expect(told.codes).toContain(code)
    expect(onDraft.get(name)).toMatchObject({ status: 200, codes: [code], state: 'done' })
    expect(onDraft.get(name)!.bundle === null).toBe(isRefused)
  })

  it('hurt no other request', () => {
    expect(others.length).toBeGreaterThan(0)
    expect(others.filter((status) => status !== 200)).toEqual([])
    expect(site.log()).not.toContain('"level":"error"')
  })

  it('do not show in the server’s memory: less than a quarter of what one zip may unpack to, where they unpack to gigabytes', () => {
    // What it does grow by is the heap that some hundred requests leave to the collector.
    expect(growth).toBeLessThan(defaultLimits.totalBytes / 4)
  })

  it('leave nothing: no upload, and in storage only what a release refers to or the sweep knows', async () => {
    await expectNothingLeft()
    expect(storedOfRefused).toEqual([])
  })
})

/** A sender that writes its request by hand and can leave. */
function send(path: string, head: string, body: Buffer, length = body.length) {
  const { hostname, port } = new URL(site.url)
  const socket = connect(Number(port), hostname)
  socket.on('error', () => socket.destroy())
  socket.write(`POST ${path} HTTP/1.1\r\nHost: ${hostname}:${port}\r\n${head}Content-Length: ${length}\r\n\r\n`)
  socket.write(body)
  return socket
}

function sendToDraft(zip: Buffer, missing = 0) {
  const cookie = [...owner.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  const head = `Origin: ${site.url}\r\nCookie: ${cookie}\r\nContent-Type: multipart/form-data; boundary=x\r\n`
  const part = `--x\r\nContent-Disposition: form-data; name="bundle"; filename="a.zip"\r\n\r\n`
  const body = Buffer.concat([Buffer.from(part), zip, Buffer.from('\r\n--x--\r\n')])
  return send(`${draft}/bundle`, head, body.subarray(0, body.length - missing), body.length)
}

/** The processes that the server started, and the time that one has used so far, in the kernel's ticks. */
const children = () => readFileSync(`/proc/${site.pid}/task/${site.pid}/children`, 'utf8').split(' ').filter(Boolean)
const ticks = (pid: string) => {
  const fields = readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ')[1]!.split(' ')
  return Number(fields[11]) + Number(fields[12])
}

describe('senders who leave', () => {
  const poll = { timeout: 15_000, interval: 10 }
  const good = demoBundle('buttress-2.0.0')

  it('in the middle of an upload to a draft: nothing is kept, and the next upload works', async () => {
    const before = await row()
    const socket = sendToDraft(good, 10_000)
    await expect.poll(inUploads, poll).toHaveLength(1)
    socket.destroy()
    await expect.poll(inUploads, poll).toEqual([])
    expect((await upload(owner, draft, good, { isScript: true })).status).toBe(200)
    expect(before.check_state).toBe('done')
    expect(await row()).toMatchObject({ check_state: 'done', bundle_bytes: good.length })
    await expectNothingLeft()
  })

  it('while their draft is checked: the check ends and is kept, for the file came whole', async () => {
    const other = demoBundle('buttress-1.0.0')
    const socket = sendToDraft(other)
    await expect.poll(async () => (await row()).check_state, poll).toBe('running')
    socket.destroy()
    await expect.poll(async () => (await row()).check_state, poll).toBe('done')
    expect(await row()).toMatchObject({ bundle_bytes: other.length })
    await expect.poll(inUploads, poll).toEqual([])
    const phase = async () => (await owner.fetch(`${draft}/check`)).json()
    await expect.poll(phase, poll).toEqual({ phase: 'none', step: null })
    expect((await upload(owner, draft, good, { isScript: true })).status).toBe(200)
    expect(await row()).toMatchObject({ check_state: 'done', bundle_bytes: good.length })
    await expectNothingLeft()
  })

  it('while the API checks their bundle: the process at it is ended, and the next is answered', async () => {
    // Just within the limits of every layer: takes longer than a check may, so that it is surely going on.
    const files = await demoFiles('almanac-1.0.1')
    const block = '%SRX700Y700I0.01J0.01*%\nD10*\nX0Y0D03*\n%SR*%\n'
    for (const path of files.keys())
      if (/_(Cu|Silkscreen)\.gbr$/.test(path)) files.set(path, Buffer.from(more(files.get(path)!.toString('latin1'), block)))
    const zip = await zipOf(files)

    const before = new Map(children().map((pid) => [pid, ticks(pid)]))
    const busy = () => children().find((pid) => ticks(pid) > (before.get(pid) ?? 0) + 50)
    const socket = send(api, 'Content-Type: application/zip\r\n', zip)
    await expect.poll(busy, poll).toBeDefined()
    const pid = busy()!
    expect(inUploads()).toHaveLength(1)
    socket.destroy()
    await expect.poll(children, poll).not.toContain(pid)
    await expect.poll(inUploads, poll).toEqual([])
    expect(await (await sendToApi(demoBundle('almanac-1.0.1'))).json()).toMatchObject({ ok: true })
    expect(site.log()).not.toContain('"level":"error"')
  })
})
