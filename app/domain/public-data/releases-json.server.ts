import type { Db } from '~db/client.server'
import { visitor } from '~/domain/accounts/can'
import { boardPage } from '~/domain/boards/board-page.server'
import { boardBySlug, listBoards } from '~/domain/boards/boards.server'
import { publishedReleases, releaseDetail } from '~/domain/releases/public-releases.server'
import { releasePath } from '~/domain/releases/release-path'
import { nextLink, readPageQuery } from './page-query'

/* The shapes of the API's first resources; content/api.md documents them. Drafts are never among them: everything is asked as a visitor. */

const api = '/api/v1/boards'
const self = (slug: string) => ({ self: `${api}/${slug}`, page: `/boards/${slug}`, releases: `${api}/${slug}/releases` })

/** `GET /api/v1/boards` */
export async function boardsJson(db: Db, url: URL) {
  const { limit, after } = readPageQuery(url.searchParams, ['q'])
  const { boards, next } = await listBoards(db, { q: url.searchParams.get('q') ?? undefined, after, limit })
  return {
    boards: boards.map((b) => ({
      slug: b.slug,
      name: b.name,
      summary: b.summary,
      replaces: b.replaces,
      console: { slug: b.consoleSlug, name: b.consoleName },
      licence: b.licence,
      openedAt: b.openedAt,
      newest: b.newest && {
        version: b.newest.version,
        state: b.newest.state,
        boardRevision: b.newest.boardRevision,
        publishedAt: b.newest.publishedAt
      },
      links: self(b.slug)
    })),
    next: nextLink(url, next)
  }
}

/** `GET /api/v1/boards/:board` */
export async function boardJson(db: Db, url: URL, slug: string) {
  refuseQuery(url)
  const page = await boardPage(db, visitor, slug)
  const board = await boardBySlug(db, slug)
  return {
    slug: page.slug,
    name: page.name,
    summary: page.summary,
    replaces: page.replaces,
    description: board.description_md,
    console: { slug: page.consoleSlug, name: page.consoleName },
    licence: page.licence,
    openedAt: board.created_at,
    maintainers: page.maintainers,
    fit: page.fit.map(({ code, claim, reason }) => ({ revision: code, claim, reason: reason === '' ? null : reason })),
    newest: page.newest && { version: page.newest.version, state: page.newest.state, boardRevision: page.newest.boardRevision },
    links: { ...self(slug), reliability: `${api}/${slug}/reliability` }
  }
}

/** `GET /api/v1/boards/:board/releases` */
export async function releasesJson(db: Db, url: URL, slug: string) {
  const { limit, after } = readPageQuery(url.searchParams)
  const { releases, next } = await publishedReleases(db, slug, { after, limit })
  return { releases: releases.map((r) => ({ ...r, links: releaseLinks(slug, r.version) })), next: nextLink(url, next) }
}

/** `GET /api/v1/boards/:board/releases/:version` */
export async function releaseJson(db: Db, url: URL, slug: string, version: string) {
  refuseQuery(url)
  return { ...(await releaseDetail(db, slug, version)), links: releaseLinks(slug, version) }
}

const releaseLinks = (slug: string, version: string) => ({
  self: `${api}/${slug}/releases/${encodeURIComponent(version)}`,
  page: releasePath(slug, version),
  bundle: `${releasePath(slug, version)}/bundle`,
  board: `${api}/${slug}`
})

const refuseQuery = (url: URL): void => {
  if (url.searchParams.size > 0) readPageQuery(url.searchParams)
}
