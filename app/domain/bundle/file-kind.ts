import { wideOrder } from './read-table'
import type { Role } from './name-layer'
import { roleFromName } from './name-layer'

/** `eia` is a drill file in the old EIA punched-tape code instead of ASCII. */
export type FileKind = 'empty' | 'gerber' | 'drill' | 'eia' | 'archive' | 'text' | 'binary'

const latin1 = new TextDecoder('latin1')

const isArchive = (b: Uint8Array) =>
  (b[0] === 0x50 && b[1] === 0x4b && b[2]! <= 7) || // zip
  (b[0] === 0x1f && b[1] === 0x8b) || // gzip
  (b[0] === 0x37 && b[1] === 0x7a && b[2] === 0xbc) || // 7z
  (b[0] === 0x52 && b[1] === 0x61 && b[2] === 0x72 && b[3] === 0x21) || // rar
  (b[0] === 0xfd && b[1] === 0x37 && b[2] === 0x7a) || // xz
  latin1.decode(b.subarray(257, 262)) === 'ustar'

/** EIA code (RS-244): every row has an odd number of holes, and the lines end in hole 8. */
function isEia(head: Uint8Array): boolean {
  let lines = 0
  for (const byte of head) {
    if (byte === 0x80) lines++
    let ones = 0
    for (let rest = byte; rest > 0; rest >>= 1) ones += rest & 1
    if (byte !== 0 && ones % 2 === 0) return false
  }
  return lines > 3
}

/** What a file is by its first bytes, whatever it is called. */
export function kindOf(bytes: Uint8Array): FileKind {
  if (bytes.length === 0) return 'empty'
  if (isArchive(bytes)) return 'archive'
  const head = latin1.decode(bytes.subarray(0, 16 * 1024))
  if (head.trim() === '') return 'empty'
  if (/%(FS[LTD]?[AI]?|MO(MM|IN)|ADD\d|TF\.)/.test(head)) return 'gerber'
  if (/^[\s%]*M48\s*$/m.test(head.slice(0, 2000)) || /^\s*T\d+[^\n]*C[\d.]+/m.test(head)) return 'drill'
  if (/^\s*M30\s*$/.test(head)) return 'drill'
  // Without a header: a tool's number alone on a line, and places.
  if (!head.includes('*') && /^T\d{1,3}\s*$/m.test(head) && /^X[+-]?[\d.]+Y[+-]?[\d.]+\s*$/m.test(head)) return 'drill'
  if (/^\s*(G0?4\b|G\d\d\*|D\d\d\*|%[A-Z]{2})/.test(head) && head.includes('*')) return 'gerber'
  if (isEia(bytes.subarray(0, 1024))) return 'eia'
  return head.includes('\0') && !/^(\xff\xfe|\xfe\xff)/.test(head) && !wideOrder(bytes) ? 'binary' : 'text'
}

const layerExtension =
  /\.(gbr|gbx|ger|grb|gb|gdo|pho|art|g[tb][lospa]|g[kmop]\w?|gm\d+|g\d+|gp\d+|cmp|sol|plc|pls|stc|sts|crc|crs|top|bot|sm[tb]|ss[tb]|sp[tb]|drl|xln|exc|ncd|drd|tap|npt|cnc)$/i

/** The role of a file that should be a layer by its name but is not readable as one (empty or something else). */
export const roleOfSupposedLayer = (path: string, prefix = ''): Role | null =>
  layerExtension.test(path) ? roleFromName(path, prefix) : null

const sourceExtension =
  /\.(kicad_(pcb|sch|pro|prl|mod|sym|dru|wks)|sch|schdoc|pcbdoc|prjpcb|pcb|brd|lht|rp|fzz|fz|dip|dch|lbr|schlib|pcblib|intlib|diy|ewprj|ms14|dsn|epro|hkp|net|sym|fp|step|stp|scad|f3d|dxf)$/i
const sourceFolder = /(^|\/)(source|sources|src|design|cad|eda|schematics?|layout|project)\//i
const listExtension = /\.(csv|tsv|txt|bom|xy|pos|pnp|mnt|mnb|xls|xlsx|ods|dat|asc)$/i

/** The role of a file that is no Gerber or drill file, by its name; null when the name says nothing. */
export function roleOfOtherFile(path: string): Role | null {
  const base = path.slice(path.lastIndexOf('/') + 1)
  const lower = base.toLowerCase()
  const is = (fn: Role['function']): Role => ({ function: fn, side: null, index: null })
  if (/\.gbrjob$/.test(lower)) return is('job')
  if (/^(licen[cs]e|copying|unlicense|cern[-_]?ohl)/.test(lower) || /licen[cs]e\.(txt|md|rst)$/.test(lower)) return is('licence')
  if (listExtension.test(lower)) {
    const words = lower.replace(/[^a-z0-9]+/g, ' ')
    if (/\b(bom|boms|parts? ?list|bill of materials?|components? ?list|partlist)\b/.test(words) || /bom\.\w+$/.test(lower))
      return is('bom')
    if (
      /\b(pos|positions?|placements?|pick ?(and|n)? ?place|pnp|pickplace|centroids?|cpl|xy|mnt|mnb|xyrs|coordinates)\b/.test(
        words
      )
    ) {
      return is('placement')
    }
  }
  if (/\.(ipc|d356|d356a|net356|cad)$/.test(lower) || /(^|[^a-z])netlist([^a-z]|$)|ipc.?d.?356/.test(lower)) return is('netlist')
  if (sourceExtension.test(lower)) return is('source')
  if (/^(readme|changelog|changes|notes|contributing|authors|version|order)/.test(lower)) return is('document')
  if (sourceFolder.test(path)) return is('source')
  if (/\.(md|pdf|txt|rst|html?|docx?|odt|rtf|png|jpe?g|svg|webp|gif)$/.test(lower)) return is('document')
  return null
}
