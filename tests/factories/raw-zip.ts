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
export function rawZip(entries: RawEntry[], extra: { before?: Uint8Array; comment?: Uint8Array; count?: number } = {}): Buffer {
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
      const local = Buffer.concat([u32(0x04034b50), u16(20), fixed, u16(localName.length, 0), localName, packed])
      parts.push(local)
      at += local.length
    }
    const made = entry.mode === undefined ? 20 : 0x0314
    const tail = [u16(name.length, 0, 0, 0, 0), u32(((entry.mode ?? 0) << 16) >>> 0, offsets.at(-1)!), name]
    central.push(Buffer.concat([u32(0x02014b50), u16(made, 20), fixed, ...tail]))
  }
  const directory = Buffer.concat(central)
  const comment = Buffer.from(extra.comment ?? [])
  const count = extra.count ?? entries.length
  const end = Buffer.concat([u32(0x06054b50), u16(0, 0, count, count), u32(directory.length, at), u16(comment.length), comment])
  return Buffer.concat([Buffer.from(extra.before ?? []), ...parts, directory, end])
}
