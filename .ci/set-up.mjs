/* What `demo` and `verify` have in common: a look at the machine, the installation, the build. Plain Node: it runs before anything is installed. */
import { spawn, spawnSync } from 'node:child_process'
import { existsSync, lstatSync, mkdirSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'

export const root = fileURLToPath(new URL('..', import.meta.url))
export const at = (...parts) => join(root, ...parts)

/** Something a person can mend: its message is the whole of what they are told. */
export class Plain extends Error {}

const answers = (command, args = ['--version']) => spawnSync(command, args, { stdio: 'ignore' }).status === 0

/** Throws one sentence when this machine lacks something that the installation needs. */
export function checkMachine() {
  const major = Number(process.versions.node.split('.')[0])
  if (major !== 20) throw new Plain(`Fettle needs Node.js 20; this is ${process.versions.node}.`)
  for (const command of ['npm', 'git'])
    if (!answers(command)) throw new Plain(`Fettle needs ${command}, which is not on the PATH.`)
  const missing = [
    ...(answers('python3') ? [] : ['python3']),
    ...(answers('make') ? [] : ['make']),
    ...(answers('c++') || answers('g++') ? [] : ['a C++ compiler'])
  ]
  if (missing.length > 0)
    throw new Plain(
      `Missing: ${missing.join(', ')}. The database driver is compiled on installation: install Debian's packages \`build-essential python3\` and start again.`
    )
}

/** Runs a command to its end with its output in this terminal. */
export function run(command, args, env = {}) {
  return new Promise((resolve, reject) => {
    const child = spawn(command, args, { cwd: root, stdio: 'inherit', env: { ...process.env, ...env } })
    child.once('error', reject)
    child.once('exit', (code, signal) => resolve(code ?? (signal === 'SIGINT' ? 130 : 1)))
  })
}

const changedAt = (path) => (existsSync(path) ? statSync(path).mtimeMs : 0)

const readJson = (path) => JSON.parse(readFileSync(path, 'utf8'))

/** Whether what is installed is what the lockfile says; packages of other platforms may be absent. */
function isInstalled() {
  const done = at('node_modules', '.package-lock.json')
  if (!existsSync(done)) return false
  if (changedAt(done) >= changedAt(at('package-lock.json'))) return true
  const installed = readJson(done).packages
  return Object.entries(readJson(at('package-lock.json')).packages).every(([path, { version, integrity, optional }]) => {
    if (path === '') return true
    const found = installed[path]
    return found ? found.version === version && found.integrity === integrity : optional === true
  })
}

const driver = at('node_modules', 'better-sqlite3', 'build', 'Release', 'better_sqlite3.node')

/** npm ci without the packages' own scripts, when there is no complete installation or it is not the lockfile's. */
export async function installPackages() {
  if (isInstalled()) return
  if (lstatSync(at('node_modules'), { throwIfNoEntry: false })?.isSymbolicLink())
    throw new Plain('node_modules is a link to another checkout, and is not what the lockfile says: run npm ci there.')
  console.log('Installing packages from the lockfile (npm ci) ...')
  const code = await run('npm', ['ci', '--include=dev', '--ignore-scripts', '--no-audit', '--no-fund'])
  if (code !== 0) throw new Plain(`npm ci failed (exit code ${code}); what it said stands above.`)
}

/** Compiles the database driver, the one package whose own script is needed, when it is not there. What it says comes only if it fails. */
export async function compileDriver() {
  if (existsSync(driver)) return
  const output = []
  const child = spawn('npm', ['rebuild', 'better-sqlite3', '--no-audit', '--no-fund', '--foreground-scripts'], {
    cwd: root,
    stdio: ['ignore', 'pipe', 'pipe']
  })
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk) => output.push(chunk))
  const code = await new Promise((resolve, reject) => {
    child.once('error', reject)
    child.once('close', (exit) => resolve(exit ?? 1))
  })
  if (code === 0 && existsSync(driver)) return
  process.stderr.write(Buffer.concat(output))
  throw new Plain(`The database driver was not compiled (exit code ${code}); what npm said stands above.`)
}

/** Everything that is installed, one after the other. */
export async function ensureInstalled() {
  await installPackages()
  if (!existsSync(driver)) console.log('Compiling the database driver, about two minutes ...')
  await compileDriver()
}

/** The latest change below a path, folders included, so that a deleted file is noticed too. */
function newest(path) {
  if (!existsSync(path)) return 0
  const facts = statSync(path)
  if (!facts.isDirectory()) return facts.mtimeMs
  return Math.max(facts.mtimeMs, ...readdirSync(path).map((name) => newest(join(path, name))))
}

const stamp = at('build', '.complete')
const sources = [
  'app',
  'db',
  'content',
  'public',
  'package-lock.json',
  'vite.config.ts',
  'react-router.config.ts',
  'tsconfig.json'
]

export const isBuilt = () => changedAt(stamp) >= Math.max(...sources.map((name) => newest(at(name))))

/** Builds; the stamp is set last, so that a build that was cut off counts as none. Gives the exit code. */
export async function build() {
  rmSync(stamp, { force: true })
  const code = await run(process.execPath, [at('node_modules', '@react-router', 'dev', 'bin.js'), 'build'], {
    NODE_ENV: 'production'
  })
  if (code === 0) {
    mkdirSync(at('build'), { recursive: true })
    writeFileSync(stamp, '')
  }
  return code
}

/** Runs `main`, tells a Plain error as its sentence and everything else in full. */
export async function runMain(main) {
  try {
    process.exitCode = await main()
  } catch (error) {
    console.error(error instanceof Plain ? error.message : error)
    process.exitCode = 1
  }
}
