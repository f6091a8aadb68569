import { crc32 } from './crc32'
import { decodeZipName } from './zip-names'

export type ZipDirectory = {
  /** Bytes in front of the archive that its offsets do not count. */
  base: number
  offset: number
  size: number
  count: number
  end: number
  commentLength: number
  /** End records in the comment, which another unzipper might follow. */
  hasStrayRecords: boolean
  /** Bytes behind the archive. */
  after: number
}

export type CentralHeader = {
  name: string
  nameStart: number
  nameLength: number
  isFolder: boolean
  isEncrypted: boolean
  /** A link, a device or a pipe. */
  isLink: boolean
  /** A second name in an extra field, which some programs take instead, is another one. */
  hasOtherName: boolean
  hasDescriptor: boolean
  flags: number
  method: number
  crc: number
  packed: number
  size: number
  localOffset: number
  next: number
}

const view = (bytes: Uint8Array) => new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
const full32 = 0xffffffff

/** A 64-bit count as a number; null when it is past what a file can hold. */
function count64(v: DataView, at: number): number | null {
  const value = v.getBigUint64(at, true)
  return value > BigInt(Number.MAX_SAFE_INTEGER) ? null : Number(value)
}

/** The zip's directory by its end record; of several candidates only one may be consistent. */
export function findDirectory(bytes: Uint8Array): ZipDirectory | { problem: string } {
  const v = view(bytes)
  if (bytes.length < 22) return { problem: 'This is no zip.' }
  const looksLikeZip = v.getUint32(0, true) === 0x04034b50
  const found: ZipDirectory[] = []
  const loose: ZipDirectory[] = []
  let records = 0
  let stray = 0
  for (let at = bytes.length - 22; at >= Math.max(0, bytes.length - 22 - 0xffff); at--) {
    if (bytes[at] !== 0x50 || v.getUint32(at, true) !== 0x06054b50) continue
    records++
    const directory = readEnd(bytes, v, at)
    // Records behind the right one lie in its comment; those in front of it lie in a file.
    if (!directory) stray += found.length === 0 ? 1 : 0
    else if (directory.after === 0) found.push(directory)
    else if (directory.after > 0) loose.push(directory)
  }
  const [first, ...more] = found.length > 0 ? found : loose
  if (!first) {
    if (records > 0) return { problem: 'The end record of the zip does not fit the file.' }
    return { problem: looksLikeZip ? 'The zip is cut off: its directory is missing.' : 'This is no zip.' }
  }
  if (more.length > 0) return { problem: 'The zip has two directories, and programs would disagree on its content.' }
  return {
    ...first,
    hasStrayRecords: stray > 0 || (found.length > 0 && loose.some((other) => other.end > first.end - first.commentLength))
  }
}

function readEnd(bytes: Uint8Array, v: DataView, at: number): ZipDirectory | null {
  let count: number | null = v.getUint16(at + 10, true)
  let size: number | null = v.getUint32(at + 12, true)
  let offset: number | null = v.getUint32(at + 16, true)
  const commentLength = v.getUint16(at + 20, true)
  let directoryEnd = at
  const isZip64 = at >= 20 && v.getUint32(at - 20, true) === 0x07064b50
  if (isZip64) {
    // The locator's offset may be short by what was put in front; the record then lies right before the locator.
    const told = count64(v, at - 12)
    const at64 = [told, at - 20 - 56].find(
      (p) => p !== null && p >= 0 && p + 56 <= at - 20 && v.getUint32(p, true) === 0x06064b50
    )
    if (at64 === undefined || at64 === null) return null
    const short = { count, size, offset }
    count = count64(v, at64 + 32)
    size = count64(v, at64 + 40)
    offset = count64(v, at64 + 48)
    directoryEnd = at64
    // Programs that do not know the long record follow the short one: it must not say something else.
    if (count64(v, at64 + 24) !== count || (short.count !== 0xffff && short.count !== count)) return null
    if ((short.size !== full32 && short.size !== size) || (short.offset !== full32 && short.offset !== offset)) return null
  } else if (v.getUint16(at + 8, true) !== count || v.getUint16(at + 4, true) !== 0) return null
  if (count === null || size === null || offset === null) return null
  const base = directoryEnd - size - offset
  if (base < 0) return null
  const start = base + offset
  if (count > 0 && (start + 46 > bytes.length || v.getUint32(start, true) !== 0x02014b50)) return null
  const end = at + 22 + commentLength
  if (end > bytes.length) return null
  return { base, offset: start, size, count, end, commentLength, hasStrayRecords: false, after: bytes.length - end }
}

/** One entry of the directory; null when it is damaged. Offsets in the answer count from the start of the file. */
export function readCentralHeader(bytes: Uint8Array, at: number, end: number, base: number): CentralHeader | null {
  const v = view(bytes)
  if (at + 46 > end || v.getUint32(at, true) !== 0x02014b50) return null
  const flags = v.getUint16(at + 8, true)
  const nameLength = v.getUint16(at + 28, true)
  const extraLength = v.getUint16(at + 30, true)
  const next = at + 46 + nameLength + extraLength + v.getUint16(at + 32, true)
  if (next > end) return null
  const nameBytes = bytes.subarray(at + 46, at + 46 + nameLength)
  const told = nameFromExtra(bytes, at + 46 + nameLength, extraLength, nameBytes)
  const isAscii = nameBytes.every((byte) => byte < 128)
  // Tools that write names in a code page of their own put the true one beside it.
  const name = told !== null && !isAscii && (flags & 0x800) === 0 ? told : decodeZipName(nameBytes)
  let packed: number | null = v.getUint32(at + 20, true)
  let size: number | null = v.getUint32(at + 24, true)
  let localOffset: number | null = v.getUint32(at + 42, true)
  const extra64 = findExtra(v, at + 46 + nameLength, extraLength, 1)
  if (extra64) {
    let p = extra64.start
    const take = () => {
      if (p + 8 > extra64.end) return null
      p += 8
      return count64(v, p - 8)
    }
    if (size === full32) size = take()
    if (packed === full32) packed = take()
    if (localOffset === full32) localOffset = take()
  }
  if (packed === null || size === null || localOffset === null) return null
  const attributes = v.getUint32(at + 38, true)
  const method = v.getUint16(at + 10, true)
  return {
    name,
    nameStart: at + 46,
    nameLength,
    isFolder: /[\\/]$/.test(name) || ((attributes & 0x10) !== 0 && size === 0),
    isEncrypted: (flags & 0x2041) !== 0 || method === 99 || findExtra(v, at + 46 + nameLength, extraLength, 0x9901) !== null,
    isLink: [0xa000, 0x1000, 0x2000, 0x6000, 0xc000].includes((attributes >>> 28) << 12),
    hasOtherName: told !== null && told !== name,
    hasDescriptor: (flags & 8) !== 0,
    flags,
    method,
    crc: v.getUint32(at + 16, true),
    packed,
    size,
    localOffset: localOffset + base,
    next
  }
}

/** Where an entry's packed bytes lie, or what is wrong with its local header. */
export function readLocalHeader(bytes: Uint8Array, central: CentralHeader): { dataStart: number; dataEnd: number } | string {
  const v = view(bytes)
  const at = central.localOffset
  if (at + 30 > bytes.length || v.getUint32(at, true) !== 0x04034b50) return 'a file is not where the directory says'
  const nameLength = v.getUint16(at + 26, true)
  const extraLength = v.getUint16(at + 28, true)
  const dataStart = at + 30 + nameLength + extraLength
  if (dataStart + central.packed > bytes.length) return 'a file runs past the end'
  if (nameLength !== central.nameLength) return 'the name beside a file is not the one in the directory'
  for (let i = 0; i < nameLength; i++) {
    if (bytes[at + 30 + i] !== bytes[central.nameStart + i]) return 'the name beside a file is not the one in the directory'
  }
  if (v.getUint16(at + 8, true) !== central.method) return 'two compression methods are given for one file'
  const nameBytes = bytes.subarray(at + 30, at + 30 + nameLength)
  const isAscii = nameBytes.every((byte) => byte < 128)
  const told = nameFromExtra(bytes, at + 30 + nameLength, extraLength, nameBytes)
  if (central.hasOtherName || (told !== null && told !== central.name)) return 'two names are given for one file'
  const weighed = isAscii ? 0x2049 : 0x2849
  if (((v.getUint16(at + 6, true) ^ central.flags) & weighed) !== 0) return 'two sets of flags are given for one file'
  let packed: number | null = v.getUint32(at + 18, true)
  let size: number | null = v.getUint32(at + 22, true)
  const crc = v.getUint32(at + 14, true)
  const extra64 = findExtra(v, at + 30 + nameLength, extraLength, 1)
  if (extra64 && extra64.end - extra64.start >= 16 && (size === full32 || packed === full32)) {
    size = count64(v, extra64.start)
    packed = count64(v, extra64.start + 8)
  }
  const isLater = central.hasDescriptor && (packed === 0 || packed === full32) && (size === 0 || size === full32)
  if (!isLater && (packed !== central.packed || size !== central.size)) return 'two sizes are given for one file'
  if (!(central.hasDescriptor && crc === 0) && crc !== central.crc) return 'two checksums are given for one file'
  if (!isLater) return { dataStart, dataEnd: dataStart + central.packed }
  const dataEnd = descriptorEnd(v, dataStart + central.packed, central)
  return dataEnd === null ? 'what stands behind a file is not what the directory says of it' : { dataStart, dataEnd }
}

/** Where the record behind a streamed file ends, with or without its signature, in short or long form; null when it says something else. */
function descriptorEnd(v: DataView, at: number, { crc, packed, size }: CentralHeader): number | null {
  const isAt = (p: number, isLong: boolean) => {
    if (p + (isLong ? 20 : 12) > v.byteLength || v.getUint32(p, true) !== crc) return false
    if (isLong) return count64(v, p + 4) === packed && count64(v, p + 12) === size
    return v.getUint32(p + 4, true) === packed && v.getUint32(p + 8, true) === size
  }
  const starts = at + 4 <= v.byteLength && v.getUint32(at, true) === 0x08074b50 ? [at + 4, at] : [at]
  for (const start of starts) {
    if (isAt(start, true)) return start + 20
    if (isAt(start, false)) return start + 12
  }
  return null
}

/** The name in the Unicode path field (0x7075), which counts only while its checksum fits the name in the header; else null. */
function nameFromExtra(bytes: Uint8Array, from: number, length: number, name: Uint8Array): string | null {
  const v = view(bytes)
  const field = findExtra(v, from, length, 0x7075)
  if (!field || field.end - field.start < 5 || bytes[field.start] !== 1) return null
  if (v.getUint32(field.start + 1, true) !== crc32(name)) return null
  return decodeZipName(bytes.subarray(field.start + 5, field.end))
}

function findExtra(v: DataView, from: number, length: number, id: number): { start: number; end: number } | null {
  let at = from
  while (at + 4 <= from + length) {
    const fieldLength = v.getUint16(at + 2, true)
    const end = Math.min(at + 4 + fieldLength, from + length)
    if (v.getUint16(at, true) === id) return { start: at + 4, end }
    at += 4 + fieldLength
  }
  return null
}
