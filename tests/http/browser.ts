/** What `Browser.fetch` takes beyond `fetch`: `form` is sent urlencoded, `from` is the origin the request claims to come from. */
export type BrowserInit = Omit<RequestInit, 'redirect'> & {
  form?: Record<string, string | string[]>
  /** Another site's origin, or null to send neither Origin nor Sec-Fetch-Site, as no browser does. */
  from?: string | null
  /** How many redirects to follow; 0 (the default) gives the redirect itself. */
  follow?: number
}

let count = 0

/**
 * A browser without scripts: keeps cookies for each host and path-less, sends Origin and Sec-Fetch-Site with what changes something, and
 * follows redirects only when told.
 */
export class Browser {
  readonly cookies = new Map<string, string>()
  /** Where it seems to come from, told as a proxy in front of the server would; each browser has its own place, hence its own limits. */
  readonly ip: string

  constructor(
    readonly origin: string,
    ip?: string
  ) {
    count++
    this.ip = ip ?? `10.${(count >> 16) & 255}.${(count >> 8) & 255}.${count & 255}`
  }

  /** @param path of the site, or an absolute address of a fake (no cookies go there) */
  async fetch(path: string, { form, from, follow = 0, ...init }: BrowserInit = {}): Promise<Response> {
    const url = new URL(path, this.origin)
    const isOurs = url.origin === this.origin
    const method = init.method ?? (form ? 'POST' : 'GET')
    const headers = new Headers(init.headers)
    if (isOurs && this.cookies.size > 0 && !headers.has('Cookie'))
      headers.set('Cookie', [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; '))
    if (isOurs) headers.set('X-Forwarded-For', this.ip)
    if (!['GET', 'HEAD'].includes(method) && from !== null) {
      headers.set('Origin', from ?? url.origin)
      headers.set('Sec-Fetch-Site', from === undefined || from === url.origin ? 'same-origin' : 'cross-site')
    }
    const body = form ? encodeForm(form) : init.body
    const response = await fetch(url, { ...init, method, headers, body, redirect: 'manual' })
    if (isOurs) for (const line of response.headers.getSetCookie()) this.#store(line)
    const location = response.headers.get('Location')
    if (follow > 0 && location !== null && response.status >= 300 && response.status < 400) {
      await response.body?.cancel()
      return this.fetch(new URL(location, url).href, { follow: follow - 1 })
    }
    return response
  }

  #store(line: string): void {
    const [pair = '', ...attributes] = line.split(';').map((part) => part.trim())
    const at = pair.indexOf('=')
    const isGone = attributes.some((a) => /^max-age=0$/i.test(a))
    if (isGone) this.cookies.delete(pair.slice(0, at))
    else this.cookies.set(pair.slice(0, at), pair.slice(at + 1))
  }

  /** Loads a page and gives its HTML; anything but the expected status is an error that shows the page's text. */
  async page(path: string, status = 200): Promise<string> {
    const response = await this.fetch(path)
    const html = await response.text()
    if (response.status !== status) throw new Error(`GET ${path} answered ${response.status}, not ${status}: ${textOf(html)}`)
    return html
  }
}

function encodeForm(form: Record<string, string | string[]>): URLSearchParams {
  const body = new URLSearchParams()
  for (const [name, value] of Object.entries(form)) for (const one of [value].flat()) body.append(name, one)
  return body
}

/** The words of a page, without scripts and markup, on one line. */
export const textOf = (html: string): string =>
  html
    .replace(/<(script|style)\b[\s\S]*?<\/\1>/gi, ' ')
    .replace(/<!--[\s\S]*?-->/g, '')
    .replace(/<[^>]+>/g, ' ')
    .replace(/&(amp|lt|gt|quot|#39|#x27);/g, (_, name: string) => ({ amp: '&', lt: '<', gt: '>', quot: '"' })[name] ?? "'")
    .replace(/\s+/g, ' ')
    .trim()
