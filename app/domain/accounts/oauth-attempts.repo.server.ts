import type { DbOrTx } from '~db/client.server'

export type NewAttempt = {
  stateHash: string
  browserHash: string
  codeVerifier: string
  returnTo: string
  at: string
  expiresAt: string
}

export const insert = (db: DbOrTx, attempt: NewAttempt) =>
  db
    .insertInto('oauth_attempts')
    .values({
      state_hash: attempt.stateHash,
      browser_hash: attempt.browserHash,
      code_verifier: attempt.codeVerifier,
      return_to: attempt.returnTo,
      created_at: attempt.at,
      expires_at: attempt.expiresAt
    })
    .execute()

/** Takes an attempt out, if it is this browser's. One statement decides, so that it is used once. */
export const take = (db: DbOrTx, stateHash: string, browserHash: string) =>
  db
    .deleteFrom('oauth_attempts')
    .where('state_hash', '=', stateHash)
    .where('browser_hash', '=', browserHash)
    .returning(['code_verifier as codeVerifier', 'return_to as returnTo', 'expires_at as expiresAt'])
    .executeTakeFirst()

export const removeExpired = (db: DbOrTx, before: string, limit: number) =>
  db
    .deleteFrom('oauth_attempts')
    .where('state_hash', 'in', (q) =>
      q.selectFrom('oauth_attempts').select('state_hash').where('expires_at', '<=', before).limit(limit)
    )
    .execute()
