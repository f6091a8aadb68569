import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { crc32 } from 'node:zlib'
import JSZip from 'jszip'
import { describe, expect, it } from 'vitest'
import { rawZip, type RawEntry } from '../../../tests/factories/raw-zip'
import { defaultLimits } from './limits'
import { unpackZip } from './unpack-zip.server'

const plain: RawEntry = { name: 'board/top.gbr', data: 'G04 top*\nM02*\n' }
const codes = async (bytes: Uint8Array, limits = defaultLimits) => (await unpackZip(bytes, limits)).findings.map((f) => f.code)

describe('zips that ordinary tools write', () => {
  it('are read: deflated, stored, streamed, with comment, with folders', async () => {
    const zip = new JSZip()
    zip.file('board/a.txt', 'aaa')
    zip.file('board/ü.txt', 'üüü')
    for (const options of [
      { compression: 'DEFLATE' },
      { compression: 'STORE' },
      { streamFiles: true },
      { comment: 'made by hand' }
    ] as const) {
      const bytes = await zip.generateAsync({ type: 'uint8array', ...options })
      const unpacked = await unpackZip(bytes, defaultLimits)
      expect(unpacked.findings).toEqual([])
      expect(unpacked.entries.map((entry) => entry.path)).toEqual(['board/a.txt', 'board/ü.txt'])
      expect(new TextDecoder().decode(await unpacked.read(unpacked.entries[1]!))).toBe('üüü')
    }
  })

  it('keep names in code page 437 and backslashes readable', async () => {
    const name = Buffer.from([0x62, 0x6f, 0x5c, 0x81, 0x2e, 0x74, 0x78, 0x74]) // bo\ü.txt
    const bytes = rawZip([{ name: 'xxxxxxxx', data: 'text', flags: 0 }])
    const patched = Buffer.from(bytes)
    for (let at = patched.indexOf('xxxxxxxx'); at >= 0; at = patched.indexOf('xxxxxxxx')) name.copy(patched, at)
    const unpacked = await unpackZip(patched, defaultLimits)
    expect(unpacked.entries.map((entry) => entry.path)).toEqual(['bo/ü.txt'])
    expect(unpacked.findings.map((f) => f.code)).toEqual(['zip-backslash'])
    expect(new TextDecoder().decode(await unpacked.read(unpacked.entries[0]!))).toBe('text')
  })

  it('may have bytes in front or behind, which are noted', async () => {
    expect(await codes(rawZip([plain], { before: Buffer.alloc(500, 35) }))).toEqual(['zip-extra-data'])
    expect(await codes(Buffer.concat([rawZip([plain]), Buffer.alloc(500, 35)]))).toEqual(['zip-extra-data'])
  })

  it('may be streamed, long, or name their code page beside the name', async () => {
    expect(await codes(rawZip([{ ...plain, flags: 0x808, descriptor: {} }]))).toEqual([])
    expect(await codes(rawZip([plain], { zip64: {} }))).toEqual([])
    expect(await codes(rawZip([{ ...plain, extra: unicodePath(plain.name, plain.name) }]))).toEqual([])
    // The bytes are those of another code page than 437; the field says what is meant.
    const bytes = Buffer.from([0x62, 0xe4, 0x2e, 0x74]) // bä.t in Windows-1252
    const head = Buffer.alloc(5, 1)
    head.writeUInt32LE(crc32(bytes), 1)
    const extra = field(0x7075, Buffer.concat([head, Buffer.from('bä.t')]))
    const zip = rawZip([{ name: 'b?.t', data: 'text', flags: 0, extra, localExtra: extra }])
    for (let at = zip.indexOf('b?.t'); at >= 0; at = zip.indexOf('b?.t')) bytes.copy(zip, at)
    const unpacked = await unpackZip(zip, defaultLimits)
    expect(unpacked.entries.map((entry) => entry.path)).toEqual(['bä.t'])
    expect(new TextDecoder().decode(await unpacked.read(unpacked.entries[0]!))).toBe('text')
  })

  it('may hold a stored zip near their end, which is no second directory', async () => {
    expect(await codes(rawZip([{ name: 'inner.zip', data: rawZip([plain]), stored: true }]))).toEqual([])
  })
})

/** Each hostile or broken zip gives one code and nothing is read of it. */
const hostile: [string, () => Uint8Array | Promise<Uint8Array>, string][] = [
  ['nothing', () => new Uint8Array(0), 'zip-unreadable'],
  ['text', () => Buffer.from('%FSLAX46Y46*%'.repeat(100)), 'zip-unreadable'],
  ['no entries', () => rawZip([]), 'zip-unreadable'],
  ['a folder only', () => rawZip([{ name: 'board/' }]), 'zip-unreadable'],
  ['the end cut off', () => rawZip([{ ...plain, data: 'x'.repeat(5000), stored: true }]).subarray(0, 3000), 'zip-unreadable'],
  ['a damaged directory', () => rawZip([plain], { count: 5 }), 'zip-unreadable'],
  ['a wrong checksum', () => rawZip([{ ...plain, crc: 12345 }]), 'zip-unreadable'],
  ['another name beside the file', () => rawZip([{ ...plain, localName: 'board/bot.gbr' }]), 'zip-unreadable'],
  ['a size that is too small', () => rawZip([{ ...plain, data: 'x'.repeat(10_000), size: 100 }]), 'zip-too-large'],
  ['a size that is too large', () => rawZip([{ ...plain, size: 100 }]), 'zip-unreadable'],
  ['packed data past the end', () => rawZip([{ ...plain, packed: 1_000_000 }]), 'zip-unreadable'],
  ['damaged packed data', () => rawZip([{ ...plain, data: Buffer.alloc(50, 0xff), method: 8, stored: true }]), 'zip-unreadable'],
  ['encryption', () => rawZip([{ ...plain, flags: 0x801 }]), 'zip-encrypted'],
  ['AES encryption', () => rawZip([{ ...plain, flags: 0x801, method: 99 }]), 'zip-encrypted'],
  ['bzip2', () => rawZip([{ ...plain, method: 12 }]), 'zip-method'],
  ['a parent path', () => rawZip([plain, { ...plain, name: '../../etc/passwd' }]), 'zip-path-unsafe'],
  ['a parent path with backslashes', () => rawZip([plain, { ...plain, name: '..\\..\\x.gbr' }]), 'zip-path-unsafe'],
  ['an absolute path', () => rawZip([{ ...plain, name: '/etc/passwd' }]), 'zip-path-unsafe'],
  ['a drive', () => rawZip([{ ...plain, name: 'C:\\x.gbr' }]), 'zip-path-unsafe'],
  ['a NUL in a name', () => rawZip([{ ...plain, name: 'a\0.gbr' }]), 'zip-path-unsafe'],
  ['a symbolic link', () => rawZip([plain, { name: 'link.gbr', data: '/etc/passwd', mode: 0o120777 }]), 'zip-link'],
  ['the same name twice', () => rawZip([plain, plain]), 'zip-name-clash'],
  ['names equal but for case', () => rawZip([plain, { ...plain, name: 'BOARD/Top.gbr' }]), 'zip-name-clash'],
  [
    'names equal but for Unicode form',
    () =>
      rawZip([
        { ...plain, name: 'é.gbr' },
        { ...plain, name: 'e\u0301.gbr' }
      ]),
    'zip-name-clash'
  ],
  ['names equal but for a dot part', () => rawZip([plain, { ...plain, name: './board//top.gbr' }]), 'zip-name-clash'],
  ['a bomb of zeros', () => rawZip([{ name: 'top.gbr', data: Buffer.alloc(20 * 1024 * 1024) }]), 'zip-too-large'],
  ['a declared size past the limit', () => rawZip([{ ...plain, size: 0xfffffff0 }]), 'zip-too-large'],
  ['many entries', () => rawZip(Array.from({ length: 2001 }, (_, i) => ({ name: `f${i}`, data: 'x' }))), 'zip-too-large'],
  [
    'files that share one record',
    () =>
      rawZip([
        { name: 'a.gbr', data: 'same' },
        { name: 'a.gbx', data: 'same', sharesRecordOf: 0 }
      ]),
    'zip-too-large'
  ],
  ['a device', () => rawZip([plain, { name: 'tty.gbr', data: 'x', mode: 0o020666 }]), 'zip-link'],
  ['a parent path behind a blank', () => rawZip([plain, { ...plain, name: 'a/.. /../x.gbr' }]), 'zip-path-unsafe'],
  ['names equal but for a dot at the end', () => rawZip([plain, { ...plain, name: 'board/top.gbr.' }]), 'zip-name-clash'],
  ['a file where another needs a folder', () => rawZip([plain, { ...plain, name: 'board' }]), 'zip-name-clash'],
  ['a file and a folder of one name', () => rawZip([{ ...plain, name: 'a' }, { name: 'a/' }, plain]), 'zip-name-clash'],
  ['a folder that holds bytes', () => rawZip([plain, { name: 'more/', data: 'hidden' }]), 'zip-unreadable'],
  ['entries that the count leaves out', () => rawZip([plain, { ...plain, name: 'more.gbr' }], { count: 1 }), 'zip-unreadable'],
  ['AES told by its extra field', () => rawZip([{ ...plain, extra: field(0x9901, Buffer.alloc(7)) }]), 'zip-encrypted'],
  [
    'another name in the Unicode path field',
    () => rawZip([{ ...plain, extra: unicodePath(plain.name, 'board/bottom.gbr') }]),
    'zip-unreadable'
  ],
  [
    'another name in the Unicode path field beside the file only',
    () => rawZip([{ ...plain, localExtra: unicodePath(plain.name, '../x.gbr') }]),
    'zip-unreadable'
  ],
  ['a record behind the file that lies', () => rawZip([{ ...plain, flags: 0x808, descriptor: { size: 5 } }]), 'zip-unreadable'],
  ['no record behind a streamed file', () => rawZip([{ ...plain, flags: 0x808, descriptor: null }]), 'zip-unreadable'],
  ['a long end record that contradicts the short one', () => rawZip([plain], { zip64: { count: 7 } }), 'zip-unreadable'],
  ['two consistent directories', () => twoDirectories(), 'zip-unreadable']
]

/** An extra field as the application note lays it out: id, length, content. */
function field(id: number, content: Buffer): Buffer {
  const head = Buffer.alloc(4)
  head.writeUInt16LE(id, 0)
  head.writeUInt16LE(content.length, 2)
  return Buffer.concat([head, content])
}

function unicodePath(name: string, told: string): Buffer {
  const head = Buffer.alloc(5, 1)
  head.writeUInt32LE(crc32(Buffer.from(name)), 1)
  return field(0x7075, Buffer.concat([head, Buffer.from(told)]))
}

function twoDirectories(): Buffer {
  const inner = rawZip([{ name: 'other.gbr', data: 'decoy' }])
  // The decoy's offsets count from where it stands, which its end record allows for.
  return rawZip([plain], { comment: inner })
}

describe('hostile and broken zips', () => {
  it.each(hostile)('%s', async (_name, make, code) => {
    const unpacked = await unpackZip(await make(), defaultLimits)
    expect(unpacked.findings.map((f) => f.code)).toEqual([code])
    expect(unpacked.entries).toEqual([])
  })

  it('that overlap are refused: 200 entries that quote one kernel', async () => {
    const path = fileURLToPath(new URL('../../../tests/fixtures/bundles/OB63-zip-bomb-overlap.zip', import.meta.url))
    const wide = { ...defaultLimits, totalBytes: 1e12, fileBytes: 1e12, ratio: 1e9 }
    const { findings } = await unpackZip(readFileSync(path), wide)
    expect(findings).toMatchObject([{ code: 'zip-too-large', message: expect.stringContaining('share the same packed bytes') }])
  })

  it('that unpack to too much in all are refused', async () => {
    const entries = Array.from({ length: 20 }, (_, i) => ({ name: `${i}.gbr`, data: 'ab'.repeat(500 + i) }))
    expect(await codes(rawZip(entries), { ...defaultLimits, totalBytes: 10_000 })).toEqual(['zip-too-large'])
  })
})

describe('names', () => {
  it.each([
    ['a right-to-left override', 'rebreg\u202erbg.exe'],
    ['a line break', 'line\nbreak.gbr'],
    ['markup', '<img src=x onerror=alert(1)>.gbr'],
    ['a device', 'board/con.gbr'],
    ['a blank at its end', 'board/x.gbr '],
    ['a colon', 'board/x.gbr:hidden'],
    ['eleven folders', `${'d/'.repeat(11)}x.gbr`],
    ['241 characters', `${'n'.repeat(237)}.gbr`]
  ])('with %s are a caution', async (_name, name) => {
    const unpacked = await unpackZip(rawZip([plain, { ...plain, name }]), defaultLimits)
    expect(unpacked.findings).toMatchObject([{ code: 'zip-name-odd', severity: 'caution' }])
    expect(unpacked.findings[0]!.file).not.toMatch(/[\u0000-\u001f\u202e]/)
    expect(unpacked.entries).toHaveLength(2)
  })
})
