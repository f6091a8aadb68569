/** Another way to write the same layer: unit and digits, where 0, 0 lies (mm), numbers of apertures, and in which order the objects come. */
export type Spelling = {
  unit?: 'mm' | 'inch'
  decimals?: number
  dx?: number
  dy?: number
  firstAperture?: number
  /** 0 to 1, as often as asked; objects are sorted by it. Left out, they stay in their order. */
  random?: () => number
}

type Segment = { mode: string; x: number; y: number; i: number; j: number; hasArc: boolean }
type Drawn = {
  aperture: number | null
  polarity: string
  kind: 'flash' | 'stroke' | 'region'
  x: number
  y: number
  to: Segment[]
}

/** The same holes (mm with decimal points, as the demo writes them) in another unit and place. */
export function respellDrill(text: string, { unit = 'mm', decimals = 3, dx = 0, dy = 0 }: Spelling): string {
  const factor = unit === 'mm' ? 1 : 1 / 25.4
  const number = (mm: string, by: number) => ((Number(mm) + by) * factor).toFixed(decimals)
  return text
    .replace(/^METRIC/m, unit === 'mm' ? 'METRIC' : 'INCH')
    .replace(/^(T\d+C)([\d.]+)/gm, (_, tool: string, size: string) => tool + number(size, 0))
    .replace(/X(-?[\d.]+)/g, (_, x: string) => `X${number(x, dx)}`)
    .replace(/Y(-?[\d.]+)/g, (_, y: string) => `Y${number(y, dy)}`)
    .replace(/^;.*CreationDate.*$/m, '; written another day')
}

/** A layer of the demo (4.6 digits in mm, absolute) written anew, object by object, without its attributes and with another comment. */
export function respellGerber(text: string, spelling: Spelling): string {
  const { unit = 'mm', decimals = 6, dx = 0, dy = 0, firstAperture = 10, random } = spelling
  const factor = unit === 'mm' ? 1 : 1 / 25.4
  const place = (mm: number) => String(Math.round(mm * factor * 10 ** decimals))
  const definitions: string[] = []
  const objects: Drawn[] = []
  let [polarity, mode, aperture, x, y] = ['D', 'G01', null as number | null, 0, 0]
  let region: Drawn | null = null
  for (const [, extended, word] of text.matchAll(/%([^%]*)%|([^*%\s][^*%]*)\*/g)) {
    if (extended !== undefined) {
      const head = extended.slice(0, 2)
      if (head === 'LP') polarity = extended[2]!
      else if (head === 'AM') definitions.push(`%${extended}%`)
      else if (head === 'AD') {
        const [, code, name, sizes] = /^ADD(\d+)([^,*]+),?([^*]*)/.exec(extended)!
        const scaled = sizes!.split('X').map((size) => (Number(size) * factor).toFixed(decimals))
        definitions.push(`%ADD${Number(code) - 10 + firstAperture}${name},${scaled.join('X')}*%`)
      }
      continue
    }
    if (word!.startsWith('G04')) continue
    if (word === 'G36') region = { aperture: null, polarity, kind: 'region', x, y, to: [] }
    else if (word === 'G37') {
      if (region!.to.length > 0) objects.push(region!)
      region = null
    } else if (/^G0[123]$/.test(word!)) mode = word!
    else if (/^D\d\d+$/.test(word!)) aperture = Number(word!.slice(1))
    const operation = /D0([123])$/.exec(word!)?.[1]
    if (operation === undefined) continue
    const read = (letter: string) => new RegExp(`${letter}(-?\\d+)`).exec(word!)?.[1]
    const mm = (letter: string, before: number) => (read(letter) === undefined ? before : Number(read(letter)) / 1e6)
    const to = { mode, x: mm('X', x), y: mm('Y', y), i: mm('I', 0), j: mm('J', 0), hasArc: mode !== 'G01' }
    if (operation === '2' && region && region.to.length > 0) {
      objects.push(region)
      region = { aperture: null, polarity, kind: 'region', x: to.x, y: to.y, to: [] }
    } else if (operation === '2' && region) Object.assign(region, { x: to.x, y: to.y })
    else if (operation === '1' && region) region.to.push(to)
    else if (operation === '1') objects.push({ aperture, polarity, kind: 'stroke', x, y, to: [to] })
    else if (operation === '3') objects.push({ aperture, polarity, kind: 'flash', x: to.x, y: to.y, to: [] })
    ;[x, y] = [to.x, to.y]
  }
  const ordered = random
    ? objects
        .map((o) => ({ o, at: random() }))
        .sort((a, b) => a.at - b.at)
        .map(({ o }) => o)
    : objects
  const at = (px: number, py: number) => `X${place(px + dx)}Y${place(py + dy)}`
  const digits = unit === 'mm' ? 4 : 2
  const lines = ['G04 Written another day by another program*', `%FSLAX${digits}${decimals}Y${digits}${decimals}*%`]
  lines.push(unit === 'mm' ? '%MOMM*%' : '%MOIN*%', ...definitions, 'G75*')
  for (const object of ordered) {
    lines.push(`%LP${object.polarity}*%`)
    if (object.aperture !== null) lines.push(`D${object.aperture - 10 + firstAperture}*`)
    if (object.kind === 'flash') lines.push(`${at(object.x, object.y)}D03*`)
    else {
      if (object.kind === 'region') lines.push('G36*')
      lines.push(`${at(object.x, object.y)}D02*`)
      for (const { mode: how, x: toX, y: toY, i, j, hasArc } of object.to)
        lines.push(`${how}*`, `${at(toX, toY)}${hasArc ? `I${place(i)}J${place(j)}` : ''}D01*`)
      if (object.kind === 'region') lines.push('G37*')
    }
  }
  return `${lines.join('\n')}\nM02*\n`
}
