import { describe, expect, it } from 'vitest'
import { kindOf } from './file-kind'
import { readDesignators } from './designators'
import { defaultLimits } from './limits'
import { readBom } from './read-bom'
import { readLength, readPlacement, readSide } from './read-placement'

// Ways of writing lists that the trade's tools and spreadsheets have; common practice, no source.
const utf8 = (text: string) => Buffer.from(text)
const swapped = (text: string) => Buffer.from(text, 'utf16le').swap16()

describe('bills of materials of other tools', () => {
  const english = 'Reference,Value,Footprint,Quantity\n"R1, R2",4k7,0603,2\nC1,10u,0805,1\n'
  it.each<[string, Buffer]>([
    ['German headings', utf8('Position;Menge;Wert;Gehäuse;Referenz\n1;2;4k7;0603;R1, R2\n2;1;10u;0805;C1\n')],
    ['French headings', utf8('Repère;Quantité;Valeur;Boîtier\nR1 R2;2;4k7;0603\nC1;1;10u;0805\n')],
    [
      'parts last, after the value',
      utf8('Qty;Value;Device;Package;Parts\n2;4k7;RESISTOR;0603;R1, R2\n1;10u;CAPACITOR;0805;C1\n')
    ],
    ['UTF-16, low byte first, without a mark', Buffer.from(english, 'utf16le')],
    ['UTF-16, high byte first, without a mark', swapped(english)],
    ['UTF-16, high byte first, with a mark', swapped(`\ufeff${english}`)],
    [
      'names on several lines of a quoted cell',
      utf8('Reference,Value,Footprint,Quantity\n"R1,\nR2",4k7,0603,2\nC1,10u,0805,1\n')
    ],
    ['a total and fasteners', utf8(`${english},M3 screw,,4\n-,label,,1\nTotal,,,8\nGrand total:,,,8\n`)],
    [
      'columns parted by blanks',
      utf8('# made by hand\n#  Reference   Value   Footprint   Quantity\nR1,R2   4k7   0603   2\nC1   10u   0805   1\n# end\n')
    ],
    ['old line ends', utf8(english.replaceAll('\n', '\r'))]
  ])('%s', (_name, bytes) => {
    expect(kindOf(bytes)).toBe('text')
    const bom = readBom(bytes, defaultLimits)!
    expect(bom.lines).toMatchObject([
      { designators: ['R1', 'R2'], quantity: 2, value: '4k7', footprint: '0603', isFitted: true },
      { designators: ['C1'], quantity: 1, value: '10u', footprint: '0805', isFitted: true }
    ])
    expect(bom.lines).toHaveLength(2)
  })

  it.each([
    ['a mark behind the value', 'Reference,Value\nR1,4k7 DNP\n'],
    ['a mark in front of it', 'Reference,Value\nR1,DNP/4k7\n'],
    ['a column of what is fitted', 'Reference,Value,Fitted\nR1,4k7,Not Fitted\n'],
    ['a German column', 'Reference;Wert;Bestückt\nR1;4k7;Nein\n'],
    ['a French column', 'Reference;Valeur;Non monté\nR1;4k7;oui\n'],
    ['a description', 'Reference,Value,Description\nR1,4k7,Do not populate: for tests\n']
  ])('tell what is not fitted by %s', (_name, text) => {
    expect(readBom(utf8(text), defaultLimits)!.lines).toMatchObject([{ designators: ['R1'], isFitted: false }])
  })

  it.each([
    ['R1…R4', 4],
    ['R1..R4', 4],
    ['R1 ... R4', 4],
    ['R1, R2 R3', 3],
    ['C1;C2', 2],
    ['C1 & C2', 2],
    ['R1...R9, C4', 10]
  ])('count %s', (cell, count) => expect(readDesignators(cell)).toHaveLength(count))
})

describe('placement lists of other tools', () => {
  const aligned = `### Positions - made on a day
## Unit = mm, Angle = deg.
## Side : All
# Ref     Val        Package          PosX       PosY       Rot  Side
R1        4k7        R_0603         2.5400    -5.0800   90.0000  top
R2        10u        C_0805         1.0000     2.0000    0.0000  bottom
## End
`
  it.each<[string, Buffer]>([
    ['columns parted by blanks', utf8(aligned)],
    ['columns parted by blanks, in UTF-16 without a mark', Buffer.from(aligned, 'utf16le')],
    [
      'columns parted by two blanks, headings of two words',
      utf8(
        'Designator   Mid X      Mid Y      Layer        Rotation\n\nR1   2.54mm   -5.08mm   TopLayer   90.00\nR2   1mm   2mm   BottomLayer   0.00\n'
      )
    ],
    [
      'places of middle, reference and pin',
      utf8('Designator,Ref X,Ref Y,Pad X,Pad Y,Mid X,Mid Y,TB,Rotation\nR1,9,9,8,8,2.54,-5.08,T,90\nR2,9,9,8,8,1,2,B,0\n')
    ],
    ['German headings', utf8('Bauteil;X-Koordinate;Y-Koordinate;Drehung;Seite\nR1;2,54;-5,08;90;oben\nR2;1;2;0;unten\n')],
    ['French headings', utf8('Repère;X;Y;Rotation;Face\nR1;2,54;-5,08;90;dessus\nR2;1;2;0;dessous\n')],
    ['a mirror column', utf8('REFDES|SYM_X|SYM_Y|SYM_ROTATE|SYM_MIRROR\nR1|2.54|-5.08|90|NO\nR2|1|2|0|YES\n')],
    ['micrometres', utf8('Ref,X,Y,Rot,Side\nR1,2540um,-5080um,90,top\nR2,1000um,2000µm,0,bottom\n')],
    [
      'both sides below each other, each with its heading',
      utf8('Ref,X (mm),Y (mm),Rot,Side\nR1,2.54,-5.08,90,top\nRef,X (mm),Y (mm),Rot,Side\nR2,1,2,0,bottom\n')
    ],
    ['a typographic minus', utf8('Ref,X,Y,Rot,Side\nR1,2.54,\u22125.08,90,top\nR2,1,2,0,bottom\n')]
  ])('%s', (_name, bytes) => {
    expect(kindOf(bytes)).toBe('text')
    const { parts, unreadable } = readPlacement(bytes, defaultLimits)!
    expect(unreadable).toEqual([])
    expect(parts).toMatchObject([
      { designator: 'R1', x: 2.54, y: -5.08, rotation: 90, side: 'top' },
      { designator: 'R2', x: 1, y: 2, rotation: 0, side: 'bottom' }
    ])
  })

  it('take the side from the head of the list where no column says it', () => {
    const list = readPlacement(utf8('## Unit = mils\n## Side : bottom\n# Ref PosX PosY Rot\nR1 100 200 0\n'), defaultLimits)!
    expect(list).toMatchObject({ unit: 'mil', parts: [{ designator: 'R1', side: 'bottom' }] })
    expect(list.parts[0]!.x).toBeCloseTo(2.54, 9)
  })

  it('leave a side open that a bare number names', () => {
    expect(['1', '2', '', 'L1', 'oben', 'Lötseite', 'Top Copper'].map(readSide)).toEqual([
      null,
      null,
      null,
      null,
      'top',
      'bottom',
      'top'
    ])
    expect(readLength('2″')).toEqual({ value: 2, unit: 'inch' })
  })
})
