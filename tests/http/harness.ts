import { spawn, type ChildProcess } from 'node:child_process'
import { existsSync, mkdtempSync, rmSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { openDb, type Db } from '~db/client.server'
import { migrate } from '~db/migrate'
import { startGithubFake, type GithubPerson } from '~/server/fakes/github-fake'
import { startMailFake, type MailFake, type SentMail } from '~/server/fakes/mail-fake'
import { createStorage, type Storage } from '~/server/storage.server'
import { startStorageFake } from '../../storage-fake/server'
import { Browser, textOf } from './browser'

/*
 * How to write an HTTP test:
 *
 *   let site: Site
 *   beforeAll(async () => { site = await startSite() })
 *   afterAll(() => site.close())
 *
 *   const member = await site.signInByGithub('vigga')         // or site.signInByMail('new@test.example', 'Some Name')
 *   const answer = await member.fetch('/boards/new', { form: { name: '…' } })     // a POST as a browser sends it
 *   const visitor = site.browser()
 *
 * It needs a build (`npx react-router build`). The server is a process of its own with an empty database; `site.query` opens that database
 * for a look or a set-up that no page offers. Cookies are kept, redirects are not followed unless `follow` says how many.
 */

const buildFile = fileURLToPath(new URL('../../build/server/index.js', import.meta.url))

/** People whom GitHub's stand-in knows in tests. Nobody of them exists. */
export const testPeople: GithubPerson[] = [
  { id: 4101, login: 'vigga', name: 'Vigga Testmark', emails: [{ email: 'vigga@test.example', primary: true, verified: true }] },
  { id: 4102, login: 'tarn', name: 'Tarn Prøve', emails: [{ email: 'tarn@test.example', primary: true, verified: true }] },
  { id: 4103, login: 'unproved', name: null, emails: [{ email: 'unproved@test.example', primary: true, verified: false }] },
  { id: 4104, login: 'mosse', name: 'Mosse Helder', emails: [{ email: 'mosse@test.example', primary: true, verified: true }] },
  { id: 4105, login: 'oust', name: 'Oust Farrow', emails: [{ email: 'oust@test.example', primary: true, verified: true }] }
]

export type SiteOptions = {
  people?: GithubPerson[]
  /** Further settings for the server, over the harness's own. */
  env?: Record<string, string>
  /** Fills the migrated database and the storage before the server starts. */
  prepare?: (world: { db: Db; storage: Storage }) => Promise<unknown>
}

export type Site = {
  url: string
  mail: MailFake
  githubUrl: string
  dataDir: string
  /** The server's process. */
  pid: number
  /** What the server wrote to its log so far. */
  log(): string
  /** A visitor's browser, from a place of its own unless one is given. */
  browser(ip?: string): Browser
  /** A browser signed in as one of the people of GitHub's stand-in. */
  signInByGithub(login: string, browser?: Browser): Promise<Browser>
  /** A browser signed in by a mailed link; the name counts for a new account. */
  signInByMail(address: string, displayName?: string, browser?: Browser): Promise<Browser>
  /** Waits for the next mail to an address, newest first. */
  mailTo(address: string, count?: number): Promise<SentMail>
  /** The keys of everything in storage. */
  storedKeys(): Promise<string[]>
  /** Runs something on the server's database file; the connection is closed afterwards. */
  query<T>(work: (db: Db) => Promise<T>): Promise<T>
  close(): Promise<void>
}

const clientId = 'test-client'
const clientSecret = 'test-client-secret'
const mailKey = 'test-mail-key'
const storageAccount = { accessKeyId: 'test', secretAccessKey: 'test-secret', region: 'us-east-1', bucket: 'fettle' }

/** A port that was free a moment ago. */
const freePort = () =>
  new Promise<number>((resolve, reject) => {
    const probe = createServer()
    probe.once('error', reject)
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as AddressInfo
      probe.close(() => resolve(port))
    })
  })

/** Starts the fakes and the built server, each on a port of its own of loopback. */
export async function startSite(options: SiteOptions = {}, tries = 3): Promise<Site> {
  if (!existsSync(buildFile)) throw new Error('There is no build: run `npx react-router build` before the HTTP tests')
  const dataDir = mkdtempSync(join(tmpdir(), 'fettle-http-'))
  const port = await freePort()
  const url = `http://127.0.0.1:${port}`
  const github = await startGithubFake({
    people: options.people ?? testPeople,
    clientId,
    clientSecret,
    callbackUrl: `${url}/sign-in/github/callback`
  })
  const mail = await startMailFake({ apiKey: mailKey })
  const storage = await startStorageFake({ ...storageAccount, dir: join(dataDir, 'storage') })
  if (options.prepare) await prepareWorld(dataDir, storage.url, options.prepare)
  const server = startServer({
    FETTLE_MODE: 'test',
    PORT: String(port),
    PUBLIC_ORIGIN: url,
    TRUST_PROXY_HOPS: '1',
    DATA_DIR: dataDir,
    APP_SECRET: 'a secret for tests that is long enough',
    STORAGE_ENDPOINT: storage.url,
    STORAGE_REGION: storageAccount.region,
    STORAGE_BUCKET: storageAccount.bucket,
    STORAGE_ACCESS_KEY_ID: storageAccount.accessKeyId,
    STORAGE_SECRET_ACCESS_KEY: storageAccount.secretAccessKey,
    MAIL_API_URL: mail.url,
    MAIL_API_KEY: mailKey,
    MAIL_FROM: 'Fettle <fettle@test.example>',
    GITHUB_CLIENT_ID: clientId,
    GITHUB_CLIENT_SECRET: clientSecret,
    GITHUB_WEB_URL: github.url,
    GITHUB_API_URL: `${github.url}/api`,
    ...options.env
  })
  const cleanUp = async () => {
    await Promise.all([github.close(), mail.close(), storage.close()])
    rmSync(dataDir, { recursive: true, force: true })
  }
  try {
    await server.ready
  } catch (error) {
    await cleanUp()
    // another program may have taken the port since it was found free
    if (tries > 1 && server.log().includes('EADDRINUSE')) return startSite(options, tries - 1)
    throw error
  }
  const site: Site = {
    url,
    mail,
    githubUrl: github.url,
    dataDir,
    pid: server.pid,
    log: server.log,
    browser: (ip) => new Browser(url, ip),
    signInByGithub: (login, browser = new Browser(url)) => signInByGithub(browser, login),
    signInByMail: (address, displayName = 'Test Member', browser = new Browser(url)) =>
      signInByMail(site, browser, address, displayName),
    mailTo: (address, count = 1) => waitForMail(mail, address, count),
    storedKeys: () => storedKeys(storage.url),
    query: async (work) => {
      const db = openDb(join(dataDir, 'fettle.sqlite'))
      try {
        return await work(db)
      } finally {
        await db.destroy()
      }
    },
    close: async () => {
      await server.stop()
      await cleanUp()
    }
  }
  return site
}

async function prepareWorld(dataDir: string, endpoint: string, prepare: NonNullable<SiteOptions['prepare']>): Promise<void> {
  const db = openDb(join(dataDir, 'fettle.sqlite'))
  const storage = createStorage({ ...storageAccount, endpoint })
  try {
    await migrate(db)
    await prepare({ db, storage })
  } finally {
    storage.close()
    await db.destroy()
  }
}

async function storedKeys(endpoint: string): Promise<string[]> {
  const storage = createStorage({ ...storageAccount, endpoint })
  try {
    const { objects, next } = await storage.list('', 1000)
    if (next !== null) throw new Error('There is more in storage than a test looks at')
    return objects.map((object) => object.key)
  } finally {
    storage.close()
  }
}

type Server = { pid: number; ready: Promise<void>; log(): string; stop(): Promise<void> }

function startServer(env: Record<string, string>): Server {
  const child = spawn(process.execPath, [buildFile], {
    env: { PATH: process.env.PATH, NODE_ENV: 'production', ...env },
    stdio: ['ignore', 'pipe', 'pipe']
  })
  let written = ''
  child.stderr.on('data', (part: Buffer) => (written += part.toString()))
  const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()))
  const ready = new Promise<void>((resolve, reject) => {
    child.stdout.once('data', () => resolve())
    child.once('error', reject)
    child.once('exit', (code) => reject(new Error(`The server ended with ${code} before it answered:\n${written}`)))
  })
  return { pid: child.pid!, ready, log: () => written, stop: () => stopChild(child, ended) }
}

async function stopChild(child: ChildProcess, ended: Promise<void>): Promise<void> {
  if (child.exitCode !== null || child.signalCode !== null) return
  child.kill('SIGTERM')
  const force = setTimeout(() => child.kill('SIGKILL'), 10_000)
  await ended
  clearTimeout(force)
}

async function signInByGithub(browser: Browser, login: string): Promise<Browser> {
  const start = await browser.fetch('/sign-in/github', { form: { return: '/' } })
  const authorize = start.headers.get('Location')
  if (authorize === null) throw new Error(`Signing in did not begin: ${start.status} ${textOf(await start.text())}`)
  const picked = await browser.fetch(authorize, { form: { person: login } })
  const back = picked.headers.get('Location')
  if (back === null) throw new Error(`The stand-in for GitHub refused: ${picked.status} ${textOf(await picked.text())}`)
  const done = await browser.fetch(back)
  if (done.status !== 302) throw new Error(`Signing in as ${login} failed: ${done.status} ${textOf(await done.text())}`)
  return browser
}

/** The path of the sign-in link in a mail. */
export function linkIn(mail: SentMail): string {
  const found = /https?:\/\/\S+(\/sign-in\/link\/\S+)/.exec(mail.text)
  if (found === null) throw new Error(`This mail has no sign-in link: ${mail.text}`)
  return found[1]!
}

async function signInByMail(site: Site, browser: Browser, address: string, displayName: string): Promise<Browser> {
  const before = site.mail.sent().filter((mail) => mail.to.includes(address)).length
  const asked = await browser.fetch('/sign-in', { form: { email: address, return: '/' } })
  if (asked.status !== 200) throw new Error(`No link was sent: ${asked.status} ${textOf(await asked.text())}`)
  const path = linkIn(await site.mailTo(address, before + 1))
  const done = await browser.fetch(path, { form: { displayName } })
  if (done.status !== 302) throw new Error(`The link did not sign in: ${done.status} ${textOf(await done.text())}`)
  return browser
}

async function waitForMail(mail: MailFake, address: string, count: number): Promise<SentMail> {
  for (let waited = 0; waited < 15_000; waited += 50) {
    const mails = mail.sent().filter((one) => one.to.includes(address))
    if (mails.length >= count) return mails[0]!
    await new Promise((resolve) => setTimeout(resolve, 50))
  }
  throw new Error(`No mail reached ${address}`)
}
