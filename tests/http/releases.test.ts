import { createHash } from 'node:crypto'
import { readdirSync, rmSync } from 'node:fs'
import { connect } from 'node:net'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { textOf, type Browser } from './browser'
import { addConsole, answerAll, boardForm, bundleWithout, demoBundle, hidden, publish, upload } from './bundles'
import { startSite, type Site } from './harness'

const maxBytes = 300_000
const board = '/boards/buttress'
const at = (version: string) => `${board}/releases/${version}`
const draft = { version: '1.1.0', boardRevision: 'B', layers: '4', thicknessMm: '0.8', notes: 'C15 **added**.' }
const zip = demoBundle('buttress-1.1.0')
const sha256 = createHash('sha256').update(zip).digest('hex')

let site: Site
let owner: Browser
let other: Browser
beforeAll(async () => {
  site = await startSite({ env: { UPLOAD_MAX_BYTES: String(maxBytes) } })
  await site.query(addConsole)
  owner = await site.signInByGithub('vigga')
  other = await site.signInByGithub('tarn')
  await owner.fetch('/boards/new', { form: boardForm })
})
afterAll(() => site?.close())

const inUploads = () => readdirSync(join(site.dataDir, 'uploads'))
const row = (version: string) =>
  site.query((db) => db.selectFrom('releases').selectAll().where('version', '=', version).executeTakeFirst())
const taken = async () =>
  Number((await site.query((db) => db.selectFrom('downloads').select('count').executeTakeFirst()))?.count ?? 0)

describe('drafting a release', () => {
  it.each([
    ['nothing', {}, 'The version is missing.'],
    ['two numbers', { version: '2.1' }, 'Did you mean 2.1.0?'],
    ['a leading v', { version: 'v1.1.0' }, '1.1.0'],
    ['a leading zero', { version: '1.01.0' }, 'may not begin with 0'],
    ['a small board revision', { boardRevision: 'b' }, 'A capital letter'],
    ['no number of layers', { layers: 'many' }, 'whole number from 1 to 32'],
    ['an impossible thickness', { thicknessMm: '80' }, 'from 0.1 to 10 mm'],
    ['an unknown stencil', { stencil: 'left' }, 'Choose one of the four.'],
    ['long notes', { notes: 'x'.repeat(20_001) }, '20 000 characters']
  ])('refuses %s and comes back filled in', async (name, more, words) => {
    const form = name === 'nothing' ? {} : { ...draft, ...more }
    const answer = await owner.fetch(`${board}/releases/new`, { form: form as Record<string, string> })
    expect(answer.status).toBe(400)
    const html = await answer.text()
    expect(textOf(html)).toContain(words)
    for (const value of Object.values(more)) if (value.length < 50 && value !== 'left') expect(html).toContain(`value="${value}"`)
  })

  it('begins one that only maintainers see', async () => {
    const answer = await owner.fetch(`${board}/releases/new`, { form: draft })
    expect([answer.status, answer.headers.get('Location')]).toEqual([303, `${at('1.1.0')}?done=drafted`])
    expect(textOf(await owner.page(at('1.1.0')))).toContain('There is no bundle yet.')
    for (const browser of [other, site.browser()]) {
      expect(textOf(await browser.page(at('1.1.0'), 404))).toContain('There is no release 1.1.0 of Buttress. It has none yet.')
      for (const path of [
        '/bundle',
        '/picture/top.svg',
        '/picture/top.png',
        '/picture/layer-1.svg',
        '/edit',
        '/withdraw',
        '/check'
      ])
        expect((await browser.fetch(at('1.1.0') + path)).status, path).toBe(404)
      expect((await browser.fetch(at('1.1.0'), { form: { intent: 'delete' } })).status).toBe(404)
      expect((await upload(browser, at('1.1.0'), zip)).status).toBe(404)
    }
    const listed = await (await site.browser().fetch('/api/v1/boards/buttress/releases')).json()
    expect(listed).toEqual({ releases: [], next: null })
    expect((await site.browser().fetch('/api/v1/boards/buttress/releases/1.1.0')).status).toBe(404)
    expect(textOf(await owner.page('/bench'))).toContain('a bundle')
  })

  it('refuses a version that is used, also by build metadata', async () => {
    for (const version of ['1.1.0', '1.1.0+again']) {
      const answer = await owner.fetch(`${board}/releases/new`, { form: { ...draft, version } })
      expect(answer.status).toBe(409)
      expect(textOf(await answer.text())).toContain('There is a draft 1.1.0 already.')
    }
  })

  it('refuses a form that is not one of its own', async () => {
    expect((await owner.fetch(at('1.1.0'), { form: { intent: 'explode' } })).status).toBe(400)
    expect((await owner.fetch(at('1.1.0'), { form: { intent: 'publish' } })).status).toBe(400)
    expect((await owner.fetch(at('1.1.0'), { form: { intent: 'recheck' } })).status).toBe(409)
  })
})

describe('uploading', () => {
  const unchanged = async () => {
    expect((await row('1.1.0'))?.bundle_sha256 ?? null).toBeNull()
    expect(inUploads()).toEqual([])
  }

  it('wants a file', async () => {
    const empty = await upload(owner, at('1.1.0'), Buffer.alloc(0), { name: '' })
    expect(empty.status).toBe(400)
    const html = await empty.text()
    expect(textOf(html)).toContain('Draft')
    expect(html).toMatch(/<input[^>]* aria-describedby="bundle-error"/)
    expect(textOf(/<p class="err" id="bundle-error">.*?<\/p>/s.exec(html)![0])).toContain('Choose the bundle first')
    const elsewhere = await upload(owner, at('1.1.0'), zip, { field: 'picture', isScript: true })
    expect([elsewhere.status, elsewhere.headers.get('Content-Type')]).toEqual([400, 'application/problem+json'])
    const plain = await owner.fetch(`${at('1.1.0')}/bundle`, {
      method: 'POST',
      body: new Uint8Array(zip),
      headers: { 'Content-Type': 'application/zip' }
    })
    expect(plain.status).toBe(415)
    await unchanged()
  })

  it('is for its maintainers, also by the plain form', async () => {
    for (const browser of [site.browser(), other]) expect((await upload(browser, at('1.1.0'), zip)).status).toBe(404)
    await unchanged()
  })

  it('refuses another site', async () => {
    const answer = await owner.fetch(`${at('1.1.0')}/bundle`, {
      method: 'POST',
      body: new FormData(),
      from: 'https://evil.example'
    })
    expect(answer.status).toBe(403)
  })

  it('refuses what is too large, announced or not, and keeps nothing', async () => {
    const announced = await upload(owner, at('1.1.0'), Buffer.alloc(maxBytes + 200_000))
    expect(announced.status).toBe(413)
    expect(textOf(await announced.text())).toContain('too large: at most 292 KiB')
    const close = await upload(owner, at('1.1.0'), Buffer.alloc(maxBytes + 1), { isScript: true })
    expect(close.status).toBe(413)
    expect(await close.json()).toMatchObject({ status: 413, detail: expect.stringContaining('too large') })
    await unchanged()
  })

  it('keeps nothing of a sender who leaves half-way', async () => {
    const { hostname, port } = new URL(site.url)
    const cookie = [...owner.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
    const socket = connect(Number(port), hostname)
    socket.on('error', () => socket.destroy())
    const head = `--x\r\nContent-Disposition: form-data; name="bundle"; filename="a.zip"\r\n\r\n`
    socket.write(
      `POST ${at('1.1.0')}/bundle HTTP/1.1\r\nHost: ${hostname}:${port}\r\nOrigin: ${site.url}\r\nCookie: ${cookie}\r\n` +
        `Content-Type: multipart/form-data; boundary=x\r\nContent-Length: 200000\r\n\r\n${head}`
    )
    socket.write(Buffer.alloc(50_000))
    await expect.poll(inUploads, { timeout: 10_000 }).toHaveLength(1)
    expect(await (await owner.fetch(`${at('1.1.0')}/check`)).json()).toEqual({ phase: 'receiving', step: null })
    socket.destroy()
    await expect.poll(inUploads, { timeout: 10_000 }).toEqual([])
    await expect
      .poll(async () => (await owner.fetch(`${at('1.1.0')}/check`)).json(), { timeout: 10_000 })
      .toEqual({ phase: 'none', step: null })
    await unchanged()
  })

  it('says of no zip that it is none, and does not publish it', async () => {
    const answer = await upload(owner, at('1.1.0'), Buffer.from('this is no zip'))
    expect([answer.status, answer.headers.get('Location')]).toEqual([303, `${at('1.1.0')}?done=checked#found`])
    const text = textOf(await owner.page(at('1.1.0')))
    expect(text).toContain('zip-unreadable')
    const refused = await publish(owner, at('1.1.0'))
    expect(refused.status).toBe(422)
    expect(textOf(await refused.text())).toContain('One stop stands')
  })

  it('names a missing layer by its code, and refuses to publish', async () => {
    const answer = await upload(owner, at('1.1.0'), await bundleWithout('buttress-1.1.0', 'Edge_Cuts'), { isScript: true })
    expect(answer.status).toBe(200)
    expect(await answer.json()).toEqual({ location: `${at('1.1.0')}?done=checked#found` })
    expect(textOf(await owner.page(at('1.1.0')))).toContain('outline-missing')
    expect((await publish(owner, at('1.1.0'))).status).toBe(422)
    expect((await row('1.1.0'))?.state).toBe('draft')
  })

  it('takes two uploads at once without harm', async () => {
    const answers = await Promise.all([upload(owner, at('1.1.0'), zip), upload(owner, at('1.1.0'), zip)])
    for (const answer of answers) expect([303, 409]).toContain(answer.status)
    expect(answers.map((a) => a.status)).toContain(303)
    expect(await row('1.1.0')).toMatchObject({
      bundle_sha256: sha256,
      bundle_bytes: zip.length,
      check_state: 'done',
      is_check_ok: 1
    })
    expect(inUploads()).toEqual([])
  })

  it('shows layers, facts beside what is declared, findings and both sides', async () => {
    const html = await owner.page(at('1.1.0'))
    const text = textOf(html)
    for (const part of ['38.0 × 14.0', 'buttress-F_Cu.gbr', 'L4', 'my bundle.zip']) expect(text).toContain(part)
    expect(html).toMatch(/picture\/top\.svg\?v=[0-9a-f]{12}/)
    expect(await row('1.1.0')).toMatchObject({ thumb_top_sha256: expect.any(String), picture_box_json: expect.any(String) })
  })

  const pictures = ['top.svg', 'bottom.svg', 'top.png', 'bottom.png', 'layer-1.svg', 'layer-11.svg']

  it.each(pictures)('serves %s locked down, as what it is, to its maintainers only', async (file) => {
    const path = `${at('1.1.0')}/picture/${file}`
    const picture = await owner.fetch(path)
    const { headers } = picture
    expect([picture.status, headers.get('Content-Type')]).toEqual([200, file.endsWith('.png') ? 'image/png' : 'image/svg+xml'])
    expect(headers.get('Content-Security-Policy')).toMatch(/^default-src 'none'; .*sandbox$/)
    expect(headers.get('X-Content-Type-Options')).toBe('nosniff')
    expect(headers.get('Cross-Origin-Resource-Policy')).toBe('same-origin')
    expect(headers.get('Cache-Control')).toBe('private, no-cache')
    const bytes = Buffer.from(await picture.arrayBuffer())
    expect(bytes.subarray(0, 4)).toEqual(Buffer.from(file.endsWith('.png') ? '\x89PNG' : '<svg', 'latin1'))
    const again = await owner.fetch(path, { headers: { 'If-None-Match': headers.get('ETag')! } })
    expect(again.status).toBe(304)
    for (const browser of [site.browser(), other]) expect((await browser.fetch(path)).status).toBe(404)
  })

  it.each([
    'left.svg',
    'top.jpg',
    'layer-1.png',
    'layer-0.svg',
    'layer-12.svg',
    'layer-01.svg',
    'layer-99999.svg',
    'constructor'
  ])('has no picture %s', async (file) => {
    expect((await owner.fetch(`${at('1.1.0')}/picture/${file}`)).status).toBe(404)
  })

  it('checks again when the declared layers change', async () => {
    const wrong = await owner.fetch(`${at('1.1.0')}/edit`, { form: { ...draft, layers: '2' } })
    expect([wrong.status, wrong.headers.get('Location')]).toEqual([303, `${at('1.1.0')}?done=rechecked`])
    const html = await owner.page(at('1.1.0'))
    expect(textOf(html)).toContain('layer-count')
    expect(html).toContain('≠')
    const right = await owner.fetch(`${at('1.1.0')}/edit`, { form: draft })
    expect(right.status).toBe(303)
    expect(await row('1.1.0')).toMatchObject({ is_check_ok: 1, check_state: 'done' })
  })
})

describe('publishing', () => {
  it('wants every caution answered, and an answer of bearable length', async () => {
    const html = await owner.page(at('1.1.0'))
    const names = [...html.matchAll(/name="(answer\.[a-z0-9]+)"/g)].map((m) => m[1]!)
    expect(names.length).toBeGreaterThan(0)
    expect((await publish(owner, at('1.1.0'))).status).toBe(422)
    const long = await owner.fetch(at('1.1.0'), { form: { intent: 'answers', [names[0]!]: 'x'.repeat(2001) } })
    expect(long.status).toBe(400)
    expect(textOf(await long.text())).toContain('2 000 characters')
    const foreign = await owner.fetch(at('1.1.0'), { form: { intent: 'answers', 'answer.0000000000000000': 'x' } })
    expect(foreign.status).toBe(409)
    const { answer } = await answerAll(owner, at('1.1.0'))
    expect([answer.status, answer.headers.get('Location')]).toEqual([303, `${at('1.1.0')}?done=answered#found`])
  })

  it('refuses what is not as the page showed it', async () => {
    const answer = await owner.fetch(at('1.1.0'), {
      form: { intent: 'publish', bundle: 'a'.repeat(64), updatedAt: (await row('1.1.0'))!.updated_at }
    })
    expect(answer.status).toBe(409)
    expect(textOf(await answer.text())).toContain('The draft changed since you opened this page.')
  })

  it('publishes once', async () => {
    const page = await owner.page(at('1.1.0'))
    const form = { intent: 'publish', bundle: hidden(page, 'bundle')!, updatedAt: hidden(page, 'updatedAt')! }
    const answers = await Promise.all([owner.fetch(at('1.1.0'), { form }), owner.fetch(at('1.1.0'), { form })])
    expect(answers.map((a) => a.status).sort()).toEqual([303, 409])
    const text = textOf(await site.browser().page(at('1.1.0')))
    for (const part of ['released', 'Download buttress-1.1.0.zip', 'Mains and stored charge', 'Meant so.', 'C15 added .'])
      expect(text).toContain(part)
    expect(text.indexOf('Mains and stored charge')).toBeLessThan(text.indexOf('Download buttress-1.1.0.zip'))
  })

  it('shows its pictures to everybody from now on, to be kept for good', async () => {
    for (const file of ['top.svg', 'bottom.png', 'layer-2.svg']) {
      const picture = await site.browser().fetch(`${at('1.1.0')}/picture/${file}`)
      expect([picture.status, picture.headers.get('Cache-Control')]).toEqual([200, 'public, max-age=31536000, immutable'])
    }
  })

  it('never changes it again', async () => {
    expect((await owner.fetch(`${at('1.1.0')}/edit`, { form: draft })).status).toBe(403)
    expect((await upload(owner, at('1.1.0'), demoBundle('buttress-1.1.1'))).status).toBe(403)
    for (const intent of ['answers', 'recheck', 'delete'])
      expect((await owner.fetch(at('1.1.0'), { form: { intent } })).status).toBe(403)
    await expect(
      site.query((db) => db.updateTable('releases').set({ notes_md: 'other' }).where('version', '=', '1.1.0').execute())
    ).rejects.toThrow('a published release never changes')
    expect(await row('1.1.0')).toMatchObject({ bundle_sha256: sha256, state: 'released' })
  })

  it('keeps the version for good', async () => {
    const answer = await owner.fetch(`${board}/releases/new`, { form: draft })
    expect(answer.status).toBe(409)
    expect(textOf(await answer.text())).toContain('1.1.0 is published already.')
  })

  it('fixes the console of its board', async () => {
    await site.query((db) =>
      db
        .insertInto('consoles')
        .values({ id: 'other', slug: 'other', name: 'Other', maker: 'Talvi', kind: 'home', summary: 'x' })
        .execute()
    )
    const answer = await owner.fetch(`${board}/edit`, { form: { ...boardForm, console: 'other' } })
    expect(answer.status).toBe(409)
    expect(textOf(await answer.text())).toContain('The console stays Talvi 16')
  })
})

describe('downloading', () => {
  const get = (headers: Record<string, string> = {}, method = 'GET') =>
    site.browser().fetch(`${at('1.1.0')}/bundle`, { headers, method })
  const bytesOf = async (answer: Response) => Buffer.from(await answer.arrayBuffer())

  it('gives the very bytes, named, with their sum, and counts once', async () => {
    const before = await taken()
    const answer = await get()
    expect(answer.status).toBe(200)
    expect((await bytesOf(answer)).equals(zip)).toBe(true)
    const header = (name: string) => answer.headers.get(name)
    expect(header('Content-Type')).toBe('application/zip')
    expect(header('Content-Disposition')).toBe('attachment; filename="buttress-1.1.0.zip"')
    expect(header('Content-Length')).toBe(String(zip.length))
    expect(header('Repr-Digest')).toBe(`sha-256=:${createHash('sha256').update(zip).digest('base64')}:`)
    expect(header('X-Checksum-Sha256')).toBe(sha256)
    expect(header('ETag')).toBe(`"${sha256}"`)
    expect(header('Accept-Ranges')).toBe('bytes')
    expect(header('Cache-Control')).toContain('immutable')
    expect(await taken()).toBe(before + 1)
    const page = await site.browser().page(at('1.1.0'))
    expect(page.replace(/<[^>]+>/g, '')).toContain(sha256)
  })

  it('answers single ranges, and counts only those from the first byte', async () => {
    const before = await taken()
    const part = async (range: string) => {
      const answer = await get({ Range: range })
      return { status: answer.status, range: answer.headers.get('Content-Range'), bytes: await bytesOf(answer) }
    }
    const last = await part('bytes=-100')
    expect([last.status, last.range]).toEqual([206, `bytes ${zip.length - 100}-${zip.length - 1}/${zip.length}`])
    expect(last.bytes.equals(zip.subarray(-100))).toBe(true)
    const middle = await part('bytes=1000-1999')
    expect(middle.bytes.equals(zip.subarray(1000, 2000))).toBe(true)
    expect(await taken()).toBe(before)
    const first = await part('bytes=0-9')
    expect([first.status, first.bytes.length]).toEqual([206, 10])
    expect(await taken()).toBe(before + 1)
    const beyond = await part(`bytes=${zip.length}-`)
    expect([beyond.status, beyond.range]).toEqual([416, `bytes */${zip.length}`])
    const several = await part('bytes=0-1,5-6')
    expect([several.status, several.bytes.length]).toEqual([200, zip.length])
  })

  it('holds a range to If-Range', async () => {
    const same = await get({ Range: 'bytes=5-9', 'If-Range': `"${sha256}"` })
    expect([same.status, (await bytesOf(same)).length]).toEqual([206, 5])
    const another = await get({ Range: 'bytes=5-9', 'If-Range': '"another"' })
    expect([another.status, (await bytesOf(another)).length]).toEqual([200, zip.length])
  })

  it('answers HEAD and a known tag without a body, and does not count them', async () => {
    const before = await taken()
    const head = await get({}, 'HEAD')
    expect([head.status, head.headers.get('Content-Length'), await head.text()]).toEqual([200, String(zip.length), ''])
    const known = await get({ 'If-None-Match': `"${sha256}"` })
    expect([known.status, await known.text()]).toEqual([304, ''])
    expect(await taken()).toBe(before)
  })

  it('goes on serving when a reader leaves half-way', async () => {
    const gone = new AbortController()
    const answer = await site.browser().fetch(`${at('1.1.0')}/bundle`, { signal: gone.signal })
    await answer.body!.getReader().read()
    gone.abort()
    expect((await bytesOf(await get())).length).toBe(zip.length)
    expect(site.log()).not.toContain('handler-failed')
  })

  it('shows the release by the API', async () => {
    const release = await (await site.browser().fetch('/api/v1/boards/buttress/releases/1.1.0')).json()
    expect(release).toMatchObject({
      version: '1.1.0',
      state: 'released',
      bundle: { sha256, bytes: zip.length },
      declared: { layers: 4, thicknessMm: 0.8 },
      facts: { width: 38, height: 14, copperLayers: 4 },
      links: { bundle: `${at('1.1.0')}/bundle` }
    })
    const list = (await (await site.browser().fetch('/api/v1/boards/buttress/releases')).json()) as {
      releases: { version: string }[]
    }
    expect(list.releases.map((r) => r.version)).toEqual(['1.1.0'])
  })
})

describe('a trial and a withdrawn release', () => {
  it('marks the trial and offers it only while nothing else is released', async () => {
    await owner.fetch(`${board}/releases/new`, { form: { ...draft, version: '1.2.0-beta.1' } })
    await upload(owner, at('1.2.0-beta.1'), demoBundle('buttress-1.1.1'))
    await answerAll(owner, at('1.2.0-beta.1'))
    expect((await publish(owner, at('1.2.0-beta.1'))).status).toBe(303)
    expect((await row('1.2.0-beta.1'))?.state).toBe('trial')
    const api = (await (await site.browser().fetch('/api/v1/boards/buttress')).json()) as { newest: { version: string } }
    expect(api.newest.version).toBe('1.1.0')
  })

  it('wants a reason, and a maintainer or steward', async () => {
    expect((await other.fetch(`${at('1.1.0')}/withdraw`)).status).toBe(403)
    expect((await other.fetch(`${at('1.1.0')}/withdraw`, { form: { reason: 'I do not like it at all.' } })).status).toBe(403)
    for (const reason of ['', 'short']) {
      const answer = await owner.fetch(`${at('1.1.0')}/withdraw`, { form: { reason } })
      expect(answer.status).toBe(400)
    }
    expect(textOf(await owner.page(`${at('1.1.0')}/withdraw`))).toContain('can still be downloaded')
  })

  it('stands with its reason, stays downloadable, and is never the newest', async () => {
    const reason = 'C13 can short <b>hard</b>.\nTake the trial.'
    const answer = await owner.fetch(`${at('1.1.0')}/withdraw`, { form: { reason } })
    expect([answer.status, answer.headers.get('Location')]).toEqual([303, `${at('1.1.0')}?done=withdrawn`])
    const html = await site.browser().page(at('1.1.0'))
    expect(html).toContain('C13 can short &lt;b&gt;hard&lt;/b&gt;.')
    expect(textOf(html)).toContain('Withdrawn by its maintainer')
    expect((await site.browser().fetch(`${at('1.1.0')}/bundle`)).status).toBe(200)
    expect((await owner.fetch(`${at('1.1.0')}/withdraw`, { form: { reason } })).status).toBe(409)
    const api = (await (await site.browser().fetch('/api/v1/boards/buttress')).json()) as { newest: { version: string } }
    expect(api.newest.version).toBe('1.2.0-beta.1')
  })

  it('keeps other copper from going out under the same board revision, until it has a letter of its own', async () => {
    const form = { ...draft, version: '2.0.0' }
    await owner.fetch(`${board}/releases/new`, { form })
    await upload(owner, at('2.0.0'), demoBundle('buttress-2.0.0'))
    await answerAll(owner, at('2.0.0'))
    const words = textOf(await owner.page(at('2.0.0')))
    expect(words).toContain('Changed copper under the same revision')
    expect(words).toContain('differ from release 1.2.0-beta.1 of the same board revision B.')
    expect((await publish(owner, at('2.0.0'))).status).toBe(422)
    expect((await row('2.0.0'))?.state).toBe('draft')
    const edited = await owner.fetch(`${at('2.0.0')}/edit`, { form: { ...form, boardRevision: 'C' } })
    expect([edited.status, edited.headers.get('Location')]).toEqual([303, `${at('2.0.0')}?done=rechecked`])
    expect(textOf(await owner.page(at('2.0.0')))).not.toContain('Changed copper under the same revision')
    await answerAll(owner, at('2.0.0'))
    expect((await publish(owner, at('2.0.0'))).status).toBe(303)
  })

  it('deletes a draft', async () => {
    await owner.fetch(`${board}/releases/new`, { form: { ...draft, version: '3.0.0' } })
    const answer = await owner.fetch(at('3.0.0'), { form: { intent: 'delete' } })
    expect([answer.status, answer.headers.get('Location')]).toEqual([303, '/boards/buttress?done=deleted'])
    expect((await owner.fetch(at('3.0.0'))).status).toBe(404)
  })
})

describe('when storage lost a bundle', () => {
  it('says so at once, and writes it to the log', async () => {
    rmSync(join(site.dataDir, 'storage'), { recursive: true, force: true })
    const answer = await site.browser().fetch(`${at('1.1.0')}/bundle`)
    expect(answer.status).toBe(502)
    expect(textOf(await answer.text())).toContain('The file store did not answer')
    expect(site.log()).toMatch(/"event":"bundle-(missing|unreadable)"/)
    expect((await site.browser().fetch(`${at('1.1.0')}/picture/top.svg`)).status).toBe(502)
  })
})
