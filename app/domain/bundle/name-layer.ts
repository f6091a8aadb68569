import type { BundleLayer, LayerSide } from './bundle-check.types'
import { role, type Role } from './layer-role'
import { roleFromWords } from './layer-words'

export type { Role } from './layer-role'

const sideOf = (text: string | undefined): LayerSide | null =>
  text === 'Top' ? 'top' : text === 'Bot' ? 'bottom' : text === 'Inr' ? 'inner' : null

/**
 * The role that a `.FileFunction` attribute states; null when there is none or it is none of the specification's.
 *
 * Source: Gerber Layer Format Specification 2024.05, section 5.6.3.
 */
export function roleFromAttribute(values: readonly string[] | undefined): Role | null {
  if (!values || values.length === 0) return null
  const [name, second, third] = values
  if (name === 'Copper') {
    const index = /^L(\d{1,3})$/.exec(second ?? '')?.[1]
    return role('copper', sideOf(third), index === undefined ? null : Number(index))
  }
  if (name === 'Soldermask') return role('soldermask', sideOf(second))
  if (name === 'Paste') return role('paste', sideOf(second))
  if (name === 'Legend') return role('legend', sideOf(second))
  if (name === 'Profile') return role('outline')
  if (name === 'Plated') return role('drill-plated')
  if (name === 'NonPlated') return role('drill-nonplated')
  if (name === 'MixedPlating') return role('drill')
  if (name === 'AssemblyDrawing') return role('assembly', sideOf(second))
  if (['FabricationDrawing', 'Drillmap', 'ArrayDrawing', 'Vcutmap', 'Vcut', 'Depthrout', 'Viafill'].includes(name!))
    return role('fabrication')
  const others = [
    'Component',
    'Glue',
    'Carbonmask',
    'Goldmask',
    'Heatsinkmask',
    'Peelablemask',
    'Silvermask',
    'Tinmask',
    'Pads',
    'Keepout',
    'Other',
    'OtherDrawing'
  ]
  return others.includes(name!) ? role('other', sideOf(second) ?? sideOf(third)) : null
}

/** The copper layers that a drill file's attribute (`Plated,1,2,Blind`) says its holes run between; null when it says nothing. */
export function spanFromAttribute(values: readonly string[] | undefined): [number, number] | null {
  const [name, from, to] = values ?? []
  if (!['Plated', 'NonPlated', 'MixedPlating'].includes(name ?? '')) return null
  return /^\d{1,3}$/.test(from ?? '') && /^\d{1,3}$/.test(to ?? '') ? [Number(from), Number(to)] : null
}

/** Customary extensions of Gerber layers and drill files (common practice, no source). */
const byExtension: [RegExp, Role][] = [
  [/^(gtl|cmp|top)$/, role('copper', 'top')],
  [/^(gbl|sol|bot)$/, role('copper', 'bottom')],
  [/^(gts|stc|smt|tsm)$/, role('soldermask', 'top')],
  [/^(gbs|sts|smb|bsm)$/, role('soldermask', 'bottom')],
  [/^(gtp|crc|spt|tsp)$/, role('paste', 'top')],
  [/^(gbp|crs|spb|bsp)$/, role('paste', 'bottom')],
  [/^(gto|plc|sst|tsk)$/, role('legend', 'top')],
  [/^(gbo|pls|ssb|bsk)$/, role('legend', 'bottom')],
  [/^(gko|gm|gm\d{1,2}|gml|mil|oln|gbox|outline|dim)$/, role('outline')],
  [/^(ast|adt)$/, role('assembly', 'top')],
  [/^(asb|adb)$/, role('assembly', 'bottom')],
  [/^(fab|gd\d|gg\d)$/, role('fabrication')],
  [/^(npt)$/, role('drill-nonplated')],
  [/^(drl|xln|exc|nc|ncd|drd|tap|cnc)$/, role('drill')]
]

/** Whole names that some tools give the films of a board (common practice, no source). */
const byShortName: [RegExp, Role][] = [
  [/^sm_?t$/, role('soldermask', 'top')],
  [/^sm_?b$/, role('soldermask', 'bottom')],
  [/^(pm|sp)_?t$/, role('paste', 'top')],
  [/^(pm|sp)_?b$/, role('paste', 'bottom')],
  [/^(ss|sk)_?t$/, role('legend', 'top')],
  [/^(ss|sk)_?b$/, role('legend', 'bottom')]
]

const baseOf = (path: string): string => path.slice(path.lastIndexOf('/') + 1)

/** A file's name without its extension, and that; an extension of more than ten letters is none. */
function nameParts(path: string): { stem: string; extension: string } {
  const base = baseOf(path)
  const dot = base.lastIndexOf('.')
  if (dot < 0 || base.length - dot > 11) return { stem: base, extension: '' }
  return { stem: base.slice(0, dot), extension: base.slice(dot + 1).toLowerCase() }
}

/**
 * What the names of all layers begin with, up to a separator: the project's name, which says nothing about a layer however much it reads
 * like one ("front-panel", "drill-press"). Empty where they have nothing in common.
 */
export function projectPrefix(paths: readonly string[]): string {
  const stems = paths.map((path) => nameParts(path).stem)
  if (stems.length < 3) return ''
  let prefix = stems[0]!
  for (const stem of stems) {
    let length = 0
    while (length < prefix.length && prefix[length] === stem[length]) length++
    prefix = prefix.slice(0, length)
  }
  const isWhole = stems.every((stem) => stem.length === prefix.length || /[^A-Za-z0-9]/.test(stem[prefix.length]!))
  return isWhole ? prefix : prefix.replace(/[A-Za-z0-9]+$/, '')
}

/**
 * The role that a Gerber or drill file's name customarily stands for.
 *
 * @param prefix what the names of all layers begin with, which is left out
 */
export function roleFromName(path: string, prefix = ''): Role | null {
  const { stem, extension } = nameParts(path)
  const known = byExtension.find(([pattern]) => pattern.test(extension))?.[1]
  if (known && known.function !== 'drill') return known
  const inner = /^(?:g|gl|gp|in|l|ly)(\d{1,2})l?$/.exec(extension)?.[1]
  if (inner !== undefined) return role('copper', 'inner', Number(inner))
  const rest = (stem.startsWith(prefix) ? stem.slice(prefix.length) : stem).replace(/^[^A-Za-z0-9]+/, '')
  const short = byShortName.find(([pattern]) => pattern.test(rest.toLowerCase()))?.[1]
  const words = short ?? roleFromWords(rest)
  if (!known) return words
  return words && ['drill-plated', 'drill-nonplated'].includes(words.function) ? words : known
}

export type NamedFile = { file: string; attribute: Role | null; name: Role | null; content: Role | null }

/** Files with their role and what told it, in the order of METHODS: attribute, name, content. Null roles stay undecided. */
export function decideRoles(files: NamedFile[]): (BundleLayer & { isUndecided: boolean; conflict: Role | null })[] {
  const decided = files.map((file) => {
    const told = file.attribute ?? file.name ?? file.content
    const evidence = file.attribute ? ('attribute' as const) : file.name ? ('name' as const) : ('content' as const)
    // A name that only says "a drill file" or leaves the side open is completed by the content; it does not contradict.
    const chosen = told ? { ...told } : role('other')
    if (!file.attribute && file.name && file.content && file.name.function === file.content.function) {
      chosen.side = file.name.side ?? file.content.side
      chosen.index = file.name.index ?? file.content.index
    }
    const conflict = file.attribute && file.name && contradicts(file.attribute, file.name) ? file.name : null
    return { file: file.file, ...chosen, evidence, isUndecided: !told, conflict }
  })
  settleMechanical(decided)
  settleMaskSides(decided)
  numberCopper(decided)
  return decided
}

/** The second and further mechanical layers carry dimensions and titles where something else says that it is the outline. */
function settleMechanical(layers: BundleLayer[]): void {
  const isFurther = ({ file, evidence }: BundleLayer) => evidence === 'name' && /\.gm(?:[2-9]|1\d)$/i.test(file)
  const outlines = layers.filter((layer) => layer.function === 'outline')
  if (outlines.every(isFurther)) return
  for (const layer of outlines) if (isFurther(layer)) layer.function = 'fabrication'
}

function contradicts(attribute: Role, name: Role): boolean {
  const isDrill = (r: Role) => r.function.startsWith('drill')
  if (isDrill(attribute) && isDrill(name)) {
    return attribute.function !== 'drill' && name.function !== 'drill' && attribute.function !== name.function
  }
  if (attribute.function === 'other' || ['fabrication', 'other'].includes(name.function)) return false
  if (attribute.function !== name.function) return true
  return attribute.side !== null && name.side !== null && attribute.side !== name.side
}

/** "soldermask" beside "componentmask" means the solder side: names without a side take the one that the other file of the kind leaves. */
function settleMaskSides(layers: BundleLayer[]): void {
  for (const fn of ['soldermask', 'paste', 'legend'] as const) {
    const ofKind = layers.filter((layer) => layer.function === fn && layer.evidence === 'name')
    const open = ofKind.filter((layer) => layer.side === null)
    if (open.length !== 1) continue
    const taken = layers.filter((layer) => layer.function === fn && layer.side !== null).map((layer) => layer.side)
    if (taken.length === 1) open[0]!.side = taken[0] === 'top' ? 'bottom' : 'top'
    else if (taken.length === 0) open[0]!.side = 'top'
  }
}

/** Numbers copper layers 1 (top) to n (bottom). Attributes carry the number; names give an order only. */
function numberCopper(layers: BundleLayer[]): void {
  const copper = layers.filter((layer) => layer.function === 'copper')
  const told = copper.filter((layer) => layer.evidence !== 'attribute')
  if (told.length === 0) {
    for (const layer of copper) if (layer.side === null && layer.index !== null) layer.side = layer.index === 1 ? 'top' : 'inner'
    return
  }
  const sideless = told.filter((layer) => layer.side === null)
  if (sideless.length > 0) {
    sideless.sort((a, b) => (a.index ?? 0) - (b.index ?? 0) || (a.file < b.file ? -1 : 1))
    const hasTop = copper.some((layer) => layer.side === 'top')
    const hasBottom = copper.some((layer) => layer.side === 'bottom')
    sideless.forEach((layer, i) => {
      if (i === 0 && !hasTop) layer.side = 'top'
      else if (i === sideless.length - 1 && !hasBottom && copper.length > 1) layer.side = 'bottom'
      else layer.side = 'inner'
    })
  }
  const inner = told.filter((layer) => layer.side === 'inner')
  inner.sort((a, b) => (a.index ?? 999) - (b.index ?? 999) || (a.file < b.file ? -1 : 1))
  // Names number inner layers from 1 (first inner), from 2 (as layers), or not at all; gaps in that numbering stay gaps.
  const first = inner[0]?.index
  const shift = first === undefined || first === null ? null : first <= 1 ? 2 - first : 0
  inner.forEach((layer, i) => (layer.index = shift === null || layer.index === null ? i + 2 : layer.index + shift))
  for (const layer of told) if (layer.side === 'top') layer.index = 1
  const highest = Math.max(1, ...copper.map((layer) => (layer.side === 'bottom' ? 0 : (layer.index ?? 0))))
  for (const layer of told) if (layer.side === 'bottom') layer.index = highest + 1
}
