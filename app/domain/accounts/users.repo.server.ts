import type { DbOrTx } from '~db/client.server'

const columns = [
  'id',
  'display_name as displayName',
  'email',
  'email_verified_at as emailVerifiedAt',
  'github_id as githubId',
  'github_login as githubLogin',
  'created_at as createdAt',
  'disabled_at as disabledAt'
] as const

export const findById = (db: DbOrTx, id: string) => db.selectFrom('users').select(columns).where('id', '=', id).executeTakeFirst()

export const findByEmail = (db: DbOrTx, email: string) =>
  db.selectFrom('users').select(columns).where('email', '=', email).executeTakeFirst()

export const findByGithubId = (db: DbOrTx, githubId: number) =>
  db.selectFrom('users').select(columns).where('github_id', '=', githubId).executeTakeFirst()

export type UserRow = NonNullable<Awaited<ReturnType<typeof findById>>>

export type NewUser = {
  id: string
  displayName: string
  email: string | null
  github: { id: number; login: string } | null
  at: string
}

/** A new user; the address, if there is one, has just been verified. */
export const insert = (db: DbOrTx, user: NewUser) =>
  db
    .insertInto('users')
    .values({
      id: user.id,
      display_name: user.displayName,
      email: user.email,
      email_verified_at: user.email === null ? null : user.at,
      github_id: user.github?.id ?? null,
      github_login: user.github?.login ?? null,
      created_at: user.at
    })
    .execute()

export const setGithub = (db: DbOrTx, id: string, github: { id: number; login: string }) =>
  db.updateTable('users').set({ github_id: github.id, github_login: github.login }).where('id', '=', id).execute()

export const setEmail = (db: DbOrTx, id: string, email: string, verifiedAt: string) =>
  db.updateTable('users').set({ email, email_verified_at: verifiedAt }).where('id', '=', id).execute()

export const setDisplayName = (db: DbOrTx, id: string, displayName: string) =>
  db.updateTable('users').set({ display_name: displayName }).where('id', '=', id).execute()
