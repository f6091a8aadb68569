import { Marked } from 'marked'
import sanitizeHtml from 'sanitize-html'
import type { SafeHtml } from '~/lib/safe-html'

const marked = new Marked({ gfm: true, async: false })

/** The guides are the project's own: links within the site and tables are theirs too. Raw markup is still not. */
const options: sanitizeHtml.IOptions = {
  allowedTags: [
    'p',
    'br',
    'hr',
    'h3',
    'h4',
    'strong',
    'em',
    'code',
    'pre',
    'blockquote',
    'ul',
    'ol',
    'li',
    'a',
    'sup',
    'sub'
  ].concat(['table', 'thead', 'tbody', 'tr', 'th', 'td']),
  allowedAttributes: { a: ['href'], ol: ['start'], th: ['scope'] },
  allowedSchemes: ['https', 'mailto'],
  allowProtocolRelative: false,
  transformTags: { th: sanitizeHtml.simpleTransform('th', { scope: 'col' }) }
}

/** A part of a guide as HTML. */
export const renderGuideMarkdown = (markdown: string): SafeHtml =>
  sanitizeHtml(marked.parse(markdown) as string, options) as SafeHtml
