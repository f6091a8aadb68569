import type { DbOrTx } from '~db/client.server'

export type NewSignInToken = { tokenHash: string; email: string; returnTo: string; at: string; expiresAt: string }

export const insert = (db: DbOrTx, token: NewSignInToken) =>
  db
    .insertInto('sign_in_tokens')
    .values({
      token_hash: token.tokenHash,
      email: token.email,
      return_to: token.returnTo,
      created_at: token.at,
      expires_at: token.expiresAt
    })
    .execute()

export const findByHash = (db: DbOrTx, tokenHash: string) =>
  db
    .selectFrom('sign_in_tokens')
    .select(['email', 'expires_at as expiresAt', 'used_at as usedAt'])
    .where('token_hash', '=', tokenHash)
    .executeTakeFirst()

/** Uses a token up. One statement decides, so that of two attempts at once one gets nothing. */
export const consume = (db: DbOrTx, tokenHash: string, at: string) =>
  db
    .updateTable('sign_in_tokens')
    .set({ used_at: at })
    .where('token_hash', '=', tokenHash)
    .where('used_at', 'is', null)
    .where('expires_at', '>', at)
    .returning(['email', 'return_to as returnTo'])
    .executeTakeFirst()

/** Long after its end a token's row serves nobody; until then it tells "too old" from "never was". */
export const removeExpired = (db: DbOrTx, before: string, limit: number) =>
  db
    .deleteFrom('sign_in_tokens')
    .where('token_hash', 'in', (q) =>
      q.selectFrom('sign_in_tokens').select('token_hash').where('expires_at', '<=', before).limit(limit)
    )
    .execute()
