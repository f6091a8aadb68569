import { consoleBySlug, listConsoles, type ConsoleDetail, type RevisionDetail } from '~/domain/consoles/consoles.server'
import { DomainError, type FieldError } from '~/lib/domain-error'
import type { Db } from '~db/client.server'
import { byFit } from './by-fit'

/** As many consoles as the form offers; others are reached from their own page. */
const mostConsoles = 50

/** The consoles to choose from, each with the codes of its revisions. */
export async function consolesToAsk(db: Db) {
  const { consoles } = await listConsoles(db, { limit: mostConsoles })
  return consoles.map(({ slug, name, revisions }) => ({ slug, name, revisions: revisions.map((r) => r.code) }))
}

/** The address that a choice of the form stands for, `talvi-16/TM-3` or `talvi-16`; null where nothing was chosen in it. */
export function chosenAddress(query: URLSearchParams): string | null {
  const machine = query.get('machine')
  if (machine === null) return null
  const [slug = '', code = ''] = machine.split('/', 2)
  return `/fit?${new URLSearchParams({ console: slug, ...(code && { revision: code }) })}`
}

/**
 * The question of the page `/fit` as its address puts it, and the answer from the maintainers' claims: the boards for one revision, or,
 * while the revision is not known, for all of them. Nothing is answered before a console is chosen.
 */
export async function fitQuestion(db: Db, query: URLSearchParams) {
  const consoles = await consolesToAsk(db)
  const [slug, code] = [query.get('console')?.trim() || null, query.get('revision')?.trim() || null]
  const errors: FieldError[] = []
  const detail = slug === null ? null : await findConsole(db, slug)
  if (slug !== null && !detail) errors.push({ path: 'console', message: 'There is no such console. Choose one of the list.' })
  const question = { consoles, console: detail?.slug ?? null }
  if (!detail) return { ...question, revision: null, errors, answer: null }

  const revision = detail.revisions.find((r) => r.code === code) ?? null
  if (code !== null && !revision)
    errors.push({ path: 'revision', message: `The ${detail.name} has no revision ${code.slice(0, 40)}. Choose again.` })
  const answer = {
    consoleName: detail.name,
    consoleSlug: detail.slug,
    revision: revision && { ...revision, boards: [...revision.boards].sort(byFit) },
    boards: boardsAcross(detail.revisions)
  }
  return { ...question, revision: revision?.code ?? null, errors, answer }
}

async function findConsole(db: Db, slug: string): Promise<ConsoleDetail | null> {
  try {
    return await consoleBySlug(db, slug)
  } catch (error) {
    if (error instanceof DomainError && error.kind === 'not-found') return null
    throw error
  }
}

/** The same claims by board: one row a board, one cell a revision. */
function boardsAcross(revisions: RevisionDetail[]) {
  const boards = revisions[0]?.boards ?? []
  return boards.map(({ slug, name, summary, newest }, i) => ({
    slug,
    name,
    summary,
    newest,
    cells: revisions.map(({ code, boards: onIt }) => ({ code, claim: onIt[i]!.claim, reason: onIt[i]!.reason }))
  }))
}
