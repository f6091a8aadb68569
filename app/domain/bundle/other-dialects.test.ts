import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import JSZip from 'jszip'
import { beforeAll, describe, expect, it } from 'vitest'
import { demoFiles, zipOf } from '../../../tests/factories/demo-bundle'
import type { BundleCheck } from './bundle-check.types'
import { checkBundle } from './check-bundle.server'
import { defaultLimits } from './limits'
import type { Hole } from './drill-file.types'
import { readExcellon } from './read-excellon'

/**
 * One real board (its source stands in `LICENCES.md` beside it) written in other dialects and under other names: what is measured must stay
 * the same. The customs of naming and of older drill files are common practice, no source.
 */
const folder = fileURLToPath(new URL('../../../tests/fixtures/bundles/', import.meta.url))
const roles = {
  gtl: 'top copper',
  gbl: 'bottom copper',
  gts: 'top mask',
  gbs: 'bottom mask',
  gto: 'top legend',
  gbo: 'bottom legend',
  gko: 'outline',
  txt: 'drill'
} as const
type Role = (typeof roles)[keyof typeof roles]

let files: Map<Role, Buffer>
let holes: Hole[]
let original: BundleCheck

const plain: Record<Role, string> = {
  'top copper': 'b.gtl',
  'bottom copper': 'b.gbl',
  'top mask': 'b.gts',
  'bottom mask': 'b.gbs',
  'top legend': 'b.gto',
  'bottom legend': 'b.gbo',
  outline: 'b.gko',
  drill: 'b.txt'
}
const order = Object.keys(plain) as Role[]

const check = async (names: Record<Role, string>, change: (role: Role, bytes: Buffer) => Buffer | string = (_, bytes) => bytes) =>
  (await checkBundle(await zipOf(new Map(order.map((role) => [names[role], change(role, files.get(role)!)]))))).check

const measured = ({ facts: { width, height, copperLayers, smallestStroke, minHole, holes, slots } }: BundleCheck) => ({
  width: Math.round(width! * 100) / 100,
  height: Math.round(height! * 100) / 100,
  copperLayers,
  smallestStroke: Math.round(smallestStroke! * 1000) / 1000,
  minHole: Math.round(minHole! * 1000) / 1000,
  holes: holes.plated! + holes.nonPlated! + holes.unknown!,
  slots
})
const stops = ({ findings }: BundleCheck) => findings.filter((f) => f.severity === 'stop').map((f) => f.code)

beforeAll(async () => {
  const zip = await JSZip.loadAsync(readFileSync(`${folder}OC21-fx-usbadapter.zip`))
  files = new Map()
  for (const [extension, role] of Object.entries(roles)) {
    files.set(role, await zip.file(`pic18f14k50.${extension}`)!.async('nodebuffer'))
  }
  holes = readExcellon(files.get('drill')!, defaultLimits).holes
  original = await check(plain)
})

const customs: Record<string, string[]> = {
  'in capitals': ['B.GTL', 'B.GBL', 'B.GTS', 'B.GBS', 'B.GTO', 'B.GBO', 'B.GKO', 'B.TXT'],
  'in folders': ['g/b.gtl', 'g/b.gbl', 'g/b.gts', 'g/b.gbs', 'g/b.gto', 'g/b.gbo', 'g/b.gm1', 'nc drill/b.drl'],
  'by side of assembly': ['b.cmp', 'b.sol', 'b.stc', 'b.sts', 'b.plc', 'b.pls', 'b.dim', 'b.drd'],
  'by films': ['b.top', 'b.bot', 'b.smt', 'b.smb', 'b.sst', 'b.ssb', 'outline.art', 'thruhole.tap'],
  'by films with one extension': [
    'TOP.art',
    'BOTTOM.art',
    'SMT.art',
    'SMB.art',
    'SST.art',
    'SSB.art',
    'OUTLINE.art',
    'ncdrill.tap'
  ],
  'with layer numbers': [
    'L1_TOP.art',
    'L2_BOTTOM.art',
    'SOLDERMASK_TOP.art',
    'SOLDERMASK_BOTTOM.art',
    'SILKSCREEN_TOP.art',
    'SILKSCREEN_BOTTOM.art',
    'BOARD_OUTLINE.art',
    'ncdrill.drl'
  ],
  'with a project that reads like layers': [
    'front-panel mask tester-F_Cu.gbr',
    'front-panel mask tester-B_Cu.gbr',
    'front-panel mask tester-F_Mask.gbr',
    'front-panel mask tester-B_Mask.gbr',
    'front-panel mask tester-F_SilkS.gbr',
    'front-panel mask tester-B_SilkS.gbr',
    'front-panel mask tester-Edge_Cuts.gbr',
    'front-panel mask tester.drl'
  ],
  'in words together': [
    'Top.gbr',
    'Bottom.gbr',
    'TopMask.gbr',
    'BottomMask.gbr',
    'TopSilk.gbr',
    'BottomSilk.gbr',
    'BoardOutline.gbr',
    'Through.drl'
  ],
  'in words, kind first': [
    'copper_top.gbr',
    'copper_bottom.gbr',
    'soldermask_top.gbr',
    'soldermask_bottom.gbr',
    'silkscreen_top.gbr',
    'silkscreen_bottom.gbr',
    'profile.gbr',
    'drill_1_16.xln'
  ],
  'in words after a project': [
    'b.toplayer.ger',
    'b.bottomlayer.ger',
    'b.topsoldermask.ger',
    'b.bottomsoldermask.ger',
    'b.topsilkscreen.ger',
    'b.bottomsilkscreen.ger',
    'b.boardoutline.ger',
    'b.drills.xln'
  ],
  'in German': [
    'Kupfer_oben.gbr',
    'Kupfer_unten.gbr',
    'Lötstopp_oben.gbr',
    'Loetstopp_unten.gbr',
    'Bestückungsdruck_oben.gbr',
    'Bestueckungsdruck_unten.gbr',
    'Umriss.gbr',
    'Bohrungen.drl'
  ]
}

describe('the names of layers', () => {
  it.each(Object.entries(customs))('%s tell the same', async (_, names) => {
    const named = Object.fromEntries(order.map((role, i) => [role, names[i]!])) as Record<Role, string>
    const answer = await check(named)
    for (const role of order) {
      const { function: fn, side, index } = original.layers.find(({ file }) => file === plain[role])!
      expect(answer.layers.find(({ file }) => file === named[role])).toMatchObject({ function: fn, side, index })
    }
    expect(measured(answer)).toEqual(measured(original))
    expect(stops(answer)).toEqual(stops(original))
  })
})

/** A Gerber file of format 2.4 in inches written with other units, digits and zeros. */
function rewritten(text: string, to: { unit: 'IN' | 'MM'; integer: number; decimals: number; zeros: 'L' | 'T' }): string {
  const scale = to.unit === 'MM' ? 25.4 : 1
  const number = (digits: string) => {
    const value = Math.round((Number(digits) / 1e4) * scale * 10 ** to.decimals)
    const padded = String(Math.abs(value)).padStart(to.integer + to.decimals, '0')
    const kept = to.zeros === 'T' ? padded.replace(/0+$/, '') || '0' : padded.replace(/^0+/, '') || '0'
    return (value < 0 ? '-' : '') + kept
  }
  return text
    .replace(/%MOIN\*%/, `%MO${to.unit}*%`)
    .replace(/^G70\*/m, to.unit === 'MM' ? 'G71*' : 'G70*')
    .replace(/%FSLAX24Y24\*%/, `%FS${to.zeros}AX${to.integer}${to.decimals}Y${to.integer}${to.decimals}*%`)
    .replace(/(%ADD\d+[A-Z]\w*),([\d.X]+)\*%/g, (_, name: string, sizes: string) => {
      return `${name},${sizes
        .split('X')
        .map((size) => (Number(size) * scale).toFixed(6))
        .join('X')}*%`
    })
    .replace(/^(?:G0[123])?(?:[XYIJ]-?\d+)+D0[123]\*/gm, (line) =>
      line.replace(/([XYIJ])(-?\d+)/g, (_, axis: string, d: string) => axis + number(d))
    )
}

describe('Gerber files', () => {
  const forms = [
    { unit: 'MM', integer: 4, decimals: 6, zeros: 'L' },
    { unit: 'MM', integer: 4, decimals: 5, zeros: 'T' },
    { unit: 'IN', integer: 2, decimals: 5, zeros: 'L' },
    { unit: 'IN', integer: 3, decimals: 6, zeros: 'T' }
  ] as const
  it.each(forms)('measure the same in $unit with $integer and $decimals digits, $zeros zeros left out', async (form) => {
    const answer = await check(plain, (role, bytes) => (role === 'drill' ? bytes : rewritten(bytes.toString('latin1'), form)))
    expect(measured(answer)).toEqual(measured(original))
    expect(stops(answer)).toEqual(stops(original))
  })

  it.each([
    ['CRLF', '\r\n'],
    ['CR', '\r'],
    ['no line ends', '']
  ])('measure the same with %s', async (_, end) => {
    const answer = await check(plain, (role, bytes) => {
      const text = bytes.toString('latin1')
      return role === 'drill' && end === '' ? bytes : text.replace(/\r?\n/g, end)
    })
    expect(measured(answer)).toEqual(measured(original))
  })

  it('measure the same with coordinates that go on, tools chosen by G54 and other forms of old', async () => {
    const answer = await check(plain, (role, bytes) =>
      role === 'drill'
        ? bytes
        : bytes
            .toString('latin1')
            .replace(/^(D\d\d\*)/gm, 'G54$1')
            .replace(/%MOIN\*%/, '%ICAS*%\n%MOIN*%\nG70*\nG90*\n%MIA0B0*%\n%IOA0B0*%\n%SFA1.0B1.0*%\n%ASAXBY*%\n%SRX1Y1I0J0*%')
    )
    expect(measured(answer)).toEqual(measured(original))
    expect(answer.findings.find((f) => f.code === 'deprecated-syntax')?.found).toMatch(/G54|IC/)
  })
})

/** The board's holes written as a drill file: how a place is written, what stands before the tools and how a tool is told. */
function drillFile(form: {
  head: string
  unit: number
  write: (units: number) => string
  tool?: (code: number, size: string) => string
  middle?: string
  atEnd?: boolean
}) {
  const sizes = [...new Set(holes.map((hole) => hole.diameter))]
  const tools = sizes
    .map((size, i) => (form.tool ?? ((code, text) => `T${code}C${text}`))(i + 1, (size / form.unit).toFixed(4)))
    .join('\n')
  const body = sizes
    .map((size, i) => {
      const places = holes.filter((hole) => hole.diameter === size)
      return [`T${i + 1}`, ...places.map(({ x, y }) => `X${form.write(x / form.unit)}Y${form.write(y / form.unit)}`)].join('\n')
    })
    .join('\n')
  return [form.head, form.atEnd ? '' : tools, form.middle ?? '%', body, form.atEnd ? tools : '', 'M30', ''].join('\n')
}
const decimal = (value: number) => value.toFixed(4)
const digits = (integer: number, decimals: number, keeps: 'leading' | 'trailing' | 'all') => (value: number) => {
  const whole = Math.round(value * 10 ** decimals)
  const padded = String(Math.abs(whole)).padStart(integer + decimals, '0')
  const kept = keeps === 'leading' ? padded.replace(/0+$/, '') : keeps === 'trailing' ? padded.replace(/^0+/, '') : padded
  return (whole < 0 ? '-' : '') + (kept || '0')
}

describe('drill files', () => {
  const forms: Record<string, () => string> = {
    'mm with points': () => drillFile({ head: 'M48\nMETRIC', unit: 1, write: decimal }),
    'inches with points': () => drillFile({ head: 'M48\nFMAT,2\nINCH', unit: 25.4, write: (v) => v.toFixed(5) }),
    'inches, trailing zeros kept': () => drillFile({ head: 'M48\nINCH,TZ', unit: 25.4, write: digits(2, 4, 'trailing') }),
    'inches, leading zeros kept': () => drillFile({ head: 'M48\nINCH,LZ', unit: 25.4, write: digits(2, 4, 'leading') }),
    'mm, trailing zeros kept': () => drillFile({ head: 'M48\nMETRIC,TZ', unit: 1, write: digits(3, 3, 'trailing') }),
    'mm, leading zeros kept': () => drillFile({ head: 'M48\nMETRIC,LZ', unit: 1, write: digits(3, 3, 'leading') }),
    'mm with digits in a comment': () =>
      drillFile({ head: 'M48\n;FILE_FORMAT=4:4\nMETRIC,LZ', unit: 1, write: digits(4, 4, 'leading') }),
    'mm with digits in the unit line': () =>
      drillFile({ head: 'M48\nMETRIC,TZ,000.00000', unit: 1, write: digits(3, 5, 'trailing') }),
    'the unit by M71 after the header': () =>
      drillFile({ head: 'M48\nMETRIC,TZ', unit: 1, write: digits(3, 3, 'all'), middle: '%\nG90\nM71' }),
    'the unit by M72, no header': () => drillFile({ head: '%\nM72', unit: 25.4, write: digits(2, 4, 'all'), middle: 'G90' }),
    'speeds at the tools and remarks at the lines': () =>
      drillFile({
        head: 'M48 ; head\nINCH,TZ',
        unit: 25.4,
        write: digits(2, 4, 'trailing'),
        tool: (c, s) => `T0${c}F200S100C${s} ; tool`
      }),
    'tools in comments': () =>
      drillFile({
        head: ';HEADER:',
        unit: 25.4,
        write: digits(2, 4, 'all'),
        middle: '%\nG90\nM72',
        tool: (c, s) => `;T0${c} ${(Number(s) * 25.4).toFixed(3)}mm`
      }),
    'tools in comments by mils': () =>
      drillFile({
        head: ';HEADER:',
        unit: 25.4,
        write: digits(2, 4, 'all'),
        middle: '%\nG90\nM72',
        tool: (c, s) => `;T0${c} Holesize ${c}. = ${(Number(s) * 1000).toFixed(4)} Tolerance = +0.0/-0.0 PLATED MILS Quantity = 3`
      }),
    'tools at the end': () => drillFile({ head: 'M48\nMETRIC', unit: 1, write: decimal, atEnd: true }),
    'CR line ends': () => drillFile({ head: 'M48\nMETRIC', unit: 1, write: decimal }).replaceAll('\n', '\r')
  }
  it.each(Object.entries(forms))('tell the same holes: %s', async (_, make) => {
    const answer = await check(plain, (role, bytes) => (role === 'drill' ? make() : bytes))
    expect(measured(answer)).toEqual(measured(original))
    expect(stops(answer)).toEqual(stops(original))
  })
})

describe('a demo bundle', () => {
  it.each([
    ['as comments', (text: string) => text.replace(/%(T[FAOD][^%]*)\*%/g, 'G04 #@! $1*')],
    ['not at all', (text: string) => text.replace(/%T[FAOD][^%]*\*%\r?\n?/g, '')]
  ])('tells its layers with its attributes %s', async (how, change) => {
    const demo = await demoFiles('sundial-1.2.0')
    const plainAnswer = (await checkBundle(await zipOf(demo))).check
    const changed = new Map(
      [...demo].map(([path, bytes]) => [path, /\.g\w+$/.test(path) && !path.endsWith('job') ? change(bytes.toString()) : bytes])
    )
    const answer = (await checkBundle(await zipOf(changed))).check
    const told = ({ layers }: BundleCheck) => layers.map(({ file, function: fn, side, index }) => [file, fn, side, index].join())
    expect(told(answer)).toEqual(told(plainAnswer))
    expect(answer.facts.width).toBe(plainAnswer.facts.width)
    expect(answer.facts.holes).toEqual(plainAnswer.facts.holes)
    if (how === 'as comments') expect(answer.facts.minTrack).toBe(plainAnswer.facts.minTrack)
    else expect([answer.facts.minTrack, answer.facts.smallestStroke !== null]).toEqual([null, true])
    expect(stops(answer)).toEqual([])
  })
})
