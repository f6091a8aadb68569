import { createHash } from 'node:crypto'
import { Marked } from 'marked'
import sanitizeHtml from 'sanitize-html'
import type { SafeHtml } from '~/lib/safe-html'

/** Longest text that is read as Markdown, in UTF-16 units; past it the parser's recursion and time are no longer bounded. */
export const maxMarkdownLength = 20_000
const maxCached = 500

const marked = new Marked({ gfm: true, breaks: false, async: false })

const options: sanitizeHtml.IOptions = {
  allowedTags: [
    'p',
    'br',
    'hr',
    'h3',
    'h4',
    'h5',
    'h6',
    'strong',
    'em',
    'del',
    'code',
    'pre',
    'blockquote',
    'ul',
    'ol',
    'li',
    'a',
    'table',
    'thead',
    'tbody',
    'tr',
    'th',
    'td'
  ],
  allowedAttributes: { a: ['href', 'rel'], ol: ['start'] },
  allowedSchemes: ['https', 'mailto'],
  allowedSchemesAppliedToAttributes: ['href'],
  allowProtocolRelative: false,
  disallowedTagsMode: 'discard',
  nestingLimit: 50,
  enforceHtmlBoundary: false,
  transformTags: {
    /* A page has one h1 and its numbered h2: what people write begins below them. */
    h1: 'h3',
    h2: 'h4',
    a: (tagName, { href }) => ({
      tagName,
      attribs: { ...(href !== undefined && isPlainHref(href) ? { href } : {}), rel: 'nofollow ugc noopener' }
    })
  }
}

/** Absolute addresses only: a relative one would make a text point at this site's own forms. */
const isPlainHref = (href: string) => /^(https:\/\/|mailto:)/i.test(href.trim())

const cache = new Map<string, SafeHtml>()

const escapeHtml = (text: string) =>
  text.replace(/[&<>"']/g, (c) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' })[c]!)

/** A text that Markdown cannot take is shown as it was typed. */
const asTyped = (text: string) => `<p>${escapeHtml(text).replace(/\n/g, '<br>')}</p>`

function render(text: string): string {
  if (text.length > maxMarkdownLength) return asTyped(text.slice(0, maxMarkdownLength))
  try {
    return marked.parse(text) as string
  } catch {
    return asTyped(text)
  }
}

/**
 * Markdown of somebody's hand as HTML that may stand in a page: no raw markup survives but the few tags above, no id, class, style or
 * picture, links only to https and mailto. The answer is remembered by the text's hash.
 */
export function renderMarkdown(text: string): SafeHtml {
  const key = createHash('sha256').update(text).digest('base64')
  const known = cache.get(key)
  if (known !== undefined) {
    cache.delete(key)
    cache.set(key, known)
    return known
  }
  const html = sanitizeHtml(render(text), options) as SafeHtml
  cache.set(key, html)
  if (cache.size > maxCached) cache.delete(cache.keys().next().value!)
  return html
}
