import { existsSync } from 'node:fs'
import { chromium, type Browser, type BrowserContextOptions, type Page } from 'playwright-core'

const executablePath = '/usr/bin/chromium'

/** Debian's Chromium. Root needs --no-sandbox; the pages it opens are our own. */
export async function launchChromium(): Promise<Browser> {
  if (!existsSync(executablePath))
    throw new Error(`Debian's Chromium is not installed (${executablePath}): npm run verify installs it`)
  return chromium.launch({ executablePath, args: process.getuid?.() === 0 ? ['--no-sandbox'] : [] })
}

export type WatchedPage = { page: Page; close(): Promise<void> }

/**
 * A page in a context of its own. A script error, an error on the console or a request to anywhere but loopback fails the test when the
 * page is closed; `allowed` names console errors that a test brings about on purpose.
 */
export async function openPage(
  browser: Browser,
  options: BrowserContextOptions = {},
  allowed: RegExp[] = []
): Promise<WatchedPage> {
  const context = await browser.newContext({ viewport: { width: 1280, height: 900 }, ...options })
  const page = await context.newPage()
  const seen: string[] = []
  page.on('pageerror', (error) => seen.push(`page error: ${error.message}`))
  page.on('console', (message) => {
    const text = `${message.text()} (${message.location().url})`
    if (message.type() === 'error' && !allowed.some((pattern) => pattern.test(text))) seen.push(`console: ${text}`)
  })
  page.on('request', (request) => {
    const { protocol, hostname } = new URL(request.url())
    if (/^https?:$/.test(protocol) && !['localhost', '127.0.0.1'].includes(hostname)) seen.push(`request to ${hostname}`)
  })
  return {
    page,
    close: async () => {
      await context.close()
      if (seen.length > 0) throw new Error(`While the page was open:\n${seen.join('\n')}`)
    }
  }
}
