import { describe, it } from 'vitest'
import { edit, expectDefect, type Defect } from '../../../tests/factories/defect'

const almanac = 'almanac-1.0.1'
const bom = 'assembly/almanac-bom.csv'
const places = 'assembly/almanac-placement.csv'

/** One defect each, made from a clean demo bundle: it must give its code and no other stop. */
const cases: Defect[] = [
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
  [
    'a bill of materials of half a million lines',
    almanac,
    (f) => {
      const rows = Array.from({ length: 500_000 }, (_, i) => `R${i},${(i * 7919) % 1_000_003}k,1`)
      f.set(bom, Buffer.from(`Reference,Value,Quantity\n${rows.join('\n')}\n`))
    },
    'bom-unreadable',
    'stop',
    bom
  ],
  [
    'a spreadsheet as bill of materials',
    almanac,
    (f) => f.delete(bom) && f.set('bom.xlsx', Buffer.from('PK\x03\x04rest')),
    'bom-unreadable',
    'stop',
    'bom.xlsx'
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
  ['no licence', almanac, (f) => f.delete('LICENSE.txt'), 'licence-missing', 'caution']
]

describe('a bundle with one defect in its lists or papers', () => {
  it.each(cases)('%s', (_name, ...defect) => expectDefect(...defect))
})
