import { describe, expect, it } from 'vitest'
import { demoFiles, zipOf } from '../../../tests/factories/demo-bundle'
import { edit, type Files } from '../../../tests/factories/defect'
import type { BundleFinding } from './bundle-check.types'
import { checkBundle } from './check-bundle.server'

const almanac = 'almanac-1.0.1'
const bom = 'assembly/almanac-bom.csv'
const places = 'assembly/almanac-placement.csv'
const bottomCopper = 'gerber/almanac-B_Cu.gbr'
const board = { width: 23.2 }

async function findingsOf(change: (files: Files) => unknown, release = almanac): Promise<BundleFinding[]> {
  const files = await demoFiles(release)
  change(files)
  const { check } = await checkBundle(await zipOf(files))
  return check.findings.filter(({ code }) => /^(bom|placement)-/.test(code))
}

/** Every place of the list put through a change; `side` as written in the list. */
function move(files: Files, to: (x: number, y: number, side: string) => [number, number], list = places): void {
  edit(files, list, (c) =>
    c.replace(/^(\w+),(-?[\d.]+),(-?[\d.]+),(\d+),(Top|Bottom)$/gm, (_, name, x, y, turn, side) => {
      const [toX, toY] = to(Number(x), Number(y), side as string)
      return `${name},${toX.toFixed(5)},${toY.toFixed(5)},${turn},${side}`
    })
  )
}

/** Without the object attributes, as older tools write copper. */
const forgetNames = (files: Files) => {
  for (const path of files.keys()) {
    if (/_Cu\.gbr$/.test(path)) edit(files, path, (c) => c.replace(/%TO\.[CP],[^*]*\*%\n/g, ''))
  }
}

const codes = (findings: BundleFinding[]) => findings.map(({ code }) => code)

describe('the lists against the names on the copper', () => {
  it('says of a part without a place that the copper has pads for it', async () => {
    const [only, ...rest] = await findingsOf((f) => edit(f, places, (c) => c.replace(/^R1,.*\n/m, '')))
    expect(rest).toEqual([])
    expect(only).toMatchObject({
      code: 'bom-not-placed',
      file: bom,
      message: 'R1 is in the bill of materials but not placed. The copper has pads for it: fitted by hand, or forgotten.'
    })
  })

  it('tells parts that the copper does not know, and holes and marks, from those it has pads for', async () => {
    const [only, ...rest] = await findingsOf((f) => {
      edit(f, places, (c) => c.replace(/^R1,.*\n/m, ''))
      edit(f, bom, (c) => `${c.trimEnd()}\nR77,1k,R_0603,1,,\nH1,hole,,1,,\n`)
    })
    expect(rest).toEqual([])
    expect(only!.found).toBe('R1, R77, H1')
    expect(only!.message).toMatch(
      /The copper has pads for R1: .* By name H1 is no part to be placed.* The copper does not name R77: perhaps the bill of materials is of another version. It names P1, P2, P3, .* and 20 more, which neither list has\.$/
    )
  })

  it('says of a placed part that is not listed whether the copper knows it', async () => {
    const forgotten = await findingsOf((f) => edit(f, bom, (c) => c.replace(/^R5,.*\n/m, '')))
    expect(codes(forgotten)).toEqual(['placement-not-in-bom'])
    expect(forgotten[0]!.message).toBe('R5 is placed but not in the bill of materials. The copper has pads for it.')
    const foreign = await findingsOf((f) => edit(f, places, (c) => `${c.trimEnd()}\nR77,5.0,5.0,0,Top\n`))
    expect(foreign[0]!.message).toContain('The copper does not name it: perhaps the placement list is of another version.')
  })

  it('says nothing of the copper where it names too few of the placed parts', async () => {
    const renamed = await findingsOf((f) => {
      edit(f, places, (c) => c.replace(/^R1,.*\n/m, ''))
      for (const path of [bottomCopper, 'gerber/almanac-F_Cu.gbr'])
        edit(f, path, (c) => c.replace(/(TO\.[CP],)([CRU]\d)/g, '$1X$2'))
    })
    expect(renamed.map(({ message }) => message)).toEqual([
      'R1 is in the bill of materials but not placed: fitted by hand, or forgotten.'
    ])
  })

  it('takes names for the same that differ only in case', async () => {
    expect(await findingsOf((f) => edit(f, places, (c) => c.replace(/^R1,/m, 'r1,').replace(/^LED/m, 'Led')))).toEqual([])
    expect(await findingsOf((f) => edit(f, bom, (c) => c.replace('"R1, R2"', '"r1, r2"').replace(/^U1,/m, 'u1,')))).toEqual([])
  })
})

describe('places against the pads', () => {
  it('tells a bottom side mirrored about the middle of the board, where all of it lies inside', async () => {
    const mirror = (f: Files) => move(f, (x, y, side) => [side === 'Bottom' ? board.width - x : x, y])
    const named = await findingsOf(mirror)
    expect(codes(named)).toEqual(['placement-mirrored'])
    expect(named[0]).toMatchObject({ severity: 'caution', file: places })
    expect(named[0]!.message).toContain("only lie on their pads mirrored about the board's middle")
    expect(await findingsOf((f) => (forgetNames(f), mirror(f)))).toEqual([])
  })

  it('tells a bottom side with X negated once, whatever the origin', async () => {
    for (const from of [0, 11.6, -150]) {
      const found = await findingsOf((f) => move(f, (x, y, side) => [side === 'Bottom' ? from - x : x - from, y - from]))
      expect(codes(found), `from ${from}`).toEqual(['placement-mirrored'])
    }
  })

  it('tells a single mirrored part of the bottom side', async () => {
    const isOther = /^(C3|C4|R2|R5|U2|U3),.*\n/gm
    const found = await findingsOf((f) => {
      edit(f, places, (c) => c.replace(isOther, ''))
      move(f, (x, y, side) => [side === 'Bottom' ? board.width - x : x, y])
    })
    expect(codes(found)).toEqual(['placement-mirrored', 'bom-not-placed'])
  })

  it('tells inches that were read as millimetres, where all of them lie on the board', async () => {
    const toInches = (f: Files) => move(f, (x, y) => [x / 25.4, y / 25.4])
    const named = await findingsOf(toInches)
    expect(codes(named)).toEqual(['placement-units'])
    expect(named[0]).toMatchObject({ severity: 'stop', file: places, found: 'inches' })
    expect(await findingsOf((f) => (forgetNames(f), toInches(f)))).toEqual([])
  })

  it.each([
    ['mils', 1 / 0.0254, '', 'mils'],
    ['millimetres under a heading of mils', 1, ' (mil)', 'millimetres, though it says mils'],
    ['mils under a heading of inches', 1 / 0.0254, ' (inch)', 'mils, though it says inches']
  ])('tells %s', async (_name, factor, heading, found) => {
    const all = await findingsOf((f) => {
      if (factor !== 1) move(f, (x, y) => [x * factor, y * factor])
      if (heading) edit(f, places, (c) => c.replace('Mid X,Mid Y', `Mid X${heading},Mid Y${heading}`))
    })
    expect(codes(all)).toEqual(['placement-units'])
    expect(all[0]!.found).toBe(found)
  })

  it('accepts another origin, first pins as places, and single parts that stand off their pads', async () => {
    expect(await findingsOf((f) => move(f, (x, y) => [x + 87.3, y - 41.9]))).toEqual([])
    expect(await findingsOf((f) => move(f, (x, y) => [x - 11.6, y - 10]))).toEqual([])
    expect(await findingsOf((f) => move(f, (x, y) => [x - 0.4, y + 0.5]))).toEqual([])
    expect(await findingsOf((f) => edit(f, places, (c) => c.replace(/^U1,10.155,/m, 'U1,1.000,')))).toEqual([])
    expect(await findingsOf((f) => edit(f, places, (c) => c.replace(/^R5,8.100,/m, 'R5,16.000,')))).toEqual([])
  })

  it('takes places that count Y downwards for no other unit, with names on the copper or without', async () => {
    const down = (f: Files) => move(f, (x, y) => [x, -y])
    for (const release of [down, (f: Files) => (forgetNames(f), down(f))]) {
      expect(codes(await findingsOf(release))).toEqual(['placement-outside'])
    }
  })

  it('finds a part outside the board behind another origin', async () => {
    const found = await findingsOf((f) => {
      move(f, (x, y) => [x + 87.3, y - 41.9])
      edit(f, places, (c) => c.replace(/^R1,[\d.]+/m, 'R1,131.0'))
    })
    expect(codes(found)).toEqual(['placement-outside'])
    expect(found[0]!.place!.x).toBeCloseTo(131 - 87.3, 2)
  })
})

describe('a placement in two files', () => {
  const top = 'assembly/almanac-top-placement.csv'
  const bottom = 'assembly/almanac-bottom-placement.csv'
  const split = (files: Files) => {
    const [head, ...rows] = files.get(places)!.toString('utf8').trimEnd().split(/\r?\n/)
    files.delete(places)
    for (const [path, side] of [
      [top, 'Top'],
      [bottom, 'Bottom']
    ] as const) {
      const lines = [head, ...rows.filter((row) => row.endsWith(side))]
      files.set(path, Buffer.from(`${lines.map((line) => line!.slice(0, line!.lastIndexOf(','))).join('\n')}\n`))
    }
  }

  it('is read as one, with the side from the name', async () => {
    const files = await demoFiles(almanac)
    split(files)
    const { check } = await checkBundle(await zipOf(files))
    expect(check.facts.placements).toEqual({ top: 3, bottom: 7 })
    expect(check.findings.filter(({ code }) => /^(bom|placement)-/.test(code))).toEqual([])
  })

  it.each([
    ['a place that is no number', (c: string) => c.replace(/^(R1,)[\d.]+/m, '$1here'), 'placement-unreadable'],
    ['a part placed twice', (c: string) => `${c.trimEnd()}\nC1,5.0,5.0,0\n`, 'placement-designator-repeated'],
    ['a part that is not listed', (c: string) => `${c.trimEnd()}\nR77,5.0,5.0,0\n`, 'placement-not-in-bom'],
    ['a part beside the board', (c: string) => c.replace(/^(R1,)[\d.]+/m, '$140.0'), 'placement-outside']
  ])('names the file of %s', async (_name, change, code) => {
    const found = await findingsOf((f) => {
      split(f)
      edit(f, bottom, change)
    })
    expect(codes(found)).toEqual([code])
    expect(found[0]!.file).toBe(bottom)
  })

  it('names each file for its own parts', async () => {
    const found = await findingsOf((f) => {
      split(f)
      for (const path of [top, bottom]) edit(f, path, (c) => `${c.trimEnd()}\n${path === top ? 'R76' : 'R77'},5.0,5.0,0\n`)
    })
    expect(found.map((f) => `${f.file} ${f.found}`)).toEqual([`${top} R76`, `${bottom} R77`])
  })
})

describe('a bill of materials of too many parts', () => {
  it('is none, however few cells it has', async () => {
    const ranges = Array.from({ length: 300 }, (_, i) => `Z${i * 4000}-Z${i * 4000 + 3999}`).join(' ')
    const found = await findingsOf((f) => edit(f, bom, (c) => `${c.trimEnd()}\n"${ranges}",1k,R_0603,1,,\n`))
    expect(codes(found)).toEqual(['bom-unreadable'])
  })
})
