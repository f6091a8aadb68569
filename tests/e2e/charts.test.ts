import AxeBuilder from '@axe-core/playwright'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Site } from '../http/harness'
import { launchChromium, openPage } from './chromium'
import { startDemoSite } from './demo-site'

/* The cursor of the charts by keys and by pointing, and what is left without scripts. */

const path = '/boards/buttress/reliability'

let site: Site
let chromium: Browser

beforeAll(async () => {
  ;[site, chromium] = await Promise.all([startDemoSite(), launchChromium()])
})
afterAll(async () => {
  await chromium?.close()
  await site?.close()
})

const chart = (page: Page) => page.locator('.chart', { has: page.getByRole('slider', { name: 'Read the curves' }) }).first()
const dayOf = async (page: Page) => Number(await chart(page).getByRole('slider').getAttribute('aria-valuenow'))

describe('a survival chart', () => {
  it('is one tab stop; keys move its cursor from step to step, to the ends and by tenths', async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url })
    await page.goto(path)
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
    await page.goto(path)
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
    await page.goto(path)
    expect(await page.locator('[role=slider]').count()).toBe(0)
    expect(await page.locator('.chart .on-w svg[role=img]').first().isVisible()).toBe(true)
    expect(await page.locator('.chart-lines').first().innerText()).toContain('day 365 (1 year)')
    expect(await page.locator('.chart-hint:visible').count()).toBe(0)
    await close()
  })
})
