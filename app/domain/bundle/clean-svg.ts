import type { Box } from './geometry'

/** Elements that a board picture is made of. */
const elements = new Set(['svg', 'g', 'defs', 'use', 'mask', 'clipPath', 'rect', 'circle', 'path', 'polygon', 'polyline', 'line'])

const number = /^-?\d+(\.\d+)?(e-?\d+)?$/
const numbers = /^[-\d.e\s,]*$/
const reference = /^url\(#[\w-]+\)$/

/** Attributes that may stay, with the form of their values. Anything else is dropped. */
const attributes: Record<string, RegExp> = {
  id: /^[\w-]+$/,
  x: number,
  y: number,
  cx: number,
  cy: number,
  r: number,
  rx: number,
  ry: number,
  x1: number,
  y1: number,
  x2: number,
  y2: number,
  width: number,
  height: number,
  points: numbers,
  d: /^[-\d.e\s,MLAZHVCSQTmlazhvcsqt]*$/,
  transform: /^(\s*(translate|scale|rotate|matrix)\([-\d.e\s,]*\)\s*)+$/,
  fill: /^(none|currentColor|#[0-9a-f]{3,6})$/i,
  stroke: /^(none|currentColor|#[0-9a-f]{3,6})$/i,
  'stroke-width': number,
  'stroke-linecap': /^(round|butt|square)$/,
  'stroke-linejoin': /^(round|bevel|miter)$/,
  'fill-rule': /^(evenodd|nonzero)$/,
  'clip-rule': /^(evenodd|nonzero)$/,
  mask: reference,
  'clip-path': reference,
  'xlink:href': /^#[\w-]+$/
}

/** Elements in each other: every change to clear polarity wraps what is drawn so far, and each wrap costs whoever looks a whole picture. */
const deepest = 128

export type SvgPaint = { color: string; opacity?: string }

/**
 * Rewrites a drawn SVG in µm from the few elements and attributes that a board picture needs. Ids get the prefix, so that several
 * pictures can stand in one page; classes (`…_sm`) become the paint of that name, so that no style sheet is left; viewBox and size are
 * written anew in mm.
 *
 * @param box what the picture shows, in mm
 * @returns null when there is anything in it that a picture does not hold: text, scripts, comments, unknown elements, too
 * many in each other
 */
export function cleanSvg(svg: string, prefix: string, paints: Record<string, SvgPaint>, box: Box): string | null {
  const tag = /<(\/?)([A-Za-z]+)((?:\s+[A-Za-z:-]+="[^"<>&]*")*)\s*(\/?)>/y
  const body = svg.replace(/<style>[^<]*<\/style>/, '').trim()
  const ids = new Map<string, string>()
  const idOf = (id: string) => {
    if (!ids.has(id)) ids.set(id, `${prefix}${ids.size}`)
    return ids.get(id)!
  }
  const out: string[] = []
  const open: string[] = []
  let hasEnded = false
  while (tag.lastIndex < body.length) {
    const match = tag.exec(body)
    if (!match || hasEnded) return null
    const [, isClose, name, text, isEmpty] = match as unknown as [string, string, string, string, string]
    if (!elements.has(name) || (name === 'svg') !== (open.length === (isClose ? 1 : 0))) return null
    if (isClose) {
      if (open.pop() !== name) return null
      out.push(name === 'svg' ? '</g></svg>' : `</${name}>`)
      hasEnded = name === 'svg'
      continue
    }
    const kept = attributesOf(text, idOf, paints)
    if (name === 'svg') {
      const head = svgHead(kept, box)
      if (head === null || isEmpty) return null
      out.push(head)
    } else out.push(`<${name}${kept}${isEmpty ? '/' : ''}>`)
    if (!isEmpty && open.push(name) > deepest) return null
  }
  return hasEnded ? out.join('') : null
}

function attributesOf(text: string, idOf: (id: string) => string, paints: Record<string, SvgPaint>): string {
  let kept = ''
  for (const [, name, value] of text.matchAll(/([A-Za-z:-]+)="([^"]*)"/g) as Iterable<[string, string, string]>) {
    if (name === 'class') {
      const paint = paints[/_([a-z0-9]+)$/.exec(value)?.[1] ?? '']
      if (paint) kept += ` color="${paint.color}"${paint.opacity ? ` opacity="${paint.opacity}"` : ''}`
      continue
    }
    if (!Object.hasOwn(attributes, name) || !attributes[name]!.test(value)) continue
    if (name === 'id') kept += ` id="${idOf(value)}"`
    else if (name === 'xlink:href') kept += ` href="#${idOf(value.slice(1))}"`
    else if (name === 'mask' || name === 'clip-path') kept += ` ${name}="url(#${idOf(value.slice(5, -1))})"`
    else kept += ` ${name}="${value}"`
  }
  return kept
}

/** The outer element anew: viewBox and size in mm, the content scaled into it. */
function svgHead(kept: string, box: Box): string | null {
  const values = [box.minX, box.minY, box.maxX - box.minX, box.maxY - box.minY].map((value) => Number(value.toFixed(4)))
  const [x, y, width, height] = values as [number, number, number, number]
  if (!values.every(Number.isFinite) || width <= 0 || height <= 0) return null
  const paint = kept.match(/ (stroke|fill|clip)-[a-z]+="[^"]*"/g)?.join('') ?? ''
  const head = `<svg xmlns="http://www.w3.org/2000/svg" viewBox="${x} ${y} ${width} ${height}" width="${width}mm" height="${height}mm"${paint}>`
  return `${head}<g transform="scale(0.001)">`
}
