import { describe, expect, it } from 'vitest'
import { demoFiles, zipOf } from '../../../tests/factories/demo-bundle'
import { edit, expectDefect, type Defect, type Files } from '../../../tests/factories/defect'
import { checkBundle } from './check-bundle.server'

const almanac = 'almanac-1.0.1'
const buttress = 'buttress-1.1.0'
const top = 'gerber/almanac-F_Cu.gbr'
const edge = 'gerber/almanac-Edge_Cuts.gbr'
const inner = 'gerber/buttress-In1_Cu.gbr'
const paste = 'gerber/almanac-F_Paste.gbr'
const legend = 'gerber/almanac-F_Silkscreen.gbr'
const pth = 'drill/almanac-PTH.drl'

const moved = (content: string, change: (x: number) => number) =>
  content.replace(/^X(-?\d+)(?=Y)/gm, (_, x: string) => `X${change(Number(x))}`)

/** A path drawn at the end of a file with 4.6 mm digits, in mm. */
const drawn = (files: Files, path: string, width: number, ...points: [number, number][]) =>
  edit(files, path, (content) => {
    const at = ([x, y]: [number, number]) => `X${Math.round(x * 1e6)}Y${Math.round(y * 1e6)}`
    const strokes = points.map((point, i) => `${at(point)}${i === 0 ? 'D02' : 'D01'}*`).join('\n')
    return content.replace('M02*', `%LPD*%\n%ADD990C,${width}*%\nD990*\nG01*\n${strokes}\nM02*`)
  })

const square = (x: number, y: number, size: number): [number, number][] => [
  [x, y],
  [x + size, y],
  [x + size, y + size],
  [x, y + size],
  [x, y]
]

const cases: Defect[] = [
  ['a track past the edge', almanac, (f) => drawn(f, top, 0.3, [12, 10], [25, 10]), 'copper-past-outline', 'caution', top],
  ['a cut-out through copper', almanac, (f) => drawn(f, edge, 0.1, ...square(10.5, 8.5, 3)), 'copper-past-outline', 'caution'],
  [
    'an inner plane shifted',
    buttress,
    (f) => edit(f, inner, (c) => moved(c, (x) => x + 1_000_000)),
    'layer-misaligned',
    'stop',
    inner
  ],
  [
    'an inner plane mirrored',
    buttress,
    (f) => edit(f, inner, (c) => moved(c, (x) => 38_000_000 - x)),
    'layer-misaligned',
    'stop',
    inner
  ],
  ['a stencil shifted', almanac, (f) => edit(f, paste, (c) => moved(c, (x) => x + 300_000)), 'layer-misaligned', 'stop', paste],
  [
    'a legend beside the board',
    almanac,
    (f) => edit(f, legend, (c) => moved(c, (x) => x + 24_000_000)),
    'layer-misaligned',
    'stop',
    legend
  ],
  [
    'a hole beside the board',
    almanac,
    (f) => edit(f, 'drill/almanac-NPTH.drl', (c) => c.replace('\nT1\nX', '\nX60.0Y10.0\nT1\nX')),
    'hole-on-outline',
    'note',
    'drill/almanac-NPTH.drl'
  ]
]

const check = async (release: string, change: (files: Files) => unknown, code: string) => {
  const files = await demoFiles(release)
  change(files)
  const { findings } = (await checkBundle(await zipOf(files))).check
  return findings.find((finding) => finding.code === code)!
}

describe('a bundle with one defect at its edges or between its layers', () => {
  it.each(cases)('%s', (_name, ...defect) => expectDefect(...defect))

  it('says how far copper reaches past the edge, and where', async () => {
    const found = await check(almanac, cases[0]![2], 'copper-past-outline')
    expect(found.found).toBe('1.15 mm past the right edge')
    expect(found.place).toMatchObject({ y: 10, side: 'top' })
    expect(found.place!.x).toBeCloseTo(25, 1)
  })

  it('names the cut-out that copper reaches into', async () => {
    expect((await check(almanac, cases[1]![2], 'copper-past-outline')).found).toMatch(/mm into the cut-out at 1[12]/)
  })

  it('names plated half-holes as such', async () => {
    expect((await check(buttress, () => {}, 'copper-past-outline')).message).toContain('where plated holes are cut by it')
  })

  it('gives the place of an open outline, of holes off their pads and of parts outside', async () => {
    const open = (f: Files) => edit(f, edge, (c) => c.replace(/X\d+Y\d+D02\*\s*X\d+Y\d+D01\*(?![\s\S]*D02)/, ''))
    expect((await check(almanac, open, 'outline-open')).place).not.toBeNull()
    const shifted = (f: Files) => edit(f, pth, (c) => c.replace(/X([\d.]+)Y/g, (_, x: string) => `X${Number(x) + 1.1}Y`))
    expect((await check(almanac, shifted, 'drill-misaligned')).place).not.toBeNull()
    const out = (f: Files) =>
      edit(f, 'assembly/almanac-placement.csv', (c) => c.replace(/^(R1,[^\n]*?),\d+\.\d+(mm)?,/m, '$1,95.5$2,'))
    expect((await check(almanac, out, 'placement-outside')).place).toMatchObject({ y: 95.5 })
  })
})
