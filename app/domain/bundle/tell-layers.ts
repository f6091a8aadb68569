import type { FileReading } from './bundle-reading.types'
import { kindOf, roleOfOtherFile, roleOfSupposedLayer, type FileKind } from './file-kind'
import { readFileAttributes, textOf } from './gerber-attributes'
import { roleFromWords } from './layer-words'
import type { CheckLimits } from './limits'
import {
  decideRoles,
  projectPrefix,
  roleFromAttribute,
  roleFromName,
  spanFromAttribute,
  type NamedFile,
  type Role
} from './name-layer'
import { listOrNull } from './list-or-null'
import { readBom } from './read-bom'
import { readPlacement } from './read-placement'
import type { ZipEntry } from './scan-zip'
import { shownName } from './zip-names'

/** The files of a bundle, to be read one by one. */
export type BundleSource = { entries: ZipEntry[]; read(entry: ZipEntry): Promise<Uint8Array> }

type Opened = {
  path: string
  kind: FileKind
  size: number
  fileFunction: string[] | undefined
  /** What the content says by itself: the title in a Gerber file, the headings of a list. */
  content: Role | null
}

const only = (fn: Role['function']): Role => ({ function: fn, side: null, index: null })

/** Tells what each file is for: by its attributes, its name, its content. */
export async function tellLayers(source: BundleSource, limits: CheckLimits): Promise<FileReading[]> {
  const opened: Opened[] = []
  for (const entry of source.entries) opened.push(open(entry.path, await source.read(entry), limits))
  const prefix = projectPrefix(opened.filter(({ kind }) => kind === 'gerber' || kind === 'drill').map(({ path }) => path))
  const named = opened.map((file) => nameFile(file, opened, prefix))
  const roles = decideRoles(named)
  return opened.map(({ path, kind, size, fileFunction }, i) => {
    const { isUndecided, conflict, ...layer } = roles[i]!
    const span = spanFromAttribute(fileFunction)
    const unread = {
      image: null,
      sums: null,
      holes: null,
      drillFormat: null,
      excess: null,
      rims: null,
      names: null,
      isBroken: false
    }
    return { layer, path, kind, size, conflict, isUndecided, span, ...unread }
  })
}

function open(path: string, bytes: Uint8Array, limits: CheckLimits): Opened {
  const kind = kindOf(bytes)
  const base = { path, kind, size: bytes.length, fileFunction: undefined, content: null }
  if (kind === 'gerber')
    return { ...base, fileFunction: readFileAttributes(bytes).get('.FileFunction'), content: titleRole(bytes) }
  if (kind === 'drill') return { ...base, fileFunction: readFileAttributes(bytes).get('.FileFunction'), content: only('drill') }
  const isNamed = (roleOfSupposedLayer(path) ?? roleOfOtherFile(path)) !== null
  return kind === 'text' && !isNamed ? { ...base, content: listRole(bytes, limits) } : base
}

function nameFile({ path, kind, fileFunction, content }: Opened, all: Opened[], prefix: string): NamedFile {
  const file = shownName(path)
  if (kind !== 'gerber' && kind !== 'drill') {
    const hasDrill = all.some((other) => other.kind === 'drill')
    const supposed = roleOfSupposedLayer(path, prefix)
    // The same holes once more in another code than ASCII, as one older tool writes them beside.
    const isCopy = kind === 'eia' && hasDrill && supposed?.function.startsWith('drill')
    return { file, attribute: null, name: isCopy ? only('other') : (supposed ?? roleOfOtherFile(path)), content }
  }
  const attribute = roleFromAttribute(fileFunction)
  const name = roleFromName(path, prefix)
  const saysDrill = name?.function.startsWith('drill') ?? false
  // The content says that it drills, whatever the name; the name may still say whether the holes are plated.
  if (kind === 'drill') return { file, attribute, name: saysDrill ? name : null, content }
  // A Gerber file called "drill" beside a real drill file is its drawing.
  const isDrawing = saysDrill && !attribute && all.some((other) => other.kind === 'drill')
  return { file, attribute, name: isDrawing ? only('fabrication') : name, content }
}

const titles = [
  /G0?4\s*Title:[^*]*?,\s*([^*,]+)\*/i,
  /%LN([^*%]+)\*/,
  /G0?4\s*Layer\s*(?:name)?\s*[:=]\s*(?:[^*]*[\\/])?([^*]+?)(?:\.\w{1,4})?\s*\*/i
]

/** What older tools write into comments and layer names at the start of a Gerber file. */
function titleRole(bytes: Uint8Array): Role | null {
  const head = textOf(bytes.subarray(0, 4096))
  for (const pattern of titles) {
    const title = pattern.exec(head)?.[1]
    const told = title ? roleFromWords(title.trim()) : null
    if (told) return told
  }
  return null
}

/** Whether a text file is a list by its headings. */
function listRole(bytes: Uint8Array, limits: CheckLimits): Role | null {
  if (listOrNull(bytes, () => readPlacement(bytes, limits))) return only('placement')
  return listOrNull(bytes, () => readBom(bytes, limits))?.lines.length ? only('bom') : null
}
