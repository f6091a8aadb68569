import { pagesOfLives, type LivesAsked } from '~/domain/reliability/lives.repo.server'
import type { LifeHistory } from '~/domain/reports/observations'
import type { Tx } from '~db/client.server'

/** All life histories asked for, in one list. */
export async function livesOfRelease(tx: Tx, asked: LivesAsked): Promise<LifeHistory[]> {
  const lives: LifeHistory[] = []
  for await (const page of pagesOfLives(tx, asked)) lives.push(...page)
  return lives
}
