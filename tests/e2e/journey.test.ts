import { createHash } from 'node:crypto'
import { readFile } from 'node:fs/promises'
import { fileURLToPath } from 'node:url'
import JSZip from 'jszip'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Site } from '../http/harness'
import { launchChromium, openPage, type WatchedPage } from './chromium'
import { startDemoSite } from './demo-site'

/*
 * The main job through all four roles, each in a browser of its own: a maintainer cuts a release from a real bundle, a visitor takes it, a
 * member files a report and the curve moves, a steward leaves the report out and it moves back.
 */

const bundleFile = fileURLToPath(new URL('../../db/seed/bundles/buttress-2.0.0.zip', import.meta.url))
const version = '2.1.0'
const board = 'Buttress'

/** What somebody might try to run in another's browser, around honest words. */
const hostileNotes = `Same copper as **2.0.0**, for the journey.

<script>taken = true</script><img src=x onerror="taken = true"><svg onload="taken = true"></svg><iframe src="javascript:top.taken=true"></iframe>
[one](javascript:taken=true) [two](JaVaScRiPt:taken=true) [three](//elsewhere.example) [four](data:text/html,<script>1</script>)
<p style="position:fixed" id="main" onclick="taken = true">five</p>

[fine](https://fettle.example/)`

let site: Site
let chromium: Browser
let bundle: Buffer
let reportPath = ''

beforeAll(async () => {
  ;[site, chromium, bundle] = await Promise.all([startDemoSite(), launchChromium(), readFile(bundleFile)])
})
afterAll(async () => {
  await chromium?.close()
  await site?.close()
})

const open = (allowed: RegExp[] = []): Promise<WatchedPage> => openPage(chromium, { baseURL: site.url }, allowed)

async function signIn(page: Page, name: string): Promise<void> {
  await page.goto('/sign-in')
  await page.getByRole('button', { name: 'Go on with GitHub' }).click()
  await page.getByRole('button', { name }).click()
  await page.waitForURL(`${site.url}/**`)
  await page.locator('header').getByRole('link', { name }).waitFor()
}

async function upload(page: Page, name: string, buffer: Buffer): Promise<void> {
  await page.locator('input[type=file]').setInputFiles({ name, mimeType: 'application/zip', buffer })
  await page.getByRole('button', { name: 'Upload and check' }).click()
  await page.getByText(name).first().waitFor()
  await page.getByText(/The bundle check raised/).waitFor({ timeout: 60_000 })
}

/** The bundle without the file whose name ends so. */
async function without(end: string): Promise<Buffer> {
  const zip = await JSZip.loadAsync(bundle)
  const name = Object.keys(zip.files).find((file) => file.endsWith(end))
  if (name === undefined) throw new Error(`The bundle has no file that ends in ${end}`)
  zip.remove(name)
  return zip.generateAsync({ type: 'nodebuffer', compression: 'DEFLATE' })
}

/** The API's figure for one release: how many units are in the curve, and how many failed. */
async function counted(of: string): Promise<{ n: number; events: number }> {
  const answer = await fetch(`${site.url}/api/v1/boards/buttress/reliability?release=${of}`)
  expect(answer.status).toBe(200)
  const { groups } = (await answer.json()) as { groups: { by: string; n: number; events: number }[] }
  const { n, events } = groups.find(({ by }) => by === 'all') ?? { n: 0, events: 0 }
  return { n, events }
}

describe('the main job', () => {
  it('a maintainer is refused a bundle with a layer missing, then cuts a release from the whole one', async () => {
    const { page, close } = await open()
    await signIn(page, 'Ilse Varnik')
    await page.goto('/boards/buttress/releases/new')
    await page.getByLabel('Version').fill(version)
    await page.getByLabel('Board revision').fill('C')
    await page.getByLabel('Copper layers').fill('4')
    await page.getByLabel('Thickness').fill('0.8')
    await page.getByLabel('Release notes').fill(hostileNotes)
    await page.getByRole('button', { name: /draft/i }).click()
    await page.waitForURL(`**/boards/buttress/releases/${version}**`)

    await upload(page, 'lacking.zip', await without('F_Mask.gbr'))
    await page.getByText('mask-missing').waitFor()
    expect(await page.getByRole('button', { name: `Publish ${version}` }).isDisabled()).toBe(true)

    await upload(page, 'whole.zip', bundle)
    await page.getByText('mask-missing').waitFor({ state: 'detached' })
    for (const answer of await page.getByLabel('Your answer').all()) await answer.fill('Meant so.')
    await page.getByRole('button', { name: 'Save the answers' }).click()
    await page.getByRole('button', { name: `Publish ${version}` }).click()
    await page.locator('.tag.released').waitFor()
    expect(await page.getByRole('heading', { level: 1 }).innerText()).toContain(version)
    await page.getByText('Same copper as').waitFor()
    expect(await page.evaluate(() => (globalThis as { taken?: boolean }).taken)).toBeUndefined()
    const prose = page.locator('.prose')
    expect(await prose.locator('script, iframe, img, svg, form, [onclick], [onerror], [style], [id]').count()).toBe(0)
    expect(await prose.locator('a[href^="javascript:" i], a[href^="data:" i], a[href^="//"]').count()).toBe(0)
    expect(await prose.locator('a[href="https://fettle.example/"]').getAttribute('rel')).toBe('nofollow ugc noopener')
    await close()
  })

  it('a visitor downloads it and finds the same bytes as the sum on the page', async () => {
    const { page, close } = await open()
    await page.goto(`/boards/buttress/releases/${version}`)
    const shown = (await page.locator('.sha').first().innerText()).replace(/\s+/g, '')
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: `Download buttress-${version}.zip` }).click()
    ])
    expect(download.suggestedFilename()).toBe(`buttress-${version}.zip`)
    const taken = await readFile(await download.path())
    const sum = createHash('sha256').update(taken).digest('hex')
    expect(sum).toBe(createHash('sha256').update(bundle).digest('hex'))
    expect(shown).toBe(sum)
    await close()
  })

  it('a member files a report with the keyboard alone, adds that it still runs, and the curve moves', async () => {
    const before = await counted(version)
    expect(before).toEqual({ n: 0, events: 0 })
    const { page, close } = await open()
    await signIn(page, 'Remy Colstad')
    await page.goto(`/report?board=buttress&release=${version}&revision=TM-3`)
    const pressOn = async (field: ReturnType<Page['locator']>, key: string) => {
      await field.focus()
      await page.keyboard.press(key)
    }
    await pressOn(page.getByRole('radio', { name: /Measured/i }), 'Space')
    await pressOn(page.locator('input[name=first_power][value=works]'), 'Space')
    await page.getByLabel('What others should know').focus()
    await page.keyboard.type('Filed from the journey.')
    await pressOn(page.getByRole('button', { name: 'File report' }), 'Enter')
    await page.waitForURL('**/reports/*')
    reportPath = new URL(page.url()).pathname
    await page.getByText('Filed from the journey.').waitFor()

    await page.locator('input[name=statement][value=running]').check()
    await page.getByRole('button', { name: 'Add this' }).click()
    await page.locator('table').getByText('Still runs').waitFor()
    expect(await counted(version)).toEqual({ n: 1, events: 0 })
    await close()
  })

  it('a failure brings the curve down, for everybody to see', async () => {
    const { page, close } = await open()
    await signIn(page, 'Remy Colstad')
    await page.goto(`/report?board=buttress&release=${version}&revision=TM-4`)
    await page.locator('input[name=evidence][value=code-read]').check()
    await page.locator('input[name=first_power][value=no-change]').check()
    await page.locator('input[name=cause][value=board]').check()
    await page.getByRole('button', { name: 'File report' }).click()
    await page.waitForURL('**/reports/*')
    reportPath = new URL(page.url()).pathname
    expect(await counted(version)).toMatchObject({ events: 1 })
    await page.goto(`/boards/buttress/reliability?release=${version}`)
    await page.getByText(/1 has failed/).waitFor()
    await close()
  })

  it('a steward leaves the report out with a public reason, and it stays to be read', async () => {
    const { page, close } = await open()
    await signIn(page, 'Wren Aldermoor')
    await page.goto(reportPath)
    await page.locator('input[name=kind][value=not-plausible]').check()
    await page.getByLabel('The reason, for everybody to read').fill('Filed by the journey, not by an installer.')
    await page.getByRole('button', { name: 'Exclude this report' }).click()
    await page.getByText('Excluded from every figure').waitFor()
    await close()

    expect(await counted(version)).toMatchObject({ events: 0 })
    const visitor = await open()
    await visitor.page.goto(reportPath)
    await visitor.page.getByText('Filed by the journey, not by an installer.').waitFor()
    await visitor.close()
  })

  it('withdraws the release with a reason; it stays listed and can still be taken', async () => {
    const { page, close } = await open()
    await signIn(page, 'Ilse Varnik')
    await page.goto(`/boards/buttress/releases/${version}/withdraw`)
    await page.getByRole('textbox', { name: 'Reason' }).fill('Withdrawn at the end of the journey.')
    await page.getByRole('button', { name: /^Withdraw/ }).click()
    await page.locator('.tag.withdrawn').waitFor()
    await page.getByText('Withdrawn at the end of the journey.').first().waitFor()
    await page.goto('/boards/buttress')
    await page
      .getByRole('link', { name: new RegExp(version.replaceAll('.', '\\.')) })
      .first()
      .waitFor()
    await close()
    expect((await fetch(`${site.url}/boards/buttress/releases/${version}/bundle`)).status).toBe(200)
  })

  it(`${board}'s pages work without scripts`, async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url, javaScriptEnabled: false })
    await page.goto('/')
    await page.getByLabel('Console and mainboard revision').selectOption({ label: 'Talvi 16 TM-3' })
    await page.getByRole('button', { name: 'See what fits' }).click()
    await page.getByText(board).first().waitFor()
    await page.goto('/boards/buttress/reliability')
    expect(await page.locator('svg[role=img]').count()).toBeGreaterThan(0)
    await close()
  })
})
