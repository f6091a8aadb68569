import fc from 'fast-check'
import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { beforeAll, describe, expect, it } from 'vitest'
import { demoFiles } from '../../../tests/factories/demo-bundle'
import { checkBundle } from './check-bundle.server'
import { defaultLimits } from './limits'
import { findOutline } from './outline-contours'
import { readBom } from './read-bom'
import { readExcellon } from './read-excellon'
import { readGerber } from './read-gerber'
import { readJob } from './read-job'
import { readPlacement } from './read-placement'

/** Always the same runs: a failure can be had again. */
const runs = { seed: 20_240_611, numRuns: 150 }
const small = { ...defaultLimits, gerberObjects: 20_000, drillHoles: 20_000, macroShapes: 100_000, listRows: 2_000 }

/** Bytes changed, cut out or doubled somewhere in a file. */
const damage = fc.array(
  fc.record({
    at: fc.double({ min: 0, max: 1, noNaN: true }),
    kind: fc.constantFrom('set', 'cut', 'double'),
    byte: fc.integer({ min: 0, max: 255 }),
    length: fc.integer({ min: 1, max: 40 })
  }),
  { minLength: 1, maxLength: 12 }
)
type Damage = typeof damage extends fc.Arbitrary<infer T> ? T : never

function damaged(bytes: Buffer, changes: Damage): Buffer {
  let result = Buffer.from(bytes)
  for (const { at, kind, byte, length } of changes) {
    const from = Math.floor(at * result.length)
    if (kind === 'set') result.fill(byte, from, from + 1)
    else {
      const parts = [result.subarray(0, from), result.subarray(from, from + length), result.subarray(from + length)]
      result = Buffer.concat(kind === 'cut' ? [parts[0]!, parts[2]!] : [parts[0]!, parts[1]!, parts[1]!, parts[2]!])
    }
  }
  return result
}

let files: Map<string, Buffer>
beforeAll(async () => {
  files = await demoFiles('almanac-1.0.1')
})

describe('no exception leaves the readers', () => {
  it.each(['gerber/almanac-F_Mask.gbr', 'gerber/almanac-Edge_Cuts.gbr', 'gerber/almanac-F_Paste.gbr'])(
    'of Gerber: %s',
    (path) => {
      fc.assert(
        fc.property(damage, (changes) => {
          const image = readGerber(damaged(files.get(path)!, changes), small, { strokes: true, flashes: true })
          findOutline(image.strokes, image.regions)
          expect(image.objects).toBeLessThanOrEqual(small.gerberObjects)
        }),
        runs
      )
    }
  )

  it.each(['drill/almanac-PTH.drl', 'drill/almanac-NPTH.drl'])('of drill files: %s', (path) => {
    fc.assert(
      fc.property(damage, (changes) => {
        const drill = readExcellon(damaged(files.get(path)!, changes), small)
        expect(drill.holes.length).toBeLessThanOrEqual(small.drillHoles)
        expect(drill.holes.every((hole) => [hole.x, hole.y, hole.diameter].every(Number.isFinite))).toBe(true)
      }),
      runs
    )
  })

  it('of lists and job files', () => {
    fc.assert(
      fc.property(damage, fc.uint8Array({ maxLength: 300 }), (changes, noise) => {
        for (const bytes of [damaged(files.get('assembly/almanac-bom.csv')!, changes), noise]) readBom(bytes, small)
        for (const bytes of [damaged(files.get('assembly/almanac-placement.csv')!, changes), noise]) readPlacement(bytes, small)
        for (const bytes of [damaged(files.get('gerber/almanac-job.gbrjob')!, changes), noise]) readJob(bytes)
      }),
      runs
    )
  })

  it('of Gerber and drill commands in any order', () => {
    const gerber = fc.constantFrom(
      '%FSLAX46Y46*%',
      '%MOMM*%',
      '%ADD10C,0.1*%',
      '%AMA*1,1,$1,0,0*%',
      '%ADD11A,1*%',
      '%ABD12*%',
      '%AB*%',
      '%SRX3Y3I1J1*%',
      '%SR*%',
      'D10*',
      'D11*',
      'D12*',
      'X1000000Y2000000D01*',
      'X0Y0D02*',
      'D03*',
      'G36*',
      'G37*',
      'G74*',
      'G75*',
      'G02*',
      'X5Y5I100J-100D01*',
      '%LR45*%',
      '%LMXY*%',
      '%LPC*%',
      '%OFA1B2*%',
      '%TO.C,R1*%',
      '%TD*%',
      'M02*',
      'G91*',
      '*',
      '%%'
    )
    const drill = fc.constantFrom(
      'M48',
      'METRIC,TZ',
      'INCH',
      'T1C0.3',
      '%',
      'T1',
      'X1Y1',
      'G85X2',
      'X1.0G85X2.0',
      'R5X1',
      'M25',
      'M01',
      'M02X1Y1',
      'M08',
      'M15',
      'M16',
      'G00X1Y1',
      'G01X5',
      'G91',
      'ICI,ON',
      'G93X1Y1',
      'M30'
    )
    fc.assert(
      fc.property(fc.array(gerber, { maxLength: 40 }), fc.array(drill, { maxLength: 40 }), (g, d) => {
        readGerber(Buffer.from(g.join('\n')), small, { strokes: true, flashes: true })
        readExcellon(Buffer.from(d.join('\n')), small)
      }),
      { ...runs, numRuns: 1500 }
    )
  })
})

describe('no exception leaves the check', () => {
  it('whatever bytes of a zip are changed', async () => {
    const path = fileURLToPath(new URL('../../../tests/fixtures/bundles/OC40-gv-gedaold.zip', import.meta.url))
    const zip = readFileSync(path)
    await fc.assert(
      fc.asyncProperty(damage, async (changes) => {
        const { check } = await checkBundle(damaged(zip, changes), {}, small)
        expect(check.ok).toBe(false)
      }),
      { ...runs, numRuns: 200 }
    )
  })

  it('whatever a file of the bundle holds', async () => {
    const { zipOf } = await import('../../../tests/factories/demo-bundle')
    const paths = [...files.keys()].filter(
      (path) => !path.startsWith('source/') && !path.includes('_Cu') && !path.includes('Silk')
    )
    await fc.assert(
      fc.asyncProperty(fc.constantFrom(...paths), damage, async (path, changes) => {
        const few = new Map(paths.map((p) => [p, p === path ? damaged(files.get(p)!, changes) : files.get(p)!]))
        const { check } = await checkBundle(await zipOf(few), {}, small)
        expect(check.findings.some((f) => f.code === 'copper-missing')).toBe(true)
      }),
      { ...runs, numRuns: 60 }
    )
  })
})
