import { describe, expect, it } from 'vitest'
import { ConfigError, readConfig } from './config.server'

const production = {
  NODE_ENV: 'production',
  PUBLIC_ORIGIN: 'https://fettle.example',
  APP_SECRET: 'a secret with at least thirty-two characters',
  STORAGE_BUCKET: 'fettle',
  STORAGE_ACCESS_KEY_ID: 'id',
  STORAGE_SECRET_ACCESS_KEY: 'secret',
  MAIL_API_KEY: 'key',
  MAIL_FROM: 'Fettle <fettle@fettle.example>',
  GITHUB_CLIENT_ID: 'client',
  GITHUB_CLIENT_SECRET: 'client-secret'
}
const demo = {
  ...production,
  FETTLE_MODE: 'demo',
  PUBLIC_ORIGIN: 'http://localhost:3000',
  STORAGE_ENDPOINT: 'http://127.0.0.1:4001',
  MAIL_API_URL: 'http://127.0.0.1:4002',
  GITHUB_WEB_URL: 'http://127.0.0.1:4003',
  GITHUB_API_URL: 'http://127.0.0.1:4003/api'
}

/** The problems that a configuration is refused for; none when it is taken. */
function problems(env: Record<string, string | undefined>): string[] {
  try {
    readConfig(env)
    return []
  } catch (error) {
    if (error instanceof ConfigError) return error.problems
    throw error
  }
}

describe('readConfig', () => {
  it('takes a whole configuration of production and of the demo', () => {
    expect(readConfig(production)).toMatchObject({
      mode: 'production',
      port: 3000,
      host: '127.0.0.1',
      isSecure: true,
      publicOrigin: 'https://fettle.example',
      github: { webUrl: 'https://github.com', apiUrl: 'https://api.github.com' },
      mail: { fakeUrl: null }
    })
    expect(readConfig({ ...demo, PORT: '3456', PUBLIC_ORIGIN: '' })).toMatchObject({
      mode: 'demo',
      publicOrigin: 'http://localhost:3456',
      isSecure: false
    })
  })

  it.each(Object.keys(production).filter((name) => name !== 'NODE_ENV'))('names %s when production lacks it', (name) => {
    for (const value of [undefined, '']) {
      const found = problems({ ...production, [name]: value })
      expect(found).toHaveLength(1)
      expect(found[0]).toMatch(new RegExp(`^${name} is not set`))
    }
  })

  it.each([
    ['STORAGE_ENDPOINT', 'http://127.0.0.1:4001'],
    ['MAIL_API_URL', 'http://localhost:4002'],
    ['GITHUB_WEB_URL', 'http://[::1]:4003'],
    ['GITHUB_API_URL', 'http://127.0.0.1:4003/api'],
    ['MAIL_FAKE_URL', 'http://127.0.0.1:4002']
  ])('refuses production with a fake at %s', (name, value) => {
    const found = problems({ ...production, [name]: value })
    expect(found).toHaveLength(1)
    expect(found[0]).toMatch(new RegExp(`^${name} `))
  })

  it.each(['STORAGE_ENDPOINT', 'MAIL_API_URL'])('says where the fake of %s comes from when the demo lacks it', (name) => {
    expect(problems({ ...demo, [name]: undefined })).toEqual([expect.stringMatching(new RegExp(`^${name} .*npm run demo`))])
  })

  it.each([
    ['PORT', '70000'],
    ['PORT', 'x'],
    ['PUBLIC_ORIGIN', 'http://fettle.example'],
    ['PUBLIC_ORIGIN', 'fettle.example'],
    ['APP_SECRET', 'short'],
    ['TRUST_PROXY_HOPS', '-1'],
    ['GITHUB_API_URL', 'ftp://files.example'],
    ['UPLOAD_MAX_BYTES', '12'],
    ['FETTLE_MODE', 'staging']
  ])('refuses %s=%s by its name', (name, value) => {
    expect(problems({ ...production, [name]: value }).some((line) => line.startsWith(`${name} `))).toBe(true)
  })

  it('keeps sign-in cookies off plain http, except on this machine', () => {
    expect(problems({ ...demo, PUBLIC_ORIGIN: 'http://workshop.example' })).toEqual([
      expect.stringMatching(/^PUBLIC_ORIGIN must be https/)
    ])
    expect(problems({ ...demo, PUBLIC_ORIGIN: 'http://127.0.0.1:3000' })).toEqual([])
  })

  it('tells all that is wrong at once, and never a value', () => {
    const found = problems({ NODE_ENV: 'production', APP_SECRET: 'hunter2' })
    expect(found.length).toBeGreaterThan(0)
    const whole = problems({ NODE_ENV: 'production' })
    expect(whole.map((line) => line.split(' ')[0]).sort()).toEqual(
      Object.keys(production)
        .filter((name) => name !== 'NODE_ENV')
        .sort()
    )
    expect(found.join()).not.toContain('hunter2')
  })
})
