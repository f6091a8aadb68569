import { consoleBySlug, listConsoles, type RevisionDetail } from '~/domain/consoles/consoles.server'
import type { FieldError } from '~/lib/domain-error'
import type { Db } from '~db/client.server'
import { byFit } from './by-fit'

/** As many consoles as the form offers. */
const mostConsoles = 200

/**
 * The question of the page `/fit` as its address puts it, and the answer from the maintainers' claims: the boards for one revision, or,
 * while the revision is not known, for all of them. Nothing is answered before a console is chosen.
 */
export async function fitQuestion(db: Db, query: URLSearchParams) {
  const { consoles } = await listConsoles(db, { limit: mostConsoles })
  const [slug, code] = [query.get('console')?.trim() || null, query.get('revision')?.trim() || null]
  const errors: FieldError[] = []
  const chosen = consoles.find((c) => c.slug === slug)
  if (slug !== null && !chosen) errors.push({ path: 'console', message: 'There is no such console. Choose one of the list.' })
  const shown = chosen ?? consoles[0]
  const question = {
    consoles: consoles.map((c) => ({ slug: c.slug, name: c.name })),
    console: shown?.slug ?? null,
    revisions: shown?.revisions.map((r) => r.code) ?? []
  }
  if (!chosen) return { ...question, revision: null, errors, answer: null }

  const detail = await consoleBySlug(db, chosen.slug)
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
