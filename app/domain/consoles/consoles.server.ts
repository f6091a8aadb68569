import type { Db } from '~db/client.server'
import type { FitClaimsTable } from '~db/schema'
import { DomainError } from '~/lib/domain-error'
import * as repo from './consoles.repo.server'

export type Claim = FitClaimsTable['claim']

export type ListedConsole = {
  slug: string
  name: string
  maker: string
  kind: 'home' | 'handheld'
  builtFrom: number | null
  builtTo: number | null
  summary: string
  revisions: { code: string; builtFrom: number | null }[]
  boards: number
}

/** What a board says about one revision, with the number of reports that count there. */
export type BoardOnRevision = {
  slug: string
  name: string
  summary: string
  newest: string | null
  claim: Claim
  reason: string
  reports: number
}

export type RevisionDetail = {
  code: string
  builtFrom: number | null
  recognise: string
  /** Reports on all boards together. */
  reports: number
  boards: BoardOnRevision[]
}

export type ConsoleDetail = Omit<ListedConsole, 'revisions' | 'boards'> & { revisions: RevisionDetail[] }

const facts = (row: repo.ConsoleRow) => ({
  slug: row.slug,
  name: row.name,
  maker: row.maker,
  kind: row.kind,
  builtFrom: row.built_from,
  builtTo: row.built_to,
  summary: row.summary
})

/** One page of consoles by address. `next` is what to pass as `after` for the page that follows; null at the end. */
export async function listConsoles(
  db: Db,
  { after, limit = 20 }: { after?: string | null; limit?: number }
): Promise<{ consoles: ListedConsole[]; next: string | null }> {
  const rows = await repo.list(db, { after: after ?? undefined, limit: limit + 1 })
  const page = rows.slice(0, limit)
  const revisions = await repo.listRevisions(
    db,
    page.map((row) => row.id)
  )
  return {
    consoles: page.map((row) => ({
      ...facts(row),
      revisions: revisions.filter((r) => r.console_id === row.id).map((r) => ({ code: r.code, builtFrom: r.built_from })),
      boards: Number(row.boards ?? 0)
    })),
    next: rows.length > limit ? page.at(-1)!.slug : null
  }
}

/**
 * A console with its revisions in the order in which they were built, and every board that is made for it on each; a board without a claim
 * about a revision is `untested` there.
 * @throws DomainError `not-found`
 */
export async function consoleBySlug(db: Db, slug: string): Promise<ConsoleDetail> {
  const row = await repo.findBySlug(db, slug)
  if (!row) throw new DomainError('not-found', `There is no console at /consoles/${slug.slice(0, 60)}.`)
  const [revisions, boards, claims, counts] = await Promise.all([
    repo.listRevisions(db, [row.id]),
    repo.listBoards(db, row.id),
    repo.listClaims(db, row.id),
    repo.countReports(db, row.id)
  ])
  const key = (boardId: string, revisionId: string) => `${boardId} ${revisionId}`
  const claimAt = new Map(claims.map((c) => [key(c.board_id, c.console_revision_id), c]))
  const countAt = new Map(counts.map((c) => [key(c.board_id, c.console_revision_id), Number(c.n)]))
  return {
    ...facts(row),
    revisions: revisions.map((revision) => {
      const onIt = boards.map((board): BoardOnRevision => {
        const claim = claimAt.get(key(board.id, revision.id))
        return {
          slug: board.slug,
          name: board.name,
          summary: board.summary,
          newest: board.newest,
          claim: claim?.claim ?? 'untested',
          reason: claim?.reason ?? '',
          reports: countAt.get(key(board.id, revision.id)) ?? 0
        }
      })
      return {
        code: revision.code,
        builtFrom: revision.built_from,
        recognise: revision.recognise,
        reports: onIt.reduce((sum, board) => sum + board.reports, 0),
        boards: onIt
      }
    })
  }
}

/**
 * One revision of a console, with its neighbours. Codes are told apart without regard to case.
 * @throws DomainError `not-found`, naming the revisions there are
 */
export async function revisionByCode(db: Db, slug: string, code: string) {
  const console = await consoleBySlug(db, slug)
  const at = console.revisions.findIndex((r) => r.code.toLowerCase() === code.toLowerCase())
  const revision = console.revisions[at]
  if (!revision) {
    const codes = console.revisions.map((r) => r.code).join(', ')
    const others = codes === '' ? 'None is known yet.' : `Its revisions are ${codes}.`
    throw new DomainError('not-found', `The ${console.name} has no revision ${code.slice(0, 40)}. ${others}`)
  }
  return {
    console,
    revision,
    before: console.revisions[at - 1]?.code ?? null,
    after: console.revisions[at + 1]?.code ?? null
  }
}
