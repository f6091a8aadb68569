import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import JSZip from 'jszip'
import type { Db } from '~db/client.server'
import type { Browser } from './browser'

/** A bundle of the demo, as the maintainer would upload it. */
export const demoBundle = (name: string): Buffer =>
  readFileSync(fileURLToPath(new URL(`../../db/seed/bundles/${name}.zip`, import.meta.url)))

/** The same bundle without the files whose path holds `part`. */
export async function bundleWithout(name: string, part: string): Promise<Buffer> {
  const zip = await JSZip.loadAsync(demoBundle(name))
  const gone = Object.keys(zip.files).filter((path) => path.includes(part))
  if (gone.length === 0) throw new Error(`${name} has nothing with ${part}`)
  for (const path of gone) zip.remove(path)
  return zip.generateAsync({ type: 'nodebuffer', compression: 'DEFLATE' })
}

/** Uploads a file to a draft as the form does; `isScript` asks for JSON as the page's script does. */
export function upload(
  browser: Browser,
  path: string,
  content: Buffer,
  options: { isScript?: boolean; name?: string; field?: string } = {}
) {
  const body = new FormData()
  body.set(
    options.field ?? 'bundle',
    new Blob([new Uint8Array(content)], { type: 'application/zip' }),
    options.name ?? 'my bundle.zip'
  )
  return browser.fetch(options.isScript ? `${path}/bundle` : path, {
    method: 'POST',
    body,
    headers: options.isScript ? { Accept: 'application/json' } : { Accept: 'text/html' }
  })
}

/** A console with two revisions; no page makes one yet. */
export async function addConsole(db: Db) {
  await db
    .insertInto('consoles')
    .values({ id: 'talvi-16', slug: 'talvi-16', name: 'Talvi 16', maker: 'Talvi', kind: 'home', summary: 'A console.' })
    .execute()
  for (const [code, position] of [
    ['TM-1', 1],
    ['TM-2', 2]
  ] as const)
    await db
      .insertInto('console_revisions')
      .values({ id: code.toLowerCase(), console_id: 'talvi-16', code, position, recognise: 'Printed beside the slot.' })
      .execute()
}

export const boardForm = {
  name: 'Buttress',
  summary: 'Holds the 5 V rail up.',
  replaces: 'the electrolytic cluster',
  console: 'talvi-16',
  licence: 'CERN-OHL-P-2.0',
  description: 'A **drop-in** board.'
}

/** What stands in a hidden field of a page. */
export const hidden = (html: string, name: string): string | undefined =>
  new RegExp(`<input type="hidden" name="${name}" value="([^"]*)"`).exec(html)?.[1]

/** Fills every open answer of a draft page and saves them. */
export async function answerAll(browser: Browser, path: string) {
  const html = await browser.page(path)
  const names = [...html.matchAll(/name="(answer\.[a-z0-9]+)"/g)].map((m) => m[1]!)
  const form = Object.fromEntries(names.map((name) => [name, 'Meant so.']))
  return { count: names.length, answer: await browser.fetch(path, { form: { intent: 'answers', ...form } }) }
}

/** Publishes a draft from what its page shows. */
export async function publish(browser: Browser, path: string) {
  const html = await browser.page(path)
  return browser.fetch(path, {
    form: { intent: 'publish', bundle: hidden(html, 'bundle') ?? '', updatedAt: hidden(html, 'updatedAt') ?? '' }
  })
}
