/*
 * Sets everything up and serves the demo: the three fakes, the seeded data folder, the server. Each is a child process that is held by its
 * handle, and that stops by itself when this process is gone.
 */
import { spawn } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { appendFileSync, existsSync, mkdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:net'
import { join, relative, resolve } from 'node:path'
import { createInterface } from 'node:readline'
import { at, build, checkMachine, ensureInstalled, isBuilt, Plain, root, runMain } from './set-up.mjs'

const host = '127.0.0.1'

function readPort(name, fallback) {
  const text = process.env[name] || String(fallback)
  if (!/^\d{1,5}$/.test(text) || Number(text) > 65535) throw new Plain(`${name} must be a port number, not "${text}".`)
  return Number(text)
}

/** Asks the system whether a port can be listened on. */
const isFree = (port) =>
  new Promise((done) => {
    const probe = createServer()
    probe.once('error', () => done(false))
    probe.listen(port, host, () => probe.close(() => done(true)))
  })

async function checkPorts(ports) {
  for (const [name, port] of Object.entries(ports))
    if (port !== 0 && !(await isFree(port)))
      throw new Plain(
        `Port ${port} is taken: stop what listens there, or choose another, for example \`${name}=${port + 1} npm run demo\`.`
      )
}

const children = []
let isStopping = false

/** Starts a program of the project in a process of its own; what it says goes to the log, line by line to `onLine` too. */
function start(name, args, env, onLine = () => {}) {
  const child = spawn(process.execPath, ['--import', at('.ci', 'end-with-parent.mjs'), ...args], {
    cwd: root,
    env: { ...process.env, ...env },
    stdio: ['pipe', 'pipe', 'pipe'],
    // A group of its own: Ctrl-C reaches this process only, which then stops the others in order.
    detached: true
  })
  const tail = []
  for (const stream of [child.stdout, child.stderr])
    createInterface({ input: stream }).on('line', (line) => {
      appendFileSync(logFile, `${name}: ${line}\n`)
      tail.push(line)
      if (tail.length > 20) tail.shift()
      if (stream === child.stdout) onLine(line)
    })
  child.stdin.on('error', () => {})
  const ended = new Promise((done) => {
    child.once('error', (error) => done(error.message))
    child.once('close', (code, signal) => done(signal ?? code))
  })
  const held = { name, child, ended, tail }
  children.push(held)
  return held
}

const because = ({ name, tail }, how) => new Plain(`The ${name} ended (${how}).\n${tail.join('\n')}\nMore in ${shown(logFile)}.`)

/** Starts a program and waits until it has said a line that `read` can make something of. */
async function startAndAwait(name, args, env, read) {
  let found
  const line = new Promise((done) => (found = done))
  const held = start(name, args, env, (text) => {
    const value = read(text)
    if (value) found({ value })
  })
  const first = await Promise.race([line, held.ended.then((how) => ({ how }))])
  if ('how' in first) throw because(held, first.how)
  return { ...held, value: first.value }
}

async function runToEnd(name, args, env, onLine) {
  const held = start(name, args, env, onLine)
  const how = await held.ended
  children.splice(children.indexOf(held), 1)
  if (how !== 0) throw because(held, how)
}

/** Stops the children by their handles, the server before what it talks to. */
async function stopAll() {
  isStopping = true
  for (const { child, ended } of [...children].reverse()) {
    if (child.exitCode !== null || child.signalCode !== null) continue
    child.kill('SIGTERM')
    const force = setTimeout(() => child.kill('SIGKILL'), 10_000)
    await ended
    clearTimeout(force)
  }
}

const ask = (key) => (line) => {
  try {
    return JSON.parse(line)[key]
  } catch {
    return undefined
  }
}

function appSecret(dataDir) {
  const file = join(dataDir, 'app-secret')
  if (!existsSync(file)) writeFileSync(file, randomBytes(48).toString('base64url'), { mode: 0o600 })
  return readFileSync(file, 'utf8')
}

let logFile = ''
const tsx = (file, ...args) => ['--import', 'tsx', file, ...args]

async function main() {
  const port = readPort('PORT', 3000)
  const fakePorts = {
    STORAGE_FAKE_PORT: readPort('STORAGE_FAKE_PORT', 0),
    MAIL_FAKE_PORT: readPort('MAIL_FAKE_PORT', 0),
    GITHUB_FAKE_PORT: readPort('GITHUB_FAKE_PORT', 0)
  }
  if (port === 0) throw new Plain('PORT must be a port of its own, not 0.')
  checkMachine()
  await checkPorts({ PORT: port, ...fakePorts })
  await ensureInstalled()
  if (!isBuilt()) {
    console.log('Building ...')
    const code = await build()
    if (code !== 0) throw new Plain(`The build failed (exit code ${code}); what it said stands above.`)
  }

  const dataDir = resolve(root, process.env.DATA_DIR || 'data/demo')
  mkdirSync(dataDir, { recursive: true })
  logFile = join(dataDir, 'demo.log')
  if (existsSync(logFile) && statSync(logFile).size > 1024 ** 2) rmSync(logFile)
  const origin = `http://localhost:${port}`
  const common = { NODE_ENV: 'production', FETTLE_MODE: 'demo', PUBLIC_ORIGIN: origin, DATA_DIR: dataDir }
  const [region, bucket] = ['us-east-1', 'fettle']
  const credentials = { key: 'fettle-demo', secret: 'fettle-demo-secret' }
  const peopleFile = join(dataDir, 'people.json')

  console.log('Starting the stand-ins for storage and mail ...')
  const storage = await startAndAwait(
    'storage fake',
    tsx('storage-fake/main.ts'),
    {
      STORAGE_FAKE_DIR: join(dataDir, 'storage'),
      STORAGE_FAKE_HOST: host,
      STORAGE_FAKE_PORT: String(fakePorts.STORAGE_FAKE_PORT),
      STORAGE_FAKE_REGION: region,
      STORAGE_FAKE_BUCKET: bucket,
      STORAGE_FAKE_ACCESS_KEY_ID: credentials.key,
      STORAGE_FAKE_SECRET_ACCESS_KEY: credentials.secret
    },
    ask('listening')
  )
  const mail = await startAndAwait(
    'mail fake',
    tsx('app/server/fakes/main.ts', 'mail'),
    { PORT: String(fakePorts.MAIL_FAKE_PORT), MAIL_API_KEY: credentials.secret },
    ask('url')
  )
  const settings = {
    ...common,
    PORT: String(port),
    HOST: host,
    APP_SECRET: appSecret(dataDir),
    STORAGE_ENDPOINT: storage.value,
    STORAGE_REGION: region,
    STORAGE_BUCKET: bucket,
    STORAGE_ACCESS_KEY_ID: credentials.key,
    STORAGE_SECRET_ACCESS_KEY: credentials.secret,
    MAIL_API_URL: mail.value,
    MAIL_FAKE_URL: mail.value,
    MAIL_API_KEY: credentials.secret,
    MAIL_FROM: 'Fettle <fettle@demo.example>',
    GITHUB_CLIENT_ID: 'fettle-demo',
    GITHUB_CLIENT_SECRET: credentials.secret
  }
  await runToEnd('seed', tsx('db/seed/main.ts'), { ...settings, PEOPLE_FILE: peopleFile }, (line) => console.log(line))
  const github = await startAndAwait(
    'GitHub fake',
    tsx('app/server/fakes/main.ts', 'github'),
    {
      PORT: String(fakePorts.GITHUB_FAKE_PORT),
      GITHUB_CLIENT_ID: settings.GITHUB_CLIENT_ID,
      GITHUB_CLIENT_SECRET: settings.GITHUB_CLIENT_SECRET,
      CALLBACK_URL: `${origin}/sign-in/github/callback`,
      PEOPLE_FILE: peopleFile
    },
    ask('url')
  )
  const server = await startAndAwait(
    'server',
    [at('build', 'server', 'index.js')],
    { ...settings, GITHUB_WEB_URL: github.value, GITHUB_API_URL: `${github.value}/api` },
    (line) => line.startsWith('Fettle answers')
  )
  say(origin, mail.value, JSON.parse(readFileSync(peopleFile, 'utf8')), dataDir)

  const first = await Promise.race(children.map(({ name, ended }) => ended.then((how) => ({ name, how }))))
  if (isStopping) return server.ended.then(() => 0)
  const gone = children.find(({ name }) => name === first.name)
  await stopAll()
  throw because(gone, first.how)
}

/** Inside the project from its root, elsewhere in full. */
const shown = (path) => (relative(root, path).startsWith('..') ? path : relative(root, path))

function say(origin, mailUrl, people, dataDir) {
  const rows = people.map(({ login, part }) => `    ${login.padEnd(20)} ${part}`)
  console.log(`
  Fettle's demo is ready. Everything in it is invented.

  Open      ${origin}
            (that name, not 127.0.0.1: signing in comes back to it)
  Sign in   "with GitHub" leads to a stand-in where you pick who you are; by mail works too:
${rows.join('\n')}
  Mail      ${mailUrl}  shows everything that was "sent"
  Data      ${shown(dataDir)}  (kept; remove the folder to begin anew)

  Stop with Ctrl-C.
`)
}

let signals = 0
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'])
  process.on(signal, () => {
    if (signals++ > 0) return
    console.log('\nStopping ...')
    void stopAll().then(() => process.exit(0))
  })

await runMain(async () => {
  try {
    return await main()
  } finally {
    await stopAll()
  }
})
