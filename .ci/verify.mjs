/* Sets everything up and runs every check, one after another; the last line is `N passed, N failed`. */
import { spawnSync } from 'node:child_process'
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { countReport } from './count-report.mjs'
import { at, build, checkMachine, compileDriver, installPackages, Plain, root, run, runMain } from './set-up.mjs'

const chromium = '/usr/bin/chromium'
const aptChromium = 'apt-get install -y --no-install-recommends chromium'

/** Debian's Chromium, for the end-to-end tests. */
async function ensureChromium() {
  if (existsSync(chromium)) return
  const hasApt = spawnSync('apt-get', ['--version'], { stdio: 'ignore' }).status === 0
  if (!hasApt || process.getuid?.() !== 0)
    throw new Plain(
      `The end-to-end tests need Debian's Chromium at ${chromium}: as root, run \`${aptChromium}\` and start again.`
    )
  console.log(`Debian's chromium is missing; installing it now (apt-get update, then ${aptChromium}) ...`)
  const env = { DEBIAN_FRONTEND: 'noninteractive' }
  for (const args of [['update'], aptChromium.split(' ').slice(1)]) {
    const code = await run('apt-get', args, env)
    if (code !== 0) throw new Plain(`apt-get ${args[0]} failed (exit code ${code}); what it said stands above.`)
  }
  if (!existsSync(chromium)) throw new Plain(`Debian's chromium was installed, but ${chromium} is not there.`)
}

const bin = (...parts) => at('node_modules', ...parts)
const node = (...args) => run(process.execPath, args)

const failures = []
const results = []

function note(name, passed, failed, skipped, startedAt) {
  results.push({ name, passed, failed, skipped, seconds: Math.round((Date.now() - startedAt) / 1000) })
  return failed === 0
}

async function check(name, work) {
  console.log(`\n== ${name}`)
  const startedAt = Date.now()
  const isGood = (await work()) === 0
  if (!isGood) failures.push(`${name}: see its output above`)
  return note(name, isGood ? 1 : 0, isGood ? 0 : 1, 0, startedAt)
}

/** One vitest project, counted by its own JSON report. A file that does not load, and an error outside any test, count as failed. */
async function tests(project, folder) {
  console.log(`\n== tests: ${project}`)
  const startedAt = Date.now()
  const file = join(folder, `${project}.json`)
  const args = ['run', '--config', 'tests/vitest.config.ts', '--project', project]
  const code = await node(
    bin('vitest', 'vitest.mjs'),
    ...args,
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${file}`
  )
  if (!existsSync(file)) {
    failures.push(`${project}: vitest ended with code ${code} and no report`)
    return note(project, 0, 1, 0, startedAt)
  }
  const report = JSON.parse(readFileSync(file, 'utf8'))
  const counted = countReport(report, root)
  const { passed, skipped } = counted
  let { failed } = counted
  failures.push(...counted.failures)
  if (code !== 0 && failed === 0) {
    failed++
    failures.push(`${project}: vitest ended with code ${code} although no test failed; see its output above`)
  }
  return note(project, passed, failed, skipped, startedAt)
}

function skipFor(name, reason) {
  failures.push(`${name}: not run, ${reason}`)
  note(name, 0, 1, 0, Date.now())
}

async function main() {
  checkMachine()
  // What takes long and is not needed yet runs beside what is: Chromium beside npm, the compiler beside the static checks.
  await Promise.all([ensureChromium(), installPackages()])
  const compiled = compileDriver()
  // Awaited below; until then a failure must not count as unheard.
  compiled.catch(() => {})
  const folder = mkdtempSync(join(tmpdir(), 'fettle-verify-'))
  try {
    await check('types', async () => {
      const code = await node(bin('@react-router', 'dev', 'bin.js'), 'typegen')
      return code === 0 ? node(bin('typescript', 'bin', 'tsc'), '--noEmit') : code
    })
    await check('eslint', () => node(bin('eslint', 'bin', 'eslint.js'), '.'))
    await check('prettier', () => node(bin('prettier', 'bin', 'prettier.cjs'), '--check', '--log-level', 'warn', '.'))
    const isBuilt = await check('build', build)
    console.log('\n== database driver')
    await compiled
    await tests('unit', folder)
    for (const project of ['http', 'e2e'])
      if (isBuilt) await tests(project, folder)
      else skipFor(project, 'because the build failed')
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }

  if (failures.length > 0) console.log(`\n== What failed\n\n${failures.map((text) => `- ${text}`).join('\n')}`)
  console.log('\n== Summary\n')
  for (const { name, passed, failed, skipped, seconds } of results)
    console.log(
      `${name.padEnd(10)} ${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''} (${seconds} s)`
    )
  const sum = (key) => results.reduce((total, result) => total + result[key], 0)
  console.log(`\n${sum('passed')} passed, ${sum('failed')} failed`)
  return sum('failed') === 0 ? 0 : 1
}

await runMain(main)
