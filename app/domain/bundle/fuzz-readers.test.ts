import fc from 'fast-check'
import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { beforeAll, describe, expect, it } from 'vitest'
import { damage, damaged, numbersIn } from '../../../tests/factories/damage'
import { demoFiles } from '../../../tests/factories/demo-bundle'
import { checkBundle } from './check-bundle.server'
import { defaultLimits } from './limits'
import { findOutline } from './outline-contours'
import { readBom } from './read-bom'
import { readExcellon } from './read-excellon'
import { readGerber } from './read-gerber'
import { readJob } from './read-job'
import { readPartValue } from './read-part-value'
import { readPlacement } from './read-placement'

/** Always the same runs: a failure can be had again. */
const runs = { seed: 20_240_611, numRuns: 150 }
const small = { ...defaultLimits, gerberObjects: 20_000, drillHoles: 20_000, macroShapes: 100_000, listRows: 2_000 }

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

  it('of lists and job files, in any encoding', () => {
    const encodings: ((text: Buffer) => Buffer)[] = [
      (text) => text,
      (text) => Buffer.concat([Buffer.from([0xef, 0xbb, 0xbf]), text]),
      (text) => Buffer.from(text.toString('utf8'), 'utf16le'),
      (text) => Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(text.toString('utf8'), 'utf16le')]),
      (text) => Buffer.concat([Buffer.from([0xfe, 0xff]), Buffer.from(text.toString('utf8'), 'utf16le').swap16()]),
      (text) => Buffer.from(text.toString('utf8'), 'latin1')
    ]
    fc.assert(
      fc.property(damage, fc.constantFrom(...encodings), fc.uint8Array({ maxLength: 300 }), (changes, encode, noise) => {
        const broken = (path: string) => damaged(encode(files.get(path)!), changes)
        const bom = broken('assembly/almanac-bom.csv')
        const placement = broken('assembly/almanac-placement.csv')
        const read = [
          ...[bom, placement, noise].flatMap((bytes) => [readBom(bytes, small), readPlacement(bytes, small)]),
          ...[broken('gerber/almanac-job.gbrjob'), noise].map((bytes) => readJob(bytes))
        ]
        expect(numbersIn(read).filter((number) => !Number.isFinite(number))).toEqual([])
      }),
      runs
    )
  })

  it('of part values, whatever is written there', () => {
    const pieces = fc.constantFrom(
      ...['4', '7', '10', '0', '1e999', '٣', '½', '.', ',', '-', '+', '±', '/', '(', ')', ' ', '\t', '\u00a0', '\u202e', '\0'],
      ...['p', 'n', 'u', 'µ', 'μ', 'm', 'k', 'K', 'M', 'R', 'F', 'Ω', 'Ω', 'H', 'V', 'A', 'W', '%', 'ppm', 'X7R', 'NP0', '0603'],
      ...['ohm', 'ESR', 'DNP', '=cmd|', '<b>', '9'.repeat(400), '('.repeat(300), '4R7'.repeat(200), 'e', 'E', '^', '\ud800', '\n']
    )
    const text = fc.oneof(
      fc.array(pieces, { maxLength: 12 }).map((all) => all.join('')),
      fc.string({ unit: 'binary', maxLength: 60 })
    )
    const part = fc.record({
      designator: fc.oneof(fc.constantFrom('C1', 'R2', 'L3', 'FB4', 'U5'), text),
      value: text,
      footprint: text,
      description: text
    })
    fc.assert(
      fc.property(part, (written) => {
        const reading = readPartValue(written)
        expect(numbersIn(reading).filter((number) => !Number.isFinite(number))).toEqual([])
        if (reading.value !== null) expect(reading.value).toBeGreaterThanOrEqual(0)
        if (reading.kind === null) expect(reading.unread).not.toBeNull()
        expect((reading.unread ?? '').length).toBeLessThanOrEqual(400)
      }),
      { ...runs, numRuns: 1500 }
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
})
