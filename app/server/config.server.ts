import { z } from 'zod'

const port = z.coerce
  .number('must be a port number')
  .int('must be a port number')
  .min(0, 'must be 0 to 65535')
  .max(65535, 'must be 0 to 65535')
const url = z
  .url('must be an absolute http or https address')
  .refine((u) => /^https?:/.test(u), 'must be an absolute http or https address')
const isLoopback = (address: string) => /^(localhost|127(\.\d+){3}|\[::1\])$/.test(new URL(address).hostname)

/** What no mode can do without. */
const named = [
  'APP_SECRET',
  'STORAGE_BUCKET',
  'STORAGE_ACCESS_KEY_ID',
  'STORAGE_SECRET_ACCESS_KEY',
  'MAIL_API_KEY',
  'MAIL_FROM',
  'GITHUB_CLIENT_ID',
  'GITHUB_CLIENT_SECRET'
] as const

const usualDataDir = 'data'

/** The database of the data folder that the environment names; all that a command beside the server has to know. */
export const databaseFileOf = ({ DATA_DIR }: { DATA_DIR?: string | undefined }): string =>
  `${DATA_DIR === undefined || DATA_DIR === '' ? usualDataDir : DATA_DIR}/fettle.sqlite`

const notSet = (mode: string) => `is not set (needed in ${mode} mode)`
const modeOf = <M extends string>(env: { FETTLE_MODE?: M; NODE_ENV?: string }) =>
  env.FETTLE_MODE ?? (env.NODE_ENV === 'production' ? 'production' : 'development')

/**
 * Every setting, read from the environment once. `mode` decides what may be left out: in `production` each service must be real
 * and named; `demo`, `development` and `test` talk to the project's own fakes, whose addresses they are given.
 */
const schema = z
  .object({
    FETTLE_MODE: z
      .enum(['production', 'demo', 'development', 'test'], 'must be production, demo, development or test')
      .optional(),
    NODE_ENV: z.string().optional(),
    PORT: port.default(3000),
    HOST: z.string().default('127.0.0.1'),
    PUBLIC_ORIGIN: url.optional(),
    TRUST_PROXY_HOPS: z.coerce.number('must be a whole number').int().min(0).max(10).default(0),
    DATA_DIR: z.string().default(usualDataDir),
    APP_SECRET: z.string().min(32, 'must have at least 32 characters').optional(),
    STORAGE_ENDPOINT: url.optional(),
    STORAGE_REGION: z.string().default('us-east-1'),
    STORAGE_BUCKET: z.string().optional(),
    STORAGE_ACCESS_KEY_ID: z.string().optional(),
    STORAGE_SECRET_ACCESS_KEY: z.string().optional(),
    MAIL_API_URL: url.optional(),
    MAIL_API_KEY: z.string().optional(),
    MAIL_FROM: z.string().optional(),
    GITHUB_CLIENT_ID: z.string().optional(),
    GITHUB_CLIENT_SECRET: z.string().optional(),
    GITHUB_WEB_URL: url.default('https://github.com'),
    GITHUB_API_URL: url.default('https://api.github.com'),
    MAIL_FAKE_URL: url.optional(),
    UPLOAD_MAX_BYTES: z.coerce
      .number('must be a number of bytes')
      .int()
      .min(1024)
      .default(64 * 1024 * 1024)
  })
  .transform((env, ctx) => {
    const mode = modeOf(env)
    const say = (path: string, message: string) => ctx.addIssue({ code: 'custom', path: [path], message })
    for (const name of named) if (env[name] === undefined) say(name, notSet(mode))
    if (mode === 'production') {
      if (env.PUBLIC_ORIGIN === undefined)
        say('PUBLIC_ORIGIN', 'is not set: the address that people see, for example https://fettle.example')
      else if (!env.PUBLIC_ORIGIN.startsWith('https:')) say('PUBLIC_ORIGIN', 'must be https in production')
      for (const name of ['STORAGE_ENDPOINT', 'MAIL_API_URL', 'GITHUB_WEB_URL', 'GITHUB_API_URL'] as const) {
        const value = env[name]
        if (value !== undefined && isLoopback(value))
          say(name, 'points at this machine, where only a fake can answer: production needs the real service')
      }
      if (env.MAIL_FAKE_URL !== undefined) say('MAIL_FAKE_URL', 'names a fake, which production does not use')
    } else {
      if (env.PUBLIC_ORIGIN !== undefined && !env.PUBLIC_ORIGIN.startsWith('https:') && !isLoopback(env.PUBLIC_ORIGIN))
        say('PUBLIC_ORIGIN', 'must be https, except on this machine: sign-in cookies do not travel in the clear')
      for (const name of ['STORAGE_ENDPOINT', 'MAIL_API_URL'] as const)
        if (env[name] === undefined)
          say(name, `is not set (in ${mode} mode it is the address of the fake; \`npm run demo\` starts one)`)
    }
    const publicOrigin = new URL(env.PUBLIC_ORIGIN ?? `http://localhost:${env.PORT}`).origin
    return {
      mode,
      port: env.PORT,
      host: env.HOST,
      publicOrigin,
      isSecure: publicOrigin.startsWith('https:'),
      trustProxyHops: env.TRUST_PROXY_HOPS,
      dataDir: env.DATA_DIR,
      databaseFile: databaseFileOf(env),
      uploadDir: `${env.DATA_DIR}/uploads`,
      appSecret: env.APP_SECRET!,
      uploadMaxBytes: env.UPLOAD_MAX_BYTES,
      storage: {
        endpoint: env.STORAGE_ENDPOINT,
        region: env.STORAGE_REGION,
        bucket: env.STORAGE_BUCKET!,
        accessKeyId: env.STORAGE_ACCESS_KEY_ID!,
        secretAccessKey: env.STORAGE_SECRET_ACCESS_KEY!
      },
      mail: { apiUrl: env.MAIL_API_URL, apiKey: env.MAIL_API_KEY!, from: env.MAIL_FROM!, fakeUrl: env.MAIL_FAKE_URL ?? null },
      github: {
        clientId: env.GITHUB_CLIENT_ID!,
        clientSecret: env.GITHUB_CLIENT_SECRET!,
        webUrl: env.GITHUB_WEB_URL,
        apiUrl: env.GITHUB_API_URL
      }
    }
  })

export type Config = z.output<typeof schema>

/**
 * Reads the configuration. An empty variable counts as not set.
 * @throws ConfigError with one line for each variable that is wrong or missing
 */
export function readConfig(env: Record<string, string | undefined>): Config {
  const given = Object.fromEntries(Object.entries(env).filter(([, value]) => value !== undefined && value !== ''))
  const result = schema.safeParse(given)
  if (result.success) return result.data
  const problems = result.error.issues.map((issue) => `${issue.path.join('.')} ${issue.message}`)
  // One value of the wrong form keeps the schema from looking at what is missing.
  for (const name of named)
    if (given[name] === undefined && !problems.some((line) => line.startsWith(`${name} `)))
      problems.push(`${name} ${notSet(modeOf(given))}`)
  throw new ConfigError(problems)
}

export class ConfigError extends Error {
  constructor(readonly problems: string[]) {
    super(`Fettle cannot start with this configuration:\n${problems.map((p) => `  - ${p}`).join('\n')}\nSee .env.example.`)
    this.name = 'ConfigError'
  }
}
