import { renderGuideMarkdown } from '~/server/guide-html.server'
import { DomainError } from '~/lib/domain-error'
import type { SafeHtml } from '~/lib/safe-html'
import { parseGuide } from './parse-guide'

/* The files are part of the build: an address is looked up among their names and never becomes a path. */
const files = import.meta.glob<string>('../../../content/*.md', { query: '?raw', import: 'default', eager: true })

export type Guide = {
  page: string
  heading: string
  lead: string
  opening: SafeHtml | null
  sections: { id: string; heading: string; html: SafeHtml }[]
}

/** What a reader needs first stands first; guides that are not named here follow by their address. */
const order = ['safety', 'reporting', 'figures', 'worked-examples', 'releasing', 'api', 'problems']
const place = (page: string) => (order.includes(page) ? order.indexOf(page) : order.length)

const guides: ReadonlyMap<string, Guide> = new Map(
  Object.entries(files)
    .map(([file, text]): [string, Guide] => {
      const page = file.slice(file.lastIndexOf('/') + 1, -'.md'.length)
      const { heading, lead, opening, sections } = parseGuide(text)
      return [
        page,
        {
          page,
          heading,
          lead,
          opening: opening === '' ? null : renderGuideMarkdown(opening),
          sections: sections.map(({ id, heading, markdown }) => ({ id, heading, html: renderGuideMarkdown(markdown) }))
        }
      ]
    })
    .sort(([a], [b]) => place(a) - place(b) || a.localeCompare(b))
)

/** Every guide, in the order in which they are offered. */
export const listGuides = () => [...guides.values()].map(({ page, heading, lead }) => ({ page, heading, lead }))

/** @throws DomainError `not-found` */
export function guideByPage(page: string): Guide {
  const guide = guides.get(page)
  if (!guide) throw new DomainError('not-found', `There is no guide at /guides/${page.slice(0, 60)}.`)
  return guide
}
