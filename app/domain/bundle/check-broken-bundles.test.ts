import { describe, expect, it } from 'vitest'
import { demoFiles, zipOf } from '../../../tests/factories/demo-bundle'
import type { BundleFinding, DeclaredDetails } from './bundle-check.types'
import { checkBundle } from './check-bundle.server'

type Files = Map<string, Buffer>
const almanac = 'almanac-1.0.1'
const buttress = 'buttress-1.1.0'
const text = (files: Files, path: string) => files.get(path)!.toString('utf8').replaceAll('\r\n', '\n')
const edit = (files: Files, path: string, change: (content: string) => string) => {
  const before = text(files, path)
  const after = change(before)
  if (after === before) throw new Error(`The change to ${path} changes nothing`)
  files.set(path, Buffer.from(after))
}
const top = 'gerber/almanac-F_Cu.gbr'
const bottom = 'gerber/almanac-B_Cu.gbr'
const edge = 'gerber/almanac-Edge_Cuts.gbr'
const pth = 'drill/almanac-PTH.drl'
const bom = 'assembly/almanac-bom.csv'
const places = 'assembly/almanac-placement.csv'

/** All coordinates of a Gerber file moved, in its own 4.6 mm digits. */
const shifted = (content: string, dx: number) => content.replace(/^X(-?\d+)(?=Y)/gm, (_, x: string) => `X${Number(x) + dx}`)
const mirrored = (content: string, width: number) =>
  content.replace(/^X(-?\d+)(?=Y)/gm, (_, x: string) => `X${width - Number(x)}`)

type Case = [
  name: string,
  release: string,
  (files: Files) => void,
  code: string,
  severity: 'stop' | 'caution' | 'note',
  file?: string,
  declared?: DeclaredDetails
]

/** One defect each, made from a clean demo bundle: it must give its code and no other stop. */
const cases: Case[] = [
  ['top copper gone', almanac, (f) => f.delete(top), 'copper-missing', 'stop'],
  ['a mask gone', almanac, (f) => f.delete('gerber/almanac-B_Mask.gbr'), 'mask-missing', 'stop'],
  ['the outline gone', almanac, (f) => f.delete(edge), 'outline-missing', 'stop'],
  [
    'the last stroke of the outline gone',
    almanac,
    (f) => edit(f, edge, (c) => c.replace(/X\d+Y\d+D02\*\s*X\d+Y\d+D01\*(?![\s\S]*D02)/, '')),
    'outline-open',
    'stop',
    edge
  ],
  ['two files for one layer', almanac, (f) => f.set('gerber/copy.gbr', f.get(top)!), 'layer-clash', 'stop'],
  ['an inner layer gone', buttress, (f) => f.delete('gerber/buttress-In1_Cu.gbr'), 'layer-gap', 'stop'],
  [
    'another count in the job file',
    buttress,
    (f) => edit(f, 'gerber/buttress-job.gbrjob', (c) => c.replace('"LayerNumber": 4', '"LayerNumber": 2')),
    'layer-count',
    'stop'
  ],
  ['another count in the form', almanac, () => {}, 'layer-count', 'stop', undefined, { declaredLayers: 4 }],
  [
    'an empty legend file',
    almanac,
    (f) => f.set('gerber/almanac-F_Silkscreen.gbr', Buffer.alloc(0)),
    'layer-empty',
    'stop',
    'gerber/almanac-F_Silkscreen.gbr'
  ],
  [
    'copper that draws nothing',
    almanac,
    (f) => edit(f, bottom, (c) => `${c.slice(0, c.indexOf('%LPD*%'))}%LPD*%\nM02*\n`),
    'layer-empty',
    'stop',
    bottom
  ],
  ['copper cut off', almanac, (f) => f.set(top, f.get(top)!.subarray(0, 50_000)), 'layer-truncated', 'stop', top],
  ['no format statement', almanac, (f) => edit(f, top, (c) => c.replace('%FSLAX46Y46*%', '')), 'layer-unreadable', 'stop', top],
  [
    'an aperture that is not defined',
    almanac,
    (f) => edit(f, top, (c) => c.replace(/\nD(\d\d)\*/, '\nD999*')),
    'layer-unreadable',
    'stop',
    top
  ],
  [
    'text instead of a layer',
    almanac,
    (f) => f.set(top, Buffer.from('Please find the layer attached.')),
    'layer-unreadable',
    'stop',
    top
  ],
  [
    'a billion copies',
    almanac,
    (f) => edit(f, top, (c) => c.replace('M02*', '%SRX30000Y30000I1J1*%\nD10*\nX0Y0D03*\n%SR*%\nM02*')),
    'layer-too-complex',
    'stop',
    top
  ],
  ['copper shifted', almanac, (f) => edit(f, bottom, (c) => shifted(c, 3_000_000)), 'layer-misaligned', 'stop', bottom],
  ['copper of another board', almanac, (f) => edit(f, bottom, (c) => shifted(c, 90_000_000)), 'layer-misaligned', 'stop', bottom],
  [
    'copper mirrored',
    'sundial-1.2.0',
    (f) => edit(f, 'gerber/sundial-B_Cu.gbr', (c) => mirrored(c, 62_000_000)),
    'layer-misaligned',
    'stop',
    'gerber/sundial-B_Cu.gbr'
  ],
  [
    'copper shifted by a fifth of a millimetre',
    almanac,
    (f) => edit(f, bottom, (c) => shifted(c, 200_000)),
    'layer-misaligned',
    'stop',
    bottom
  ],
  [
    'holes shifted by a fifth of a millimetre',
    buttress,
    (f) =>
      edit(f, 'drill/buttress-PTH.drl', (c) => c.replace(/X([\d.]+)Y/g, (_, x: string) => `X${(Number(x) + 0.2).toFixed(3)}Y`)),
    'drill-misaligned',
    'stop',
    'drill/buttress-PTH.drl'
  ],
  [
    'a mask shifted',
    almanac,
    (f) => edit(f, 'gerber/almanac-F_Mask.gbr', (c) => shifted(c, 1_500_000)),
    'layer-misaligned',
    'stop',
    'gerber/almanac-F_Mask.gbr'
  ],
  [
    'name and attribute at odds',
    almanac,
    (f) =>
      f.set('gerber/almanac-Edge.gbr', f.get(edge)!) &&
      f.delete(edge) &&
      f.set('gerber/x-F_Paste.gbr', f.get('gerber/almanac-B_Paste.gbr')!) &&
      f.delete('gerber/almanac-B_Paste.gbr'),
    'layer-conflict',
    'caution',
    'gerber/x-F_Paste.gbr'
  ],
  [
    'a layer nobody knows',
    almanac,
    (f) => f.set('gerber/odd.gbr', Buffer.from('%FSLAX46Y46*%\n%MOMM*%\n%ADD10C,0.1*%\nD10*\nX0Y0D03*\nM02*\n')),
    'layer-unknown',
    'caution',
    'gerber/odd.gbr'
  ],
  ['paste gone where parts are placed', almanac, (f) => f.delete('gerber/almanac-B_Paste.gbr'), 'paste-missing', 'caution'],
  [
    'a legend gone where parts are placed',
    almanac,
    (f) => f.delete('gerber/almanac-F_Silkscreen.gbr'),
    'legend-missing',
    'caution'
  ],
  ['old commands', almanac, (f) => edit(f, top, (c) => c.replace(/\nD(\d\d)\*/, '\nG54D$1*')), 'deprecated-syntax', 'note', top],
  [
    'markup in an attribute',
    almanac,
    (f) => edit(f, top, (c) => c.replace('%LPD*%', '%TO.C,<img src=x onerror=alert(1)>*%\n%TD.C*%\n%LPD*%')),
    'text-unsafe',
    'note',
    top
  ],
  ['no drill files', almanac, (f) => f.delete(pth) && f.delete('drill/almanac-NPTH.drl'), 'drill-missing', 'stop'],
  [
    'a tool that is not defined',
    almanac,
    (f) => edit(f, pth, (c) => c.replace('\nT2\n', '\nT77\n')),
    'drill-unreadable',
    'stop',
    pth
  ],
  ['a drill file cut off', almanac, (f) => f.set(pth, f.get(pth)!.subarray(0, 700)), 'layer-truncated', 'stop', pth],
  [
    'inches under a metric header',
    almanac,
    (f) =>
      edit(f, pth, (c) =>
        c.replace(
          /X([\d.]+)Y([\d.]+)/g,
          (_, x: string, y: string) => `X${(Number(x) / 25.4).toFixed(5)}Y${(Number(y) / 25.4).toFixed(5)}`
        )
      ),
    'drill-units',
    'stop',
    pth
  ],
  [
    'holes shifted',
    almanac,
    (f) => edit(f, pth, (c) => c.replace(/X([\d.]+)Y/g, (_, x: string) => `X${(Number(x) + 1.1).toFixed(3)}Y`)),
    'drill-misaligned',
    'stop',
    pth
  ],
  [
    'non-plated holes beside the board',
    almanac,
    (f) => edit(f, 'drill/almanac-NPTH.drl', (c) => c.replace(/X([\d.]+)Y/g, (_, x: string) => `X${Number(x) + 100}Y`)),
    'drill-misaligned',
    'stop',
    'drill/almanac-NPTH.drl'
  ],
  [
    'a hundred million holes',
    almanac,
    (f) => edit(f, pth, (c) => c.replace('M30', 'R99999999X0.1Y0.1\nM30')),
    'drill-too-complex',
    'stop',
    pth
  ],
  ['no bill of materials', almanac, (f) => f.delete(bom), 'bom-missing', 'stop'],
  [
    'headings that mean nothing',
    almanac,
    (f) => edit(f, bom, (c) => c.replace(/^.*\n/, 'A,B,C,D,E,F\n')),
    'bom-unreadable',
    'stop',
    bom
  ],
  [
    'a quantity that is off by one',
    almanac,
    (f) => edit(f, bom, (c) => c.replace(/^(C1,.*?),1,/m, '$1,2,')),
    'bom-quantity',
    'stop',
    bom
  ],
  [
    'a designator in two lines',
    almanac,
    (f) => edit(f, bom, (c) => `${c.trimEnd()}\nR1,1k,R_0603,1,again,\n`),
    'bom-designator-repeated',
    'stop',
    bom
  ],
  [
    'a part without a place',
    almanac,
    (f) => edit(f, places, (c) => c.replace(/^R1,.*\n/m, '')),
    'bom-not-placed',
    'caution',
    bom
  ],
  [
    'a formula in a cell',
    almanac,
    (f) => edit(f, bom, (c) => c.replace('"R1, R2",10k,', '"R1, R2","=HYPERLINK(""x"")",')),
    'bom-cell-unsafe',
    'caution',
    bom
  ],
  ['no placement list', almanac, (f) => f.delete(places), 'placement-missing', 'stop'],
  [
    'places under headings that mean nothing',
    almanac,
    (f) => edit(f, places, (c) => c.replace(/^.*\n/, 'A,B,C,D,E\n')),
    'placement-unreadable',
    'stop',
    places
  ],
  [
    'a place that is no number',
    almanac,
    (f) => edit(f, places, (c) => c.replace(/^(R1,)[\d.]+/m, '$1here')),
    'placement-unreadable',
    'stop',
    places
  ],
  [
    'a part placed twice',
    almanac,
    (f) => edit(f, places, (c) => `${c.trimEnd()}\nR1,5.0,5.0,0,Bottom\n`),
    'placement-designator-repeated',
    'stop',
    places
  ],
  [
    'a placed part that is not listed',
    almanac,
    (f) => edit(f, places, (c) => `${c.trimEnd()}\nR77,5.0,5.0,0,Top\n`),
    'placement-not-in-bom',
    'stop',
    places
  ],
  [
    'a part beside the board',
    almanac,
    (f) => edit(f, places, (c) => c.replace(/^(R1,)[\d.]+/m, '$140.0')),
    'placement-outside',
    'stop',
    places
  ],
  [
    'mils without a unit',
    almanac,
    (f) =>
      edit(f, places, (c) =>
        c.replace(
          /,([\d.]+),([\d.]+),/g,
          (_, x: string, y: string) => `,${(Number(x) / 0.0254).toFixed(1)},${(Number(y) / 0.0254).toFixed(1)},`
        )
      ),
    'placement-units',
    'stop',
    places
  ],
  [
    'a bottom side with negated X',
    almanac,
    (f) => edit(f, places, (c) => c.replace(/^(\w+),([\d.]+)(,.*,Bottom)/gm, '$1,-$2$3')),
    'placement-mirrored',
    'caution',
    places
  ],
  ['two thicknesses', almanac, () => {}, 'thickness-conflict', 'stop', 'gerber/almanac-job.gbrjob', { thicknessMm: 1.6 }],
  ['no thickness', almanac, (f) => f.delete('gerber/almanac-job.gbrjob'), 'thickness-missing', 'caution'],
  ['no design source', almanac, (f) => f.delete('source/almanac-board.json'), 'source-missing', 'caution'],
  ['no licence', almanac, (f) => f.delete('LICENSE.txt'), 'licence-missing', 'caution'],
  [
    'an archive inside',
    almanac,
    (f) => f.set('more.zip', Buffer.from([0x50, 0x4b, 3, 4, 0, 0, 0, 0])),
    'zip-nested',
    'caution',
    'more.zip'
  ]
]

const brief = (f: BundleFinding) => `${f.severity} ${f.code} ${f.file ?? ''}`

describe('a bundle with one defect', () => {
  it.each(cases)('%s', async (_name, release, change, code, severity, file, declared) => {
    const files = await demoFiles(release)
    change(files)
    const { check } = await checkBundle(await zipOf(files), declared)
    const own = check.findings.filter((f) => f.code === code)
    expect(
      own.map((f) => f.severity),
      check.findings.map(brief).join('\n')
    ).toEqual([severity])
    if (file) expect(own[0]!.file).toBe(file)
    const otherStops = check.findings.filter((f) => f.severity === 'stop' && f.code !== code)
    expect(otherStops.map(brief)).toEqual([])
    expect(check.ok).toBe(severity !== 'stop')
  })
})
