import { describe, expect, it } from 'vitest'
import { expandRange, readDesignators } from './designators'
import { defaultLimits } from './limits'
import { readBom } from './read-bom'
import { readLength, readPlacement, readSide } from './read-placement'

const utf8 = (text: string) => Buffer.from(text)
const bomOf = (bytes: Uint8Array) => readBom(bytes, defaultLimits)
const placementOf = (bytes: Uint8Array) => readPlacement(bytes, defaultLimits)

describe('designators', () => {
  it.each([
    ['R1-R4', ['R1', 'R2', 'R3', 'R4']],
    ['C9–C11', ['C9', 'C10', 'C11']],
    ['R4-R1', ['R4-R1']],
    ['R1-C4', ['R1-C4']],
    ['TA-101', ['TA-101']],
    ['R1-4', ['R1-4']],
    ['R1-R999999', ['R1-R999999']]
  ])('%s', (text, expected) => {
    expect(expandRange(text)).toEqual(expected)
  })

  it('stand in a cell with commas, semicolons, blanks and ranges', () => {
    expect(readDesignators(' C1, C2;C5  C7 - C9 ')).toEqual(['C1', 'C2', 'C5', 'C7', 'C8', 'C9'])
  })
})

describe('a bill of materials', () => {
  const rows = 'C1, C2|10µF|C_1206|2|\nR1|4k7|R_0603|1|yes\n'
  it.each([
    ['commas', utf8('Reference(s),Value,Footprint,Qty,DNP\n"C1, C2",10µF,C_1206,2,\nR1,4k7,R_0603,1,yes\n')],
    [
      'semicolons and a preamble',
      utf8(
        'Bill of materials\nGenerated;2024-01-01\n\nDesignator;Comment;Package;Quantity;Do not populate\n"C1, C2";10µF;C_1206;2;\nR1;4k7;R_0603;1;x\n'
      )
    ],
    [
      'tabs and UTF-16',
      Buffer.from(
        `\ufeffRefDes\tValue\tPattern\tCount\tNot fitted\nC1, C2\t10µF\tC_1206\t2\t\nR1\t4k7\tR_0603\t1\tTRUE\n`,
        'utf16le'
      )
    ],
    ['bars and a mark', utf8(`\ufeffReferences|Value|Footprint|Quantity|Not fitted\n${rows}`)],
    [
      'Windows-1252 and mixed line ends',
      Buffer.from('Ref,Value,Footprint,Qty,DNF\r\n"C1, C2",10\xb5F,C_1206,2,\r\nR1,4k7,R_0603,1,1\n', 'latin1')
    ],
    [
      'a heading behind a comment mark',
      utf8('# made by a tool\n# Quantity, Value, Footprint, RefDes, DNP\n2,10µF,C_1206,C1 C2,\n1,4k7,R_0603,R1,dnp\n')
    ]
  ])('with %s', (_name, bytes) => {
    const bom = bomOf(bytes)!
    expect(bom.lines).toMatchObject([
      { designators: ['C1', 'C2'], quantity: 2, value: '10µF', footprint: 'C_1206', isFitted: true },
      { designators: ['R1'], quantity: 1, value: '4k7', isFitted: false }
    ])
    expect(bom.distinctLines).toBe(2)
  })

  it('with one row a part counts equal parts as one line', () => {
    const bom = bomOf(utf8('Reference,Value,Footprint,Qty\nC1,100nF,C_0603,1\nC2,100nF,C_0603,1\nC3,1uF,C_0603,1\n'))!
    expect([bom.lines.length, bom.distinctLines]).toEqual([3, 2])
  })

  it('tells formulas from values', () => {
    const cells = ['=1+1', '@SUM(1)', "-cmd|'/c calc'!A0", '+5V', '-12V', '-40..85 C', 'a=b']
    const bom = bomOf(utf8(`Ref,Value,Qty\n${cells.map((cell, i) => `R${i},"${cell}",1`).join('\n')}\n`))!
    expect(bom.unsafeCells).toEqual(cells.slice(0, 3))
  })

  it('without telling headings is none', () => {
    expect(bomOf(utf8('A,B,C\n1,2,3\n'))).toBeNull()
    expect(bomOf(utf8(''))).toBeNull()
  })
})

describe('a placement list', () => {
  it.each([
    ['plain mm', utf8('Designator,Mid X,Mid Y,Rotation,Layer\nR1,2.54,-5.08,90,Top\nR2,1,2,0,Bottom\n')],
    [
      'a unit behind each number',
      utf8('"Designator","Mid X","Mid Y","Layer","Rotation"\nR1,2.54mm,-5.08mm,TopLayer,90\nR2,1mm,2mm,BottomLayer,0\n')
    ],
    [
      'mils in the heading',
      utf8('Ref,PosX (mil),PosY (mil),Rot,Side\nR1,100,-200,90,top\nR2,39.37007874,78.74015748,0,bottom\n')
    ],
    ['mils behind each number', utf8('Ref,X,Y,Rot,Side\nR1,100mil,-200mil,90,T\nR2,39.37007874mil,78.74015748mil,0,B\n')],
    [
      'mils in the preamble',
      utf8(
        '# X,Y in mil.  rotation in degrees.\n# RefDes, Value, X, Y, rotation, top/bottom\nR1,"a",100,-200,90,top\nR2,"b",39.37007874,78.74015748,0,bottom\n'
      )
    ],
    ['decimal commas', utf8('Bauteil;Ref;X;Y;Rotation;Side\na;R1;2,54;-5,08;90;F.Cu\nb;R2;1,0;2,0;0;B.Cu\n')]
  ])('with %s', (_name, bytes) => {
    const { parts, unreadable } = placementOf(bytes)!
    expect(unreadable).toEqual([])
    expect(parts.map((p) => [p.designator, p.side, p.rotation])).toEqual([
      ['R1', 'top', 90],
      ['R2', 'bottom', 0]
    ])
    for (const [i, x, y] of [
      [0, 2.54, -5.08],
      [1, 1, 2]
    ] as const) {
      expect(parts[i]!.x).toBeCloseTo(x, 6)
      expect(parts[i]!.y).toBeCloseTo(y, 6)
    }
  })

  it('names the rows that cannot be read', () => {
    expect(placementOf(utf8('Ref,X,Y,Side\nR1,here,2,top\nR2,1,2,sideways\nR3,1,2,top\n'))).toMatchObject({
      unreadable: ['R1', 'R2'],
      parts: [{ designator: 'R3' }]
    })
  })

  it('reads lengths and sides as they are written, and nothing else', () => {
    expect(readLength('1e-1in')).toEqual({ value: 0.1, unit: 'inch' })
    expect(readLength(' 12 thou ')).toEqual({ value: 12, unit: 'mil' })
    for (const text of ['', 'x', '1.2.3', '1 2', '5 km']) expect(readLength(text)).toBeNull()
    expect(['T', 'F.Cu', 'TopLayer', 'b', 'Bottom Side', 'inner'].map(readSide)).toEqual([
      'top',
      'top',
      'top',
      'bottom',
      'bottom',
      null
    ])
  })
})
