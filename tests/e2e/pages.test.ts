import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import AxeBuilder from '@axe-core/playwright'
import type { Browser, BrowserContext } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Site } from '../http/harness'
import { launchChromium, openPage } from './chromium'
import { startDemoSite } from './demo-site'

/*
 * Every page as the lowest role that may see it: no error on the console, nothing that scrolls sideways, and no violation of
 * WCAG 2.2 A and AA that axe-core finds. With SHOTS set to a folder the pages are also pictured there, to be looked at.
 */

const shots = process.env.SHOTS ?? null
const views = [
  { width: 360, colorScheme: 'light', withAxe: true },
  { width: 768, colorScheme: 'light', withAxe: false },
  { width: 1280, colorScheme: 'dark', withAxe: true }
] as const
const shotViews = [
  { width: 360, colorScheme: 'dark', withAxe: false },
  { width: 768, colorScheme: 'dark', withAxe: false },
  { width: 1280, colorScheme: 'light', withAxe: false }
] as const

/** Login of who looks; null for a visitor. */
const pages: [name: string, path: string, who: string | null][] = [
  ['home', '/', null],
  ['home-search-empty', '/?q=nothing-like-this', null],
  ['board', '/boards/buttress', null],
  ['boards', '/boards', null],
  ['board-new', '/boards/new', 'remy-colstad'],
  ['board-edit', '/boards/buttress/edit', 'ilse-varnik'],
  ['board-fit', '/boards/buttress/fit', 'ilse-varnik'],
  ['release', '/boards/buttress/releases/1.1.0', null],
  ['release-trial', '/boards/sundial/releases/1.0.0-beta.1', null],
  ['release-withdrawn', '/boards/sundial/releases/1.0.0', null],
  ['release-new', '/boards/buttress/releases/new', 'ilse-varnik'],
  ['release-withdraw', '/boards/buttress/releases/1.1.0/withdraw', 'ilse-varnik'],
  ['reliability', '/boards/buttress/reliability', null],
  ['reliability-bad', '/boards/buttress/reliability?as-of=yesterday', null],
  ['reliability-few', '/boards/buttress/reliability?revision=TM-6', null],
  ['reliability-turnbull', '/boards/sundial/reliability?silent=bounds&steps=revision:TP-4', null],
  ['reliability-batch', '/boards/buttress/reliability?batch=1.1.1/2024-09&cause=board&first-power=set-aside', null],
  ['calculator', '/calculators/survival', null],
  ['calculator-groups', '/calculators/survival?example=batches', null],
  ['calculator-causes', '/calculators/survival?example=causes', null],
  ['calculator-intervals', '/calculators/survival?example=check-ins', null],
  ['bench', '/bench', 'ilse-varnik'],
  ['bench-empty', '/bench', 'remy-colstad'],
  ['report', '/report', 'remy-colstad'],
  ['report-which', '/report?board=buttress', 'remy-colstad'],
  ['report-form', '/report?board=sundial&release=1.0.0&revision=TP-4', 'remy-colstad'],
  ['reports', '/reports', 'bram-tolleway'],
  ['reports-empty', '/reports', 'remy-colstad'],
  ['consoles', '/consoles', null],
  ['console', '/consoles/talvi-16', null],
  ['console-revision', '/consoles/talvi-16/TM-3', null],
  ['fit', '/fit', null],
  ['fit-answer', '/fit?console=talvi-16&revision=TM-1', null],
  ['guides', '/guides', null],
  ['guide-figures', '/guides/figures', null],
  ['guide-worked', '/guides/worked-examples', null],
  ['guide-safety', '/guides/safety', null],
  ['guide-api', '/guides/api', null],
  ['sign-in', '/sign-in', null],
  ['account', '/account', 'remy-colstad'],
  ['not-found', '/boards/nothing-like-this', null]
]

let site: Site
let chromium: Browser
const cookies = new Map<string, Awaited<ReturnType<BrowserContext['cookies']>>>()

beforeAll(async () => {
  ;[site, chromium] = await Promise.all([startDemoSite(), launchChromium()])
  if (shots) mkdirSync(shots, { recursive: true })
  for (const login of new Set(pages.flatMap(([, , who]) => who ?? []))) {
    const browser = await site.signInByGithub(login)
    cookies.set(
      login,
      [...browser.cookies].map(([name, value]) => ({
        name,
        value,
        domain: '127.0.0.1',
        path: '/',
        expires: -1,
        httpOnly: true,
        secure: false,
        sameSite: 'Lax'
      }))
    )
  }
})
afterAll(async () => {
  await chromium?.close()
  await site?.close()
})

/** A page that answers 4xx is logged by the browser as a resource that failed. */
const statusLines = [/Failed to load resource: the server responded with a status of 4\d\d/]

describe.concurrent.each(pages)('%s', (name, path, who) => {
  it(`${path} is readable at every width, in light and dark`, async () => {
    const { page, close } = await openPage(chromium, { baseURL: site.url }, statusLines)
    if (who) await page.context().addCookies(cookies.get(who)!)
    // Width and colours change by styles alone: one load serves all views.
    const answer = await page.goto(path, { waitUntil: 'load' })
    expect(answer!.status(), path).toBeLessThan(500)
    await page.locator('h1').waitFor()
    for (const { width, colorScheme, withAxe } of shots ? [...views, ...shotViews] : views) {
      await page.setViewportSize({ width, height: 800 })
      await page.emulateMedia({ colorScheme })
      const sideways = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)
      expect(sideways, `scrolls sideways at ${width} px`).toBe(0)
      if (shots) await page.screenshot({ path: join(shots, `${name}-${width}-${colorScheme}.png`), fullPage: true })
      if (!withAxe) continue
      const { violations } = await new AxeBuilder({ page })
        .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
        .analyze()
      expect(
        violations.map(
          (v) =>
            `${v.id}: ${v.help} — ${v.nodes
              .map((n) => n.target.join(' '))
              .slice(0, 3)
              .join(' | ')}`
        ),
        `axe at ${width} px, ${colorScheme}`
      ).toEqual([])
    }
    await close()
  })
})
