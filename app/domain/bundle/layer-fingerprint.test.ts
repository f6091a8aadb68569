import fc from 'fast-check'
import { beforeAll, describe, expect, it } from 'vitest'
import { demoFiles, zipOf } from '../../../tests/factories/demo-bundle'
import { edit, type Files } from '../../../tests/factories/defect'
import { respellDrill, respellGerber, type Spelling } from '../../../tests/factories/respell-gerber'
import type { LayerFingerprint } from './bundle-check.types'
import { checkBundle } from './check-bundle.server'
import type { BundleReading } from './bundle-reading.types'
import { compareFingerprints, isSameGeometry, layerName } from './compare-fingerprints'
import { fingerprintsOf } from './layer-fingerprint'

const printsOf = async (files: ReadonlyMap<string, Buffer | string>) =>
  (await checkBundle(await zipOf(files))).record!.fingerprints

/** The differences for people: `changed copper top`. */
const differences = (a: LayerFingerprint[], b: LayerFingerprint[]) =>
  compareFingerprints(a, b)
    .map(({ kind, layer }) => `${kind} ${layerName(layer)}`)
    .sort()

/** Every layer and drill file of a bundle written anew. */
function respelled(files: Files, spelling: Spelling): Files {
  const drillDigits = { ...spelling, decimals: spelling.unit === 'inch' ? 4 : 3 }
  return new Map(
    [...files].map(([path, bytes]) => {
      if (path.endsWith('.gbr')) return [path, Buffer.from(respellGerber(bytes.toString('utf8'), spelling))]
      if (path.endsWith('.drl')) return [path, Buffer.from(respellDrill(bytes.toString('utf8'), drillDigits))]
      return [path, bytes]
    })
  )
}

/** A small seeded generator, so that the order is another one but the same in every run. */
function randomOf(seed: number) {
  let state = seed
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 32
  }
}

const top = 'gerber/buttress-F_Cu.gbr'
const spellings: [string, Spelling][] = [
  ['with its objects in another order and its apertures under other numbers', { random: randomOf(1), firstAperture: 40 }],
  ['with 0, 0 elsewhere', { dx: 101.6, dy: -73.123456 }],
  ['in mm with five decimals', { decimals: 5, random: randomOf(2) }],
  ['in inches with six decimals, moved', { unit: 'inch', decimals: 6, dx: 100, dy: 50 }],
  ['in inches with five decimals', { unit: 'inch', decimals: 5, random: randomOf(3) }],
  ['in inches with four decimals', { unit: 'inch', decimals: 4 }]
]

describe.each(['buttress-1.1.0', 'almanac-1.0.0', 'sundial-1.2.0'])('the fingerprints of %s', (release) => {
  let files: Files
  let prints: LayerFingerprint[]
  beforeAll(async () => {
    files = await demoFiles(release)
    prints = await printsOf(files)
  })

  it('stand for every copper layer, the outline and the holes', () => {
    const copper = [...files.keys()].filter((path) => path.endsWith('_Cu.gbr')).length
    expect(prints.map((print) => print.function).sort()).toEqual([...Array(copper).fill('copper'), 'drill', 'outline'].sort())
  })

  it.each(spellings)('are the same %s', async (_, spelling) => {
    expect(differences(prints, await printsOf(respelled(files, spelling)))).toEqual([])
  })

  it('tell the layers apart', () => {
    for (const a of prints)
      for (const b of prints) if (a !== b) expect(isSameGeometry(a, { ...b, function: a.function })).toBe(false)
  })
})

/** The nth flash of a file, moved by so many nm to the right. */
const moveFlash = (text: string, n: number, nm: number) => {
  let count = 0
  return text.replace(/X(-?\d+)(Y-?\d+D03\*)/g, (all, x: string, rest: string) =>
    count++ === n ? `X${Number(x) + nm}${rest}` : all
  )
}
const shiftAll = (text: string, mm: number) => respellGerber(text, { dx: mm })

const changes: [string, (files: Files) => unknown, string[]][] = [
  ...[0, 7, 31].map((n): [string, (files: Files) => unknown, string[]] => [
    `pad ${n} moved by 0.05 mm`,
    (files) => edit(files, top, (text) => moveFlash(text, n, 50_000)),
    ['changed copper top']
  ]),
  ['a pad gone', (files) => edit(files, top, (text) => text.replace(/X-?\d+Y-?\d+D03\*\n/, '')), ['changed copper top']],
  ['a round aperture larger by 0.05 mm', (files) => edit(files, top, wider), ['changed copper top']],
  [
    'the corners of a macro aperture moved by 0.05 mm',
    (files) => edit(files, top, (text) => text.replace('0.275000X-0.225000X0.275000', '0.325000X-0.225000X0.325000')),
    ['changed copper top']
  ],
  ['a track less', (files) => edit(files, top, withoutTrack), ['changed copper top']],
  [
    'a region clear that was dark',
    (files) => edit(files, top, (text) => text.replace('G36*', '%LPC*%\nG36*').replace('G37*', 'G37*\n%LPD*%')),
    ['changed copper top']
  ],
  ['copper shifted by 0.05 mm', (files) => edit(files, top, (text) => shiftAll(text, 0.05)), ['changed copper top']],
  ['two layers exchanged', exchangeInner, ['changed copper layer 2', 'changed copper layer 3']],
  ['an inner layer gone', (files) => files.delete('gerber/buttress-In2_Cu.gbr'), ['removed copper layer 3']],
  [
    'a hole gone',
    (files) => edit(files, 'drill/buttress-PTH.drl', (text) => text.replace('X0.8Y11.4\n', '')),
    ['changed the drilled holes']
  ],
  [
    'a hole moved by 0.05 mm',
    (files) => edit(files, 'drill/buttress-PTH.drl', (text) => text.replace('X0.8Y11.4\n', 'X0.85Y11.4\n')),
    ['changed the drilled holes']
  ],
  [
    'a larger drill',
    (files) => edit(files, 'drill/buttress-PTH.drl', (text) => text.replace('T1C0.300', 'T1C0.350')),
    ['changed the drilled holes']
  ],
  [
    'plated holes that were not',
    (files) =>
      edit(files, 'drill/buttress-PTH.drl', (text) =>
        text.replace('T2C', '; #@! TA.AperFunction,NonPlated,NPTH,ComponentDrill\nT2C')
      ),
    ['changed the drilled holes']
  ],
  [
    'a wider board',
    (files) =>
      edit(files, 'gerber/buttress-Edge_Cuts.gbr', (text) =>
        text.replaceAll('X38000000', 'X38200000').replaceAll('X37200000', 'X37400000')
      ),
    ['changed the outline']
  ]
]

function wider(text: string): string {
  const [definition, code, size] = /%ADD(\d+)C,([\d.]+)\*%/.exec(text)!
  return text.replace(definition, `%ADD${code}C,${(Number(size) + 0.05).toFixed(6)}*%`)
}
const withoutTrack = (text: string) => text.replace(/(X-?\d+Y-?\d+)D01\*\n(?=X-?\d+Y-?\d+D02\*)/, '$1D02*\n')
function exchangeInner(files: Files): void {
  const [two, three] = ['gerber/buttress-In1_Cu.gbr', 'gerber/buttress-In2_Cu.gbr'].map((path) => files.get(path)!.toString())
  files.set('gerber/buttress-In1_Cu.gbr', Buffer.from(three!.replace('Copper,L3', 'Copper,L2')))
  files.set('gerber/buttress-In2_Cu.gbr', Buffer.from(two!.replace('Copper,L2', 'Copper,L3')))
}

describe('a change', () => {
  let prints: LayerFingerprint[]
  beforeAll(async () => {
    prints = await printsOf(await demoFiles('buttress-1.1.0'))
  })

  it.each(changes)('is seen: %s', async (_, change, expected) => {
    const files = await demoFiles('buttress-1.1.0')
    change(files)
    expect(differences(prints, await printsOf(files))).toEqual(expected)
  })

  it('is seen in an export in inches with another origin, too', async () => {
    const files = await demoFiles('buttress-1.1.0')
    edit(files, top, (text) => moveFlash(text, 7, 50_000))
    edit(files, 'drill/buttress-PTH.drl', (text) => text.replace('X0.8Y11.4\n', 'X0.9Y11.4\n'))
    const other = await printsOf(respelled(files, { unit: 'inch', decimals: 6, dx: 20, dy: 20, random: randomOf(5) }))
    expect(differences(prints, other)).toEqual(['changed copper top', 'changed the drilled holes'])
  })
})

/** A copper layer by itself. */
async function printOf(body: string): Promise<LayerFingerprint> {
  const gerber = `%TF.FileFunction,Copper,L1,Top*%\n%FSLAX46Y46*%\n%MOMM*%\n${body}M02*\n`
  return (await printsOf(new Map([['top.gbr', gerber]]))).find((print) => print.function === 'copper')!
}
const isSame = async (a: string, b: string) => isSameGeometry(await printOf(a), await printOf(b))
const flash = (x: number, y: number) => `X${x}000000Y${y}000000D03*\n`
const pad = '%ADD10R,1X2*%\n'

/** Hand-made pairs after the Gerber Layer Format Specification 2024.05. */
describe('two ways to draw', () => {
  it.each([
    [
      'a block aperture or its flashes',
      `${pad}%ABD20*%\nD10*\n${flash(0, 0)}${flash(3, 0)}%AB*%\nD20*\n${flash(5, 5)}`,
      `${pad}D10*\n${flash(8, 5)}${flash(5, 5)}`
    ],
    [
      'step and repeat or its copies',
      `${pad}D10*\n%SRX2Y2I4J6*%\n${flash(1, 1)}%SR*%\n`,
      `${pad}D10*\n${flash(1, 1)}${flash(5, 1)}${flash(5, 7)}${flash(1, 7)}`
    ],
    [
      'a stroke from either end',
      '%ADD10C,0.2*%\nD10*\nX0Y0D02*\nX5000000Y1000000D01*\n',
      '%ADD10C,0.2*%\nD10*\nX5000000Y1000000D02*\nX0Y0D01*\n'
    ],
    [
      'an arc from either end',
      '%ADD10C,0.2*%\nG75*\nD10*\nX0Y0D02*\nG03*\nX4000000Y4000000I0J4000000D01*\n',
      '%ADD10C,0.2*%\nG75*\nD10*\nX4000000Y4000000D02*\nG02*\nX0Y0I-4000000J0D01*\n'
    ],
    [
      'a region from another corner',
      'G36*\nX0Y0D02*\nX5000000D01*\nX0Y3000000D01*\nX0Y0D01*\nG37*\n',
      'G36*\nX0Y3000000D02*\nX5000000Y0D01*\nX0D01*\nY3000000D01*\nG37*\n'
    ],
    [
      'a macro under another name',
      '%AMA*1,1,$1,0,0*%\n%ADD10A,2*%\nD10*\n' + flash(1, 1),
      '%AMB*0 round*\n1,1,1+1,0,0*%\n%ADD33B*%\nD33*\n' + flash(9, 9)
    ]
  ])('%s are the same', async (_, a, b) => {
    expect(await isSame(a, b)).toBe(true)
  })

  it.each([
    [
      'an arc and its chord',
      '%ADD10C,0.2*%\nG75*\nD10*\nX0Y0D02*\nG03*\nX4000000Y4000000I0J4000000D01*\n',
      '%ADD10C,0.2*%\nD10*\nX0Y0D02*\nX4000000Y4000000D01*\n'
    ],
    [
      'arcs of either direction',
      '%ADD10C,0.2*%\nG75*\nD10*\nX0Y0D02*\nG03*\nX4000000Y4000000I0J4000000D01*\n',
      '%ADD10C,0.2*%\nG75*\nD10*\nX0Y0D02*\nG02*\nX4000000Y4000000I0J4000000D01*\n'
    ],
    ['a pad and the same one turned', `${pad}D10*\n${flash(0, 0)}`, `${pad}D10*\n%LR45*%\n${flash(0, 0)}`],
    ['a pad and the same one scaled', `${pad}D10*\n${flash(0, 0)}`, `${pad}D10*\n%LS1.1*%\n${flash(0, 0)}`],
    ['a rectangle and an obround', `${pad}D10*\n${flash(0, 0)}`, `%ADD10O,1X2*%\nD10*\n${flash(0, 0)}`],
    ['a ring and a disc', `%ADD10C,2X1*%\nD10*\n${flash(0, 0)}`, `%ADD10C,2*%\nD10*\n${flash(0, 0)}`],
    [
      'four steps and three',
      `${pad}D10*\n%SRX4Y1I4J0*%\n${flash(1, 1)}%SR*%\n`,
      `${pad}D10*\n%SRX3Y1I4J0*%\n${flash(1, 1)}%SR*%\n`
    ]
  ])('%s differ', async (_, a, b) => {
    expect(await isSame(a, b)).toBe(false)
  })
})

describe('any layer', () => {
  const nm = fc.integer({ min: -40_000_000, max: 40_000_000 })
  const object = fc.record({
    kind: fc.constantFrom('flash', 'stroke'),
    d: fc.integer({ min: 10, max: 13 }),
    x: nm,
    y: nm,
    toX: nm,
    toY: nm
  })
  const apertures = '%ADD10C,0.25*%\n%ADD11C,0.6*%\n%ADD12R,1.2X0.8*%\n%ADD13O,1.7X1.1*%\n'
  const written = (objects: { kind: string; d: number; x: number; y: number; toX: number; toY: number }[]) =>
    apertures +
    objects
      .map((o) => `D${o.d}*\n` + (o.kind === 'flash' ? `X${o.x}Y${o.y}D03*\n` : `X${o.x}Y${o.y}D02*\nX${o.toX}Y${o.toY}D01*\n`))
      .join('')

  it('is known again in another order, place and unit, and not with one object moved by 0.05 mm', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(object, { minLength: 1, maxLength: 60 }),
        fc.nat(),
        fc.integer({ min: 0, max: 59 }),
        fc.integer({ min: -100, max: 100 }),
        async (objects, seed, nth, dx) => {
          const plain = written(objects)
          const print = await printOf(plain)
          const other = respellGerber(plain, {
            unit: 'inch',
            decimals: 6,
            dx,
            dy: dx / 3,
            random: randomOf(seed),
            firstAperture: 50
          })
          const again = (await printsOf(new Map([['top.gbr', `%TF.FileFunction,Copper,L1,Top*%\n${other}`]])))[0]!
          expect(isSameGeometry(print, again)).toBe(true)
          const moved = objects.map((o, i) => (i === nth % objects.length ? { ...o, x: o.x + 50_000 } : o))
          if (objects.length > 1) expect(isSameGeometry(print, await printOf(written(moved)))).toBe(false)
        }
      ),
      { numRuns: 60 }
    )
  })
})

describe('a drill file with a step of 1 µm and 900 holes', () => {
  const holes = Array.from({ length: 900 }, (_, i) => ({ x: 1 + (i % 30), y: 1 + Math.floor(i / 30), diameter: 0.3 }))
  const print = (list: { x: number; y: number; diameter: number }[], shift = 0) => {
    const [low, high] = [shift, 32 + shift]
    const reading = {
      outline: {
        box: { minX: low, minY: 0, maxX: high, maxY: 32 },
        contour: [low, 0, high, 0, high, 32, low, 32],
        others: []
      },
      outlineFile: { isBroken: false, image: { resolution: 1e-6, problem: null }, layer: { file: 'edge.gbr' } },
      files: [
        {
          layer: { function: 'drill-plated', file: 'board.drl' },
          isBroken: false,
          image: { resolution: 1e-3, problem: null },
          holes: list.map((hole) => ({ ...hole, x: Number((hole.x + shift).toFixed(3)), toX: null, toY: null, plating: null }))
        }
      ]
    }
    return fingerprintsOf(reading as unknown as BundleReading).find((each) => each.function === 'drill')!
  }
  const moved = holes.map((hole, i) => (i === 444 ? { ...hole, x: hole.x + 0.05 } : hole))

  it('shows one hole moved by 0.05 mm where 0, 0 stayed', () => {
    expect(isSameGeometry(print(holes), print(holes))).toBe(true)
    expect(isSameGeometry(print(holes), print(moved))).toBe(false)
  })

  it('is known again where 0, 0 went between two steps', () => {
    expect(isSameGeometry(print(holes), print(holes, 0.0004))).toBe(true)
  })
})
