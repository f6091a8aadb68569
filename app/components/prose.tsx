import type { SafeHtml } from '~/lib/safe-html'

/** Text that somebody wrote in Markdown. The only place that sets HTML, and only sanitized HTML. */
export function Prose({ html }: { html: SafeHtml }) {
  return <div className="prose" dangerouslySetInnerHTML={{ __html: html }} />
}
