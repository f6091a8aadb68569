import { spawnSync } from 'node:child_process'
import { existsSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'
import JSZip from 'jszip'
import { checkIn, cpuSecondsOf, peakMibOf, startCheckChild } from './check-child'
import { median, type Claim } from './claim'

const fixtures = fileURLToPath(new URL('../fixtures/bundles', import.meta.url))
const rounds = 5

/**
 * The check without pictures beside Debian's gerbv drawing the same layer and drill files into one PNG, in turns. Both are counted in CPU time
 * of all threads: gerbv's whole run, and what the child uses from the order to the end. The child is the same for all, as on the server,
 * where a process is used again; its start and first round, which compile the code, are reported apart.
 */
export async function checkCpu(folder = fixtures): Promise<Claim[]> {
  if (spawnSync('gerbv', ['--version'], { stdio: 'ignore' }).error)
    throw new Error("This needs Debian's gerbv: as root, `apt-get install -y --no-install-recommends gerbv`")
  const zips = readdirSync(folder).filter((name) => name.startsWith('OC') && name.endsWith('.zip'))
  if (zips.length === 0) throw new Error(`No OC*.zip in ${folder}`)
  const scratch = mkdtempSync(join(tmpdir(), 'fettle-bench-'))
  const child = startCheckChild()
  try {
    const sets = []
    for (const name of zips) {
      const path = join(folder, name)
      const before = cpuSecondsOf(child.pid!)
      const check = await checkIn(child, path)
      const cold = cpuSecondsOf(child.pid!) - before
      const drawn = check.layers.filter(({ function: fn }) => drawnFunctions.has(fn.split('-')[0]!)).map(({ file }) => file)
      const files = await unpack(path, drawn, join(scratch, name))
      if (cpuOfGerbv(files, join(scratch, 'drawn.png')) === null) console.log(`${name}: left out, gerbv ends without drawing it`)
      else sets.push({ name, path, cold, files, check: [] as number[], gerbv: [] as number[] })
    }
    for (let round = 0; round < rounds; round++)
      for (const set of sets) {
        set.gerbv.push(cpuOfGerbv(set.files, join(scratch, 'drawn.png')) ?? NaN)
        const before = cpuSecondsOf(child.pid!)
        await checkIn(child, set.path)
        set.check.push(cpuSecondsOf(child.pid!) - before)
      }
    console.log('CPU seconds, median of five         gerbv   check  ratio   first time')
    const rows = sets.map((set) => ({ ...set, g: median(set.gerbv), c: median(set.check) }))
    for (const { name, g, c, cold } of rows)
      console.log(`${name.padEnd(34)} ${g.toFixed(3)}   ${c.toFixed(3)}   ${(c / g).toFixed(2)}    ${cold.toFixed(3)}`)
    const [g, c] = [median(rows.map((row) => row.g)), median(rows.map((row) => row.c))]
    console.log(`median over the sets               ${g.toFixed(3)}   ${c.toFixed(3)}   ${(c / g).toFixed(2)}`)
    const peak = await peakOfLargest(rows)
    return [
      { claim: 'CPU of the check over that of gerbv, medians over the sets', measured: c / g, limit: 3 },
      { claim: 'the same, median of the ratios', measured: median(rows.map((row) => row.c / row.g)), limit: 3 },
      { claim: 'peak memory of a new child on the largest set, MiB', measured: peak.check, limit: 256 },
      { claim: 'the same with pictures, MiB', measured: peak.pictures, limit: 256 }
    ]
  } finally {
    child.kill('SIGKILL')
    rmSync(scratch, { recursive: true, force: true })
  }
}

const drawnFunctions = new Set(['copper', 'soldermask', 'paste', 'legend', 'outline', 'drill', 'fabrication', 'assembly'])

async function unpack(zip: string, files: string[], into: string): Promise<string[]> {
  const { files: entries } = await JSZip.loadAsync(readFileSync(zip))
  const paths: string[] = []
  for (const file of files) {
    const entry = entries[file]
    if (!entry) throw new Error(`${zip} lacks ${file}`)
    const path = join(into, file)
    mkdirSync(dirname(path), { recursive: true })
    writeFileSync(path, await entry.async('nodebuffer'))
    paths.push(path)
  }
  // gerbv draws nothing at all when the first of its files is an empty layer.
  return paths.sort((a, b) => statSync(b).size - statSync(a).size)
}

/** User and system time of one run, as the shell counts it; null where gerbv ends without a picture. */
function cpuOfGerbv(files: string[], png: string): number | null {
  rmSync(png, { force: true })
  const script = 'TIMEFORMAT="%U %S"; time gerbv --export=png --output="$@" >/dev/null 2>&1'
  const { stderr } = spawnSync('bash', ['-c', script, 'bash', png, ...files], { encoding: 'utf8' })
  const [, user, system] = /([\d.]+) ([\d.]+)\s*$/.exec(stderr) ?? []
  if (user === undefined || !existsSync(png)) return null
  return Number(user) + Number(system)
}

/** On the set with the most layer data, by its unpacked size. */
async function peakOfLargest(sets: { path: string; files: string[] }[]) {
  const size = ({ files }: { files: string[] }) => files.reduce((sum, file) => sum + statSync(file).size, 0)
  const largest = [...sets].sort((a, b) => size(b) - size(a))[0]!
  const peak = async (withPictures: boolean) => {
    const child = startCheckChild()
    try {
      await checkIn(child, largest.path, withPictures)
      return peakMibOf(child.pid!)
    } finally {
      child.kill('SIGKILL')
    }
  }
  return { check: await peak(false), pictures: await peak(true) }
}
