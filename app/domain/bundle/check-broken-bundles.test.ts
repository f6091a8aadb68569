import { describe, it } from 'vitest'
import { edit, expectDefect, type Defect } from '../../../tests/factories/defect'

const almanac = 'almanac-1.0.1'
const buttress = 'buttress-1.1.0'
const top = 'gerber/almanac-F_Cu.gbr'
const bottom = 'gerber/almanac-B_Cu.gbr'
const edge = 'gerber/almanac-Edge_Cuts.gbr'
const pth = 'drill/almanac-PTH.drl'

/** All coordinates of a Gerber file moved, in its own 4.6 mm digits. */
const shifted = (content: string, dx: number) => content.replace(/^X(-?\d+)(?=Y)/gm, (_, x: string) => `X${Number(x) + dx}`)
const mirrored = (content: string, width: number) =>
  content.replace(/^X(-?\d+)(?=Y)/gm, (_, x: string) => `X${width - Number(x)}`)

/** One defect each, made from a clean demo bundle: it must give its code and no other stop. */
const cases: Defect[] = [
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
  [
    'an archive inside',
    almanac,
    (f) => f.set('more.zip', Buffer.from([0x50, 0x4b, 3, 4, 0, 0, 0, 0])),
    'zip-nested',
    'caution',
    'more.zip'
  ]
]

describe('a bundle with one defect in its layers or drill files', () => {
  it.each(cases)('%s', (_name, ...defect) => expectDefect(...defect))
})
