import { crc32, deflateRawSync } from 'node:zlib'

/** One entry of a zip written by hand; what is left out is as an ordinary tool would write it. */
export type RawEntry = {
  name: string
  data?: Uint8Array | string
  /** What the headers say, where they lie. */
  method?: number
  flags?: number
  crc?: number
  size?: number
  packed?: number
  localName?: string
  mode?: number
  stored?: boolean
  /** Points the directory at another entry's record instead of writing one. */
  sharesRecordOf?: number
  /** Extra fields in the directory, and beside the file. */
  extra?: Uint8Array
  localExtra?: Uint8Array
  /** Sizes and checksum only behind the file, as when streamed; null leaves the record out. */
  descriptor?: { size?: number } | null
}

type Around = {
  before?: Uint8Array
  comment?: Uint8Array
  count?: number
  /** Adds the long end record, which may say another count. */
  zip64?: { count?: number }
}

const u16 = (...values: number[]) => Buffer.concat(values.map((v) => Buffer.from([v & 255, (v >> 8) & 255])))
const u32 = (...values: number[]) =>
  Buffer.concat(
    values.map((v) => {
      const b = Buffer.alloc(4)
      b.writeUInt32LE(v >>> 0)
      return b
    })
  )

/**
 * A zip built byte by byte, so that its headers can lie, overlap and contradict each other (the .ZIP application note, section 4.3).
 * `before` is put in front, `comment` behind the end record.
 */
export function rawZip(entries: RawEntry[], extra: Around = {}): Buffer {
  const parts: Buffer[] = []
  const central: Buffer[] = []
  const offsets: number[] = []
  let at = 0
  for (const entry of entries) {
    const data = Buffer.from(entry.data ?? '')
    const isStored = entry.stored ?? data.length === 0
    const packed = isStored ? data : deflateRawSync(data)
    const method = entry.method ?? (isStored ? 0 : 8)
    const flags = entry.flags ?? 0x800
    const crc = entry.crc ?? crc32(data)
    const sizes = u32(crc, entry.packed ?? packed.length, entry.size ?? data.length)
    const name = Buffer.from(entry.name)
    const localName = Buffer.from(entry.localName ?? entry.name)
    const fixed = Buffer.concat([u16(flags, method, 0, 0x5000), sizes])
    offsets.push(entry.sharesRecordOf === undefined ? at : offsets[entry.sharesRecordOf]!)
    if (entry.sharesRecordOf === undefined) {
      const isStreamed = entry.descriptor !== undefined
      const told = isStreamed ? Buffer.concat([u16(flags, method, 0, 0x5000), u32(0, 0, 0)]) : fixed
      const localExtra = Buffer.from(entry.localExtra ?? [])
      const lengths = u16(localName.length, localExtra.length)
      const behind = entry.descriptor
        ? u32(0x08074b50, crc, packed.length, entry.descriptor.size ?? data.length)
        : Buffer.alloc(0)
      const local = Buffer.concat([u32(0x04034b50), u16(20), told, lengths, localName, localExtra, packed, behind])
      parts.push(local)
      at += local.length
    }
    const made = entry.mode === undefined ? 20 : 0x0314
    const more = Buffer.from(entry.extra ?? [])
    const tail = [u16(name.length, more.length, 0, 0, 0), u32(((entry.mode ?? 0) << 16) >>> 0, offsets.at(-1)!), name, more]
    central.push(Buffer.concat([u32(0x02014b50), u16(made, 20), fixed, ...tail]))
  }
  const directory = Buffer.concat(central)
  const comment = Buffer.from(extra.comment ?? [])
  const count = extra.count ?? entries.length
  // The short end record points to the long one by being full.
  const isLong = extra.zip64 !== undefined && extra.zip64.count === undefined
  const short = isLong
    ? Buffer.alloc(16, 0xff).fill(0, 0, 4)
    : Buffer.concat([u16(0, 0, count, count), u32(directory.length, at)])
  const end = Buffer.concat([u32(0x06054b50), short, u16(comment.length), comment])
  return Buffer.concat([
    Buffer.from(extra.before ?? []),
    ...parts,
    directory,
    longEnd(extra.zip64, count, directory.length, at),
    end
  ])
}

/** The end record in 64 bits and its locator; nothing where none is asked for. */
function longEnd(zip64: Around['zip64'], count: number, size: number, offset: number): Buffer {
  if (!zip64) return Buffer.alloc(0)
  const told = zip64.count ?? count
  const u64 = (...values: number[]) => u32(...values.flatMap((value) => [value, 0]))
  const record = Buffer.concat([u32(0x06064b50), u64(44), u16(45, 45), u32(0, 0), u64(told, told, size, offset)])
  return Buffer.concat([record, u32(0x07064b50, 0), u64(offset + size), u32(1)])
}
