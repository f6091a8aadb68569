import { readFile } from 'node:fs/promises'
import { fileURLToPath } from 'node:url'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Site } from '../http/harness'
import { launchChromium, openPage } from './chromium'
import { startDemoSite } from './demo-site'

/*
 * The jobs of a maintainer and an installer without a mouse: every control is reached by Tab and worked by keys, a refused form takes the
 * focus to what is wrong, and its links lead to the fields. Only the choice of a file is made for the page: the dialog is the browser's own.
 */

const bundleFile = fileURLToPath(new URL('../../db/seed/bundles/buttress-2.0.0.zip', import.meta.url))
/** A refused form is logged by the browser as a resource that failed. */
const refusals = [/Failed to load resource: the server responded with a status of 4\d\d/]

let site: Site
let chromium: Browser

beforeAll(async () => {
  ;[site, chromium] = await Promise.all([startDemoSite(), launchChromium()])
})
afterAll(async () => {
  await chromium?.close()
  await site?.close()
})

type Focused = { name: string; element: string; field: string; says: string }

/** What has the focus: its words, what it is, and what its description says. */
const focused = (page: Page): Promise<Focused> =>
  page.evaluate(() => {
    const at = document.activeElement as HTMLInputElement | null
    const byId = (list: string | null) => (list ?? '').split(' ').map((id) => document.getElementById(id)?.textContent ?? '')
    return {
      name: (at?.labels?.[0] ?? at)?.textContent?.trim().slice(0, 80) ?? '',
      element: at?.tagName.toLowerCase() ?? '',
      field: at?.getAttribute('name') ?? '',
      says: byId(at?.getAttribute('aria-describedby') ?? null).join(' ')
    }
  })

/** Presses Tab until the focus is on what is meant. */
async function tabTo(page: Page, is: (at: Focused) => boolean, what: string): Promise<void> {
  for (let presses = 0; presses < 150; presses++) {
    if (is(await focused(page))) return
    await page.keyboard.press('Tab')
  }
  throw new Error(`Tab never reached ${what} on ${page.url()}`)
}
const toField = (page: Page, name: string) => tabTo(page, (at) => at.field === name, `the field ${name}`)
const toWords = (page: Page, element: 'a' | 'button', words: string) =>
  tabTo(page, (at) => at.element === element && at.name.startsWith(words), `“${words}”`)

async function press(page: Page, element: 'a' | 'button', words: string): Promise<void> {
  await toWords(page, element, words)
  await page.keyboard.press('Enter')
}
async function write(page: Page, field: string, text: string): Promise<void> {
  await toField(page, field)
  await page.keyboard.press('Control+A')
  await page.keyboard.type(text)
}
const untilFocused = (page: Page, selector: string) =>
  page.waitForFunction((css) => document.activeElement?.matches(css), selector)

async function signIn(page: Page, name: string): Promise<void> {
  await page.goto('/sign-in')
  await press(page, 'button', 'Go on with GitHub')
  await page.waitForURL(`${site.githubUrl}/**`)
  await press(page, 'button', name)
  await page.waitForURL(`${site.url}/**`)
}

describe('with the keyboard alone', () => {
  it('a member opens a board, says what it fits, drafts a release, uploads and publishes it', { timeout: 120_000 }, async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url, locale: 'en-US' }, refusals)
    await signIn(page, 'Remy Colstad')
    await page.goto('/bench')
    await press(page, 'a', 'Name a board')
    await page.waitForURL('**/boards/new')
    await untilFocused(page, 'h1')

    await press(page, 'button', 'Open the board')
    await untilFocused(page, '#errors')
    await press(page, 'a', 'Summary')
    expect(await focused(page)).toMatchObject({ field: 'summary', says: expect.stringContaining('missing') })
    await page.keyboard.type('Holds up the rail.')
    await write(page, 'replaces', 'the hot regulator')
    await toField(page, 'console')
    await page.keyboard.press('T')
    await write(page, 'licence', 'CERN-OHL-P-2.0')
    await page.keyboard.press('Enter')
    await page.locator('.sumerr', { hasText: 'One field' }).waitFor()
    await untilFocused(page, '#errors')
    await press(page, 'a', 'Name')
    await page.keyboard.type('Corbel')
    await page.keyboard.press('Enter')
    await page.waitForURL('**/boards/corbel/fit**')
    await untilFocused(page, '.done')

    await page.keyboard.press('Tab')
    const first = (await focused(page)).field
    expect(first).toMatch(/^claim\./)
    await page.keyboard.type('fits with')
    await press(page, 'button', 'Save the claims')
    await untilFocused(page, '#errors')
    await page.keyboard.press('Tab')
    await page.keyboard.press('Enter')
    expect((await focused(page)).field).toBe(first.replace('claim', 'reason'))
    await page.keyboard.type('Bend the shield up first.')
    await page.keyboard.press('Enter')
    await page.waitForURL('**/boards/corbel?done=fit**')
    await page.getByText('Bend the shield up first.').waitFor()

    await press(page, 'a', 'Draft a release')
    await page.waitForURL('**/releases/new')
    await write(page, 'version', '1.0')
    await page.keyboard.press('Enter')
    await untilFocused(page, '#errors')
    await press(page, 'a', 'Version')
    await page.keyboard.press('Control+A')
    await page.keyboard.type('1.0.0')
    await write(page, 'layers', '4')
    await write(page, 'thicknessMm', '0.8')
    await page.keyboard.press('Enter')
    await page.waitForURL('**/releases/1.0.0?done=drafted')

    await press(page, 'button', 'Upload and check')
    await untilFocused(page, '#bundle')
    expect((await focused(page)).says).toContain('Choose the bundle first')
    await page.locator('#bundle').setInputFiles({
      name: 'corbel.zip',
      mimeType: 'application/zip',
      buffer: await readFile(bundleFile)
    })
    await press(page, 'button', 'Upload and check')
    await page.getByText('The bundle check raised').waitFor({ timeout: 40_000 })
    await untilFocused(page, '.done')
    const open = await page.getByLabel('Your answer').evaluateAll((all) => all.map((one) => (one as HTMLTextAreaElement).name))
    for (const answer of open) await write(page, answer, 'Meant so.')
    if (open.length > 0) {
      await press(page, 'button', 'Save the answers')
      await page.waitForURL('**?done=answered**')
    }
    await press(page, 'button', 'Publish 1.0.0')
    await page.locator('.tag.released').waitFor()
    await untilFocused(page, '.done')
    expect(await page.title()).toContain('Corbel 1.0.0')
    await close()
  })

  it(
    'an installer files a report by the unit tag, of a failure, with everything wrong at first',
    { timeout: 40_000 },
    async () => {
      const { tag } = await site.query((db) => db.selectFrom('units').orderBy('tag').select('tag').executeTakeFirstOrThrow())
      const { page, close } = await openPage(chromium, { baseURL: site.url, locale: 'en-US' }, refusals)
      await signIn(page, 'Remy Colstad')
      await press(page, 'a', 'File a report')
      await page.waitForURL('**/report')
      await untilFocused(page, 'h1')

      await write(page, 'unit', 'no-such-unit')
      await page.keyboard.press('Enter')
      await untilFocused(page, '#errors')
      await press(page, 'a', 'Unit tag')
      expect((await focused(page)).says).toContain('No unit has the tag')
      await page.keyboard.press('Control+A')
      await page.keyboard.type(tag.toLowerCase())
      await page.keyboard.press('Enter')
      await page.waitForURL('**/report?unit=**')
      await toField(page, 'revision')
      await page.keyboard.press('Space')
      await page.keyboard.press('Enter')
      await page.waitForURL('**revision=**')
      await untilFocused(page, 'h1')
      expect(await page.title()).toMatch(/ on \S+: file an install report/)

      await toField(page, 'installed_on')
      await page.keyboard.type('12312099')
      await write(page, 'notes', 'Kept all along.')
      await press(page, 'button', 'File report')
      await untilFocused(page, '#errors')
      const summary = await page.locator('#errors').innerText()
      for (const said of ['2099-12-31 has not come yet', 'how the fault was established', 'what it did at first power'])
        expect(summary).toContain(said)

      await press(page, 'a', 'Date fitted')
      expect((await focused(page)).says).toContain('has not come yet')
      await page.keyboard.type('01152026')
      await toField(page, 'evidence')
      await page.keyboard.press('Space')
      expect(await page.locator('input[name=cause]').first().isVisible()).toBe(false)
      await toField(page, 'first_power')
      await page.keyboard.press('ArrowDown')
      await toField(page, 'cause')
      await page.keyboard.press('Space')
      await toField(page, 'notes')
      await toWords(page, 'button', 'File report')
      await page.keyboard.press('Enter')
      await page.keyboard.press('Enter')
      await page.waitForURL('**/reports/*?filed')
      await untilFocused(page, '.done')
      await page.getByText('Kept all along.').waitFor()
      const filed = await site.query((db) =>
        db
          .selectFrom('install_reports')
          .where('notes', '=', 'Kept all along.')
          .select(['unit_tag', 'installed_on', 'first_power'])
          .execute()
      )
      expect(filed).toEqual([{ unit_tag: tag, installed_on: '2026-01-15', first_power: 'partly' }])
      await close()
    }
  )

  it('a visitor asks how long a board lasts in their revision, a maintainer whether a batch is bad', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url, locale: 'en-US' })
    await page.goto('/consoles/talvi-16/TM-3')
    await press(page, 'a', 'How long it lasts')
    await page.waitForURL('**/boards/buttress/reliability?revision=TM-3')
    await untilFocused(page, 'h1')
    expect(await page.title()).toBe('How long Buttress lasts in TM-3 · Fettle')

    await toField(page, 'cause')
    await page.keyboard.type('failures by the f')
    await tabTo(page, (at) => at.element === 'summary' && at.name === 'More to narrow by', 'the further filters')
    await page.keyboard.press('Enter')
    await toField(page, 'evidence')
    await page.keyboard.type('meas')
    await press(page, 'button', 'Count again')
    // a form's answer is a page of its own: the keys begin at its head
    await page.waitForURL('**cause=fitting**evidence=**')
    await page.locator('.inf b', { hasText: 'fault measured' }).waitFor()
    expect(await page.locator('details.nar').getAttribute('open')).not.toBeNull()
    await tabTo(page, (at) => at.name === 'take away', 'a way to take a filter away')
    await page.keyboard.press('Enter')
    await page.waitForURL((url) => !url.searchParams.has('revision') && url.searchParams.get('cause') === 'fitting')
    await untilFocused(page, 'h1')

    await press(page, 'a', 'Count all')
    await page.waitForURL((url) => !url.searchParams.has('cause'))
    await untilFocused(page, 'h1')
    await press(page, 'a', 'How this batch lasts')
    await page.waitForURL('**batch=**')
    await untilFocused(page, 'h1')
    expect(await page.title()).toContain(', batch ')
    await press(page, 'a', 'Batch by batch')
    await page.waitForURL('**#batches')
    await close()
  })
})
