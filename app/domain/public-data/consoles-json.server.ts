import { consoleBySlug, listConsoles } from '~/domain/consoles/consoles.server'
import type { Db } from '~db/client.server'
import { nextLink, readPageQuery } from './page-query'

/* The shapes of the API's consoles; content/api.md documents them. */

const api = '/api/v1/consoles'
const links = (slug: string) => ({ self: `${api}/${slug}`, page: `/consoles/${slug}` })

/** `GET /api/v1/consoles` */
export async function consolesJson(db: Db, url: URL) {
  const { limit, after } = readPageQuery(url.searchParams)
  const { consoles, next } = await listConsoles(db, { after, limit })
  return {
    consoles: consoles.map(({ revisions, ...facts }) => ({
      ...facts,
      revisions: revisions.map((r) => r.code),
      links: links(facts.slug)
    })),
    next: nextLink(url, next)
  }
}

/** `GET /api/v1/consoles/:console` */
export async function consoleJson(db: Db, url: URL, slug: string) {
  if (url.searchParams.size > 0) readPageQuery(url.searchParams)
  const { revisions, ...facts } = await consoleBySlug(db, slug)
  return {
    ...facts,
    revisions: revisions.map((r) => ({
      code: r.code,
      builtFrom: r.builtFrom,
      recognise: r.recognise,
      reports: r.reports,
      fit: r.boards.map((b) => ({
        board: b.slug,
        claim: b.claim,
        reason: b.reason === '' ? null : b.reason,
        reports: b.reports
      })),
      page: `/consoles/${slug}/${r.code}`
    })),
    links: links(slug)
  }
}
