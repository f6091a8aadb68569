import AxeBuilder from '@axe-core/playwright'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Site } from '../http/harness'
import { launchChromium, openPage } from './chromium'
import { startDemoSite } from './demo-site'

/* What is drawn, by keys, pointing and without scripts: the layer viewer, where what is seen is told from where the picture lies in its pane, and charts. */

const path = '/boards/buttress/releases/1.1.0'
const curvesPath = '/boards/buttress/reliability'

let site: Site
let chromium: Browser

beforeAll(async () => {
  ;[site, chromium] = await Promise.all([startDemoSite(), launchChromium()])
  // A finding with a place, whatever the demo bundles hold: 2 mm to the right of the middle of the board.
  await site.query(async (db) => {
    const release = await db
      .selectFrom('releases')
      .innerJoin('boards', 'boards.id', 'releases.board_id')
      .where('boards.slug', '=', 'buttress')
      .where('version', '=', '1.1.0')
      .select(['releases.id', 'picture_box_json'])
      .executeTakeFirstOrThrow()
    const box = JSON.parse(release.picture_box_json!) as { minX: number; minY: number; maxX: number; maxY: number }
    await db.updateTable('findings').set({ place_x_mm: null, place_y_mm: null }).where('release_id', '=', release.id).execute()
    const first = await db
      .selectFrom('findings')
      .where('release_id', '=', release.id)
      .orderBy('position')
      .select('id')
      .executeTakeFirstOrThrow()
    await db
      .updateTable('findings')
      .set({ place_x_mm: (box.minX + box.maxX) / 2 + 2, place_y_mm: (box.minY + box.maxY) / 2, place_side: 'bottom' })
      .where('id', '=', first.id)
      .execute()
  })
})
afterAll(async () => {
  await chromium?.close()
  await site?.close()
})

const pane = (page: Page) => page.locator('.lv-pane:visible')

/** Where the first picture lies: the middle of the pane in shares of the picture, and the picture's width in panes. */
const seen = (page: Page) =>
  pane(page).evaluate((svg) => {
    const image = svg.querySelector('image')!
    const at = (name: string) => Number(image.getAttribute(name))
    const { width, height } = (svg as SVGSVGElement).viewBox.baseVal
    return {
      x: (width / 2 - at('x')) / at('width'),
      y: (height / 2 - at('y')) / at('height'),
      wide: at('width') / width,
      src: image.getAttribute('href')!
    }
  })

describe('the layer viewer', () => {
  it('zooms and moves by keys, and gives the page back what it does not need', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url })
    await page.goto(path)
    await page.getByRole('button', { name: 'Zoom in' }).waitFor()
    const whole = await seen(page)
    expect(whole.x).toBeCloseTo(0.5, 2)
    await pane(page).focus()
    for (let i = 0; i < 4; i++) await page.keyboard.press('+')
    const near = await seen(page)
    expect(near.wide / whole.wide).toBeCloseTo(1.5 ** 4, 1)
    await page.keyboard.press('ArrowRight')
    await page.keyboard.press('ArrowUp')
    const moved = await seen(page)
    expect(moved.x).toBeGreaterThan(near.x)
    expect(moved.y).toBeLessThanOrEqual(near.y)
    expect(await page.locator('.lv [role=status]').innerText()).toMatch(/^Middle x -?[\d.]+, y -?[\d.]+ mm/)
    await page.keyboard.press('-')
    expect((await seen(page)).wide).toBeLessThan(moved.wide)
    await page.keyboard.press('0')
    expect(await seen(page)).toEqual(whole)
    // Now the arrow is the page's again.
    const before = await page.evaluate(() => window.scrollY)
    await page.keyboard.press('ArrowDown')
    await page.waitForFunction((y) => window.scrollY > y, before)
    await close()
  })

  it('zooms and moves by buttons, by dragging and by the wheel, which else scrolls the page', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url })
    await page.goto(path)
    await page.getByRole('button', { name: 'Zoom in' }).click()
    await page.getByRole('button', { name: 'Zoom in' }).click()
    const near = await seen(page)
    expect(near.wide).toBeGreaterThan(1.5)
    await page.getByRole('button', { name: 'Move left' }).click()
    expect((await seen(page)).x).toBeLessThan(near.x)
    await page.getByRole('button', { name: 'Whole board' }).click()
    const whole = await seen(page)
    expect(whole.wide).toBeLessThan(1)

    await pane(page).scrollIntoViewIfNeeded()
    const box = (await pane(page).boundingBox())!
    const at = { x: box.x + box.width * 0.7, y: box.y + box.height * 0.5 }
    await page.mouse.move(at.x, at.y)
    await page.evaluate(() => (document.activeElement as HTMLElement | null)?.blur())
    const top = await page.evaluate(() => window.scrollY)
    await page.mouse.wheel(0, -120)
    await page.waitForFunction((y) => window.scrollY < y, top)
    expect(await seen(page)).toEqual(whole)

    await pane(page).focus()
    const again = (await pane(page).boundingBox())!
    await page.mouse.move(again.x + again.width * 0.7, again.y + again.height * 0.5)
    await page.mouse.wheel(0, -400)
    await page.waitForFunction(() => document.querySelector('.lv-pane')!.hasAttribute('data-zoomed'))
    const zoomed = await seen(page)
    expect(zoomed.x).toBeGreaterThan(whole.x)
    await page.mouse.down()
    await page.mouse.move(again.x + again.width * 0.9, again.y + again.height * 0.5, { steps: 4 })
    await page.mouse.up()
    expect((await seen(page)).x).toBeLessThan(zoomed.x)
    await close()
  })

  it('shows single layers over each other, goes to a finding’s place and from its number back to the finding', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url })
    await page.goto(path)
    await page.getByRole('button', { name: 'Zoom in' }).waitFor()
    const finished = (await seen(page)).src
    await page.getByLabel('L2 copper').check()
    await page.getByLabel('all holes').check()
    expect(await pane(page).locator('image').count()).toBe(2)
    expect((await seen(page)).src).not.toBe(finished)
    expect(new URL(page.url()).searchParams.getAll('layer')).toHaveLength(2)
    await page.getByRole('button', { name: 'Show the finished board' }).click()
    expect((await seen(page)).src).toBe(finished)

    await page.getByRole('link', { name: /^Show on the board/ }).click()
    await page.waitForFunction(() => document.activeElement?.classList.contains('lv-pane'))
    expect(await page.getByRole('radio', { name: 'from below' }).isChecked()).toBe(true)
    const there = await seen(page)
    expect(there.wide).toBeGreaterThan(2)
    // 2 mm to the right of the middle on the layers lies to the left of it when seen from below.
    expect(there.x).toBeLessThan(0.5)
    await pane(page)
      .getByRole('link', { name: /^Place 1/ })
      .click()
    await page.waitForFunction(() => document.activeElement?.id === 'f1')
    await close()
  })

  it('shows the chosen view without scripts, its places drawn', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url, javaScriptEnabled: false })
    await page.goto(`${path}?view=bottom`)
    const bottom = (await page.locator('.on-w .lv-pane image').getAttribute('href'))!
    expect(await page.locator('.on-w .lv-pane .lv-mark').count()).toBe(1)
    await page.getByLabel('L1 copper').check()
    await page.getByRole('button', { name: 'Show these' }).click()
    expect(new URL(page.url()).search).toBe('?view=bottom&layer=1')
    const image = page.locator('.on-w .lv-pane image')
    expect(await image.getAttribute('href')).not.toBe(bottom)
    expect(await image.getAttribute('transform')).toContain('scale(-1 1)')
    await page.getByRole('link', { name: /^Show on the board/ }).click()
    expect(new URL(page.url()).searchParams.get('at')).toBe('1')
    expect(Number(await page.locator('.on-w .lv-pane image').getAttribute('width'))).toBeGreaterThan(1600)
    await close()
  })

  it('has room on the smallest phone, and no violation that axe-core finds', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url, viewport: { width: 320, height: 640 } })
    await page.goto(`${path}?view=top&layer=1&layer=2`)
    await page.getByRole('button', { name: 'Zoom in' }).waitFor()
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(320)
    for (const button of await page.locator('.lv-tools button').all()) {
      const box = (await button.boundingBox())!
      expect(Math.min(box.width, box.height)).toBeGreaterThanOrEqual(44)
    }
    const { violations } = await new AxeBuilder({ page }).include('.lv').analyze()
    expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0]!.html}`)).toEqual([])
    await close()
  })
})

const chart = (page: Page) => page.locator('.chart', { has: page.getByRole('slider', { name: 'Read the curves' }) }).first()
const dayOf = async (page: Page) => Number(await chart(page).getByRole('slider').getAttribute('aria-valuenow'))

describe('a survival chart', () => {
  it('is one tab stop; keys move its cursor from step to step, to the ends and by tenths', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url })
    await page.goto(curvesPath)
    const slider = chart(page).getByRole('slider')
    await slider.waitFor()
    const before = await chart(page).boundingBox()
    for (let presses = 0; presses < 150; presses++) {
      await page.keyboard.press('Tab')
      if (await slider.evaluate((at) => at === document.activeElement)) break
    }
    expect(await slider.evaluate((at) => getComputedStyle(at).outlineStyle)).toBe('solid')
    expect(await dayOf(page)).toBe(365)
    expect(await chart(page).locator('.chart-cursor:visible').count()).toBe(0)

    await page.keyboard.press('ArrowRight')
    const first = await dayOf(page)
    expect(first).toBeGreaterThan(365)
    expect(await chart(page).locator('.chart-cursor:visible').count()).toBe(1)
    const said = await chart(page).locator('[aria-live]').innerText()
    expect(said).toMatch(new RegExp(`^Day ${first} \\(1 year.*\\): \\S+ \\d+ %, 95\\s% interval \\d+ to [\\w ]+, \\d+ followed;`))
    expect(await chart(page).locator('.chart-lines').innerText()).toContain(`day ${first}`)
    await page.keyboard.press('ArrowLeft')
    expect(await dayOf(page)).toBe(365)
    await page.keyboard.press('End')
    const last = await dayOf(page)
    await page.keyboard.press('PageDown')
    expect(await dayOf(page)).toBeLessThan(last * 0.95)
    await page.keyboard.press('Home')
    expect(await dayOf(page)).toBe(0)

    // Of a held key only where it ends is read out.
    await page.keyboard.down('ArrowRight')
    const once = await chart(page).locator('[aria-live]').innerText()
    for (let i = 0; i < 3; i++) await page.keyboard.down('ArrowRight')
    expect(await chart(page).locator('[aria-live]').innerText()).toBe(once)
    await page.keyboard.up('ArrowRight')
    expect(await chart(page).locator('[aria-live]').innerText()).toContain(`Day ${await dayOf(page)}`)

    await page.keyboard.press('ArrowDown')
    expect(await chart(page).locator('[aria-live]').innerText()).toContain(' marked. Day ')
    const box = await chart(page).boundingBox()
    expect([box!.width, box!.height], 'nothing moves').toEqual([before!.width, before!.height])
    const { violations } = await new AxeBuilder({ page }).include('.chart').analyze()
    expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0]!.html}`)).toEqual([])

    await page.keyboard.press('Escape')
    expect(await chart(page).locator('.chart-cursor:visible').count()).toBe(0)
    expect(await page.evaluate(() => document.activeElement === document.body)).toBe(true)
    await close()
  })

  it('is read by pointing, which marks the line that is near', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url })
    await page.goto(curvesPath)
    await chart(page).getByRole('slider').waitFor()
    const marked = () => chart(page).locator('.chart-lines li.b .nm').innerText()
    const was = await marked()
    const other = chart(page).locator('.on-w svg [data-curve=other] path').last()
    await other.scrollIntoViewIfNeeded()
    const line = (await other.boundingBox())!
    await page.mouse.move(line.x + line.width - 12, line.y + line.height - 1)
    await page.waitForFunction(
      (name) => document.querySelector('.chart-lines li.b .nm')?.textContent?.trim() !== name,
      was.trim()
    )
    expect(await chart(page).locator('.chart-cursor:visible').count()).toBe(1)
    await page.mouse.move(2, 2)
    await page.waitForFunction(
      (name) => document.querySelector('.chart-lines li.b .nm')?.textContent?.trim() === name,
      was.trim()
    )
    expect(await chart(page).locator('.chart-cursor:visible').count()).toBe(0)
    await close()
  })

  it('keeps its drawing and its figures at one year without scripts', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url, javaScriptEnabled: false })
    await page.goto(curvesPath)
    expect(await page.locator('[role=slider]').count()).toBe(0)
    expect(await page.locator('.chart .on-w svg[role=img]').first().isVisible()).toBe(true)
    expect(await page.locator('.chart-lines').first().innerText()).toContain('day 365 (1 year)')
    expect(await page.locator('.chart-hint:visible').count()).toBe(0)
    await close()
  })
})
