import type { BundleLayer, LayerFunction, LayerSide } from './bundle-check.types'

/** What something says about a file's role; `index` numbers copper layers, or orders them where only the order is known. */
export type Role = { function: LayerFunction; side: LayerSide | null; index: number | null }

const role = (fn: LayerFunction, side: LayerSide | null = null, index: number | null = null): Role => ({
  function: fn,
  side,
  index
})

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

/** Customary extensions of Gerber layers (common practice, no source). */
const byExtension: [RegExp, Role][] = [
  [/^(gtl|cmp)$/, role('copper', 'top')],
  [/^(gbl|sol)$/, role('copper', 'bottom')],
  [/^(gts|stc)$/, role('soldermask', 'top')],
  [/^(gbs|sts)$/, role('soldermask', 'bottom')],
  [/^(gtp|crc)$/, role('paste', 'top')],
  [/^(gbp|crs)$/, role('paste', 'bottom')],
  [/^(gto|plc)$/, role('legend', 'top')],
  [/^(gbo|pls)$/, role('legend', 'bottom')],
  [/^(gko|gm|gm1|gml|mil|oln|gbox|outline)$/, role('outline')],
  [/^(drl|xln|exc|nc|ncd|drd|tap|cnc)$/, role('drill')]
]

function sideFromWords(text: string): LayerSide | null {
  if (/(^|[^a-z])(f|top|t|front|component|comp|upper|primary)(?=$|[^a-z])/.test(text) || /top|front|component/.test(text))
    return 'top'
  if (/(^|[^a-z])(b|bot|bottom|back|lower|secondary)(?=$|[^a-z])/.test(text) || /bot(tom)?|back/.test(text)) return 'bottom'
  return null
}

/** The role that words in a name or title customarily stand for; null when they say nothing. `text` is lower case. */
export function roleFromWords(text: string): Role | null {
  const side = sideFromWords(text)
  if (/edge.?cuts?|outline|profile|board.?(edge|shape|cut)|contour|boundary/.test(text)) return role('outline')
  if (/(^|[^a-z])fab(rication)?($|[^a-z])|drill.?(map|drawing)/.test(text)) return role('fabrication')
  if (/(^|[^a-z]|top|bottom)(assy|assembly)($|[^a-z])/.test(text)) return role('assembly', side)
  if (/mask|resist/.test(text)) return role('soldermask', side)
  if (/paste|stencil|cream/.test(text)) return role('paste', side)
  if (/silk|legend|overlay/.test(text)) return role('legend', side)
  if (/(^|[^a-z])(npth|non.?plated|unplated)/.test(text)) return role('drill-nonplated')
  if (/(^|[^a-z])(pth|plated)($|[^a-z])/.test(text)) return role('drill-plated')
  if (/drill|(^|[^a-z])holes?($|[^a-z])/.test(text)) return role('drill')
  const inner = /(?:^|[^a-z])(?:in|inner|internal|intern|inr|mid|plane|pwr|gnd)[^a-z0-9]*(\d{1,2})(?:$|[^0-9])/.exec(text)
  if (inner) return role('copper', 'inner', Number(inner[1]))
  if (/(^|[^a-z])intern(al)?($|[^a-z])/.test(text)) return role('copper', 'inner')
  const layer = /(?:^|[^a-z])(?:layer|l|copper|cu)[^a-z0-9]*(\d{1,2})(?:$|[^0-9])/.exec(text)
  const group = /(?:^|[^a-z])group[^a-z0-9]*(\d{1,2})(?:$|[^0-9])/.exec(text)
  if (group) return role('copper', null, Number(group[1]))
  if (layer && !side) return role('copper', null, Number(layer[1]))
  if (/copper|(^|[^a-z])cu($|[^a-z])/.test(text)) return role('copper', side)
  if (side && /(^|[^a-z])(top|bottom|bot|front|back)$/.test(text)) return role('copper', side)
  return null
}

/** The role that a Gerber or drill file's name customarily stands for. */
export function roleFromName(path: string): Role | null {
  const base = path.slice(path.lastIndexOf('/') + 1).toLowerCase()
  const dot = base.lastIndexOf('.')
  const stem = dot < 0 ? base : base.slice(0, dot)
  const extension = dot < 0 ? '' : base.slice(dot + 1)
  const known = byExtension.find(([pattern]) => pattern.test(extension))?.[1]
  if (known && known.function !== 'drill') return known
  const inner = /^(?:g|gl|gp|in|l|ly)(\d{1,2})l?$/.exec(extension)?.[1]
  if (inner !== undefined) return role('copper', 'inner', Number(inner))
  const words = roleFromWords(stem)
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
  settleMaskSides(decided)
  numberCopper(decided)
  return decided
}

function contradicts(attribute: Role, name: Role): boolean {
  const isDrill = (r: Role) => r.function.startsWith('drill')
  if (isDrill(attribute) && isDrill(name)) {
    return attribute.function !== 'drill' && name.function !== 'drill' && attribute.function !== name.function
  }
  if (attribute.function === 'other' || name.function === 'fabrication') return false
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
