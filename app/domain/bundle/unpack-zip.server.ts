import { crc32, inflateRawSync } from 'node:zlib'
import JSZip from 'jszip'
import type { BundleFinding } from './bundle-check.types'
import { finding } from './finding'
import type { CheckLimits } from './limits'
import { scanZip, type ZipEntry } from './scan-zip'
import { decodeZipName, shownName } from './zip-names'

export type UnpackedZip = {
  entries: ZipEntry[]
  findings: BundleFinding[]
  /** One file's bytes; each call unpacks anew, so that they need not all be held at once. */
  read(entry: ZipEntry): Promise<Uint8Array>
}

/**
 * Opens a zip that nobody vouches for: scans its directory, unpacks every file once within its declared size to compare size and
 * checksum, and only then asks jszip whether it sees the same files. With a stop among the findings `entries` is empty.
 */
export async function unpackZip(bytes: Uint8Array, limits: CheckLimits): Promise<UnpackedZip> {
  const scan = scanZip(bytes, limits)
  const closed = (findings: BundleFinding[]): UnpackedZip => ({
    entries: [],
    findings,
    read: () => Promise.reject(new Error('The zip was not opened'))
  })
  if (scan.entries.length === 0) return closed(scan.findings)
  for (const entry of scan.entries) {
    const problem = verify(bytes, entry)
    if (problem) return closed([problem])
  }
  let zip: JSZip
  try {
    zip = await JSZip.loadAsync(archiveOnly(bytes, scan), { decodeFileName: (name) => decodeZipName(name as Uint8Array) })
  } catch {
    return closed([finding('zip-unreadable', 'The zip could not be read.')])
  }
  // jszip drops `.` and empty parts; a backslash stays part of the name for it.
  const byPath = new Map(Object.values(zip.files).map((file) => [file.name, file]))
  const nameIn = (entry: ZipEntry) =>
    entry.name
      .split('/')
      .filter((part) => part !== '' && part !== '.')
      .join('/')
  const missing = scan.entries.find((entry) => !byPath.has(nameIn(entry)))
  if (missing)
    return closed([finding('zip-unreadable', 'Programs disagree on what the zip holds.', { file: shownName(missing.path) })])
  // The bytes are those that were verified; jszip's word on what the zip holds was asked for, its inflating costs several times zlib's.
  return { entries: scan.entries, findings: scan.findings, read: async (entry) => unpacked(bytes, entry) }
}

/** An entry's bytes, unpacked within its declared size. @throws zlib's errors, ERR_BUFFER_TOO_LARGE past that size */
function unpacked(bytes: Uint8Array, entry: ZipEntry): Uint8Array {
  const packed = bytes.subarray(entry.dataStart, entry.dataStart + entry.packed)
  return entry.method === 8 ? inflateRawSync(packed, { maxOutputLength: Math.max(1, entry.size) }) : packed
}

/** Null when size and checksum are as declared. */
function verify(bytes: Uint8Array, entry: ZipEntry): BundleFinding | null {
  const file = shownName(entry.path)
  let data: Uint8Array
  try {
    data = unpacked(bytes, entry)
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ERR_BUFFER_TOO_LARGE') {
      const message = 'A file in the zip unpacks to more than the zip declares.'
      return finding('zip-too-large', message, { file, expected: `${entry.size} bytes`, found: 'more' })
    }
    return finding('zip-unreadable', 'A file in the zip is damaged and cannot be unpacked.', { file })
  }
  if (data.length !== entry.size) {
    const found = `${data.length} bytes`
    return finding('zip-unreadable', 'A file in the zip has another size than declared.', {
      file,
      expected: `${entry.size} bytes`,
      found
    })
  }
  if (crc32(data) !== entry.crc)
    return finding('zip-unreadable', 'A file in the zip is damaged: its checksum does not match.', { file })
  return null
}

/** The archive without what lies in front of it and without its comment, so that jszip finds the directory that was scanned. */
function archiveOnly(bytes: Uint8Array, scan: { start: number; end: number; commentLength: number }): Uint8Array {
  if (scan.start === 0 && scan.commentLength === 0) return bytes
  const copy = bytes.slice(scan.start, scan.end - scan.commentLength)
  copy[copy.length - 2] = 0
  copy[copy.length - 1] = 0
  return copy
}
