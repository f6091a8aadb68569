import type { BundleFinding } from './bundle-check.types'
import { finding } from './finding'
import type { CheckLimits } from './limits'
import { findDirectory, readCentralHeader, readLocalHeader, type CentralHeader, type ZipDirectory } from './zip-headers'
import { clashKey, isUnsafePath, normalPath, oddName, shownName } from './zip-names'

/** One file of the archive, where its packed bytes lie, and what they should unpack to. */
export type ZipEntry = {
  /** Normal path: forward slashes, no `.` parts. */
  path: string
  /** The name as an unzipper keeps it. */
  name: string
  method: 0 | 8
  crc: number
  packed: number
  size: number
  dataStart: number
}

export type ZipScan = {
  /** Files in the order of the directory; folders are left out. Empty when a stop was found. */
  entries: ZipEntry[]
  findings: BundleFinding[]
  /** The part of the file that is the archive proper: what lies before `start` and the comment are not. */
  start: number
  end: number
  commentLength: number
}

const isStop = (f: BundleFinding) => f.severity === 'stop'

/**
 * Reads a zip's directory and compares it with the local headers, without unpacking anything: nothing of it is trusted.
 *
 * Source: the published .ZIP application note 6.3 (records, flags, zip64). Any stop means that the archive must not be read on.
 */
export function scanZip(bytes: Uint8Array, limits: CheckLimits): ZipScan {
  const scan: ZipScan = { entries: [], findings: [], start: 0, end: bytes.length, commentLength: 0 }
  const stop = (f: BundleFinding): ZipScan => ({ ...scan, entries: [], findings: [f] })

  if (bytes.length === 0) return stop(finding('zip-unreadable', 'The file is empty.', { found: '0 bytes' }))
  if (bytes.length > limits.zipBytes) {
    const message = 'The zip is larger than a bundle may be.'
    return stop(
      finding('zip-too-large', message, { expected: `at most ${limits.zipBytes} bytes`, found: `${bytes.length} bytes` })
    )
  }
  const directory = findDirectory(bytes)
  if ('problem' in directory) return stop(finding('zip-unreadable', directory.problem))
  scan.start = directory.base
  scan.end = directory.end
  scan.commentLength = directory.commentLength
  if (directory.count === 0) return stop(finding('zip-unreadable', 'The zip holds no files.', { found: '0 entries' }))
  if (directory.count > limits.entries) {
    const message = 'The zip holds more entries than a bundle may have.'
    return stop(finding('zip-too-large', message, { expected: `at most ${limits.entries}`, found: directory.count }))
  }

  const headers: CentralHeader[] = []
  let at = directory.offset
  for (let i = 0; i < directory.count; i++) {
    const header = readCentralHeader(bytes, at, directory.offset + directory.size, directory.base)
    if (!header) return stop(finding('zip-unreadable', `The zip's directory is damaged at entry ${i + 1} of ${directory.count}.`))
    headers.push(header)
    at = header.next
  }

  // A digital signature may stand behind the entries; entries that the count leaves out may not.
  const left = directory.offset + directory.size - at
  if (left >= 4 && new DataView(bytes.buffer, bytes.byteOffset).getUint32(at, true) === 0x02014b50)
    return stop(finding('zip-unreadable', "The zip's directory holds more entries than it counts."))

  const flagged = flagStops(headers, limits)
  if (flagged.length > 0) return { ...scan, findings: flagged }

  if (new Set(headers.map((header) => header.localOffset)).size < headers.length) return stop(shared())

  const ranges: [number, number][] = []
  for (const header of headers) {
    const local = readLocalHeader(bytes, header)
    if (typeof local === 'string') {
      return stop(finding('zip-unreadable', `The zip contradicts itself: ${local}.`, { file: shownName(header.name) }))
    }
    if (local.dataEnd > directory.offset) {
      return stop(finding('zip-unreadable', 'A file runs past the end of the packed data.', { file: shownName(header.name) }))
    }
    ranges.push([header.localOffset, local.dataEnd])
    if (header.isFolder) continue
    scan.entries.push({
      path: normalPath(header.name),
      name: header.name,
      method: header.method === 0 ? 0 : 8,
      crc: header.crc,
      packed: header.packed,
      size: header.size,
      dataStart: local.dataStart
    })
  }
  ranges.sort((a, b) => a[0] - b[0])
  if (ranges.some(([from], i) => i > 0 && from < ranges[i - 1]![1])) return stop(shared())
  if (scan.entries.length === 0) return stop(finding('zip-unreadable', 'The zip holds folders only, no files.'))

  const extra = extraData(directory, ranges)
  if (extra) scan.findings.push(extra)
  scan.findings.push(...nameRemarks(scan.entries, limits))
  return scan
}

const shared = () => finding('zip-too-large', 'Files in the zip share the same packed bytes, as archives made to swell do.')

/** What belongs to no file: before, between and behind the files, or a comment that looks like a directory. */
function extraData(directory: ZipDirectory, ranges: readonly [number, number][]): BundleFinding | null {
  const before = ranges[0]![0]
  const between = ranges.reduce(
    (sum, [from], i) => sum + (i === 0 ? 0 : from - ranges[i - 1]![1]),
    directory.offset - ranges.at(-1)![1]
  )
  const note = (message: string, bytes?: number) =>
    finding('zip-extra-data', message, bytes === undefined ? {} : { found: `${bytes} bytes` })
  if (before > 0) return note('There are bytes in front of the archive, which are ignored.', before)
  if (directory.after > 0) return note('There are bytes behind the archive, which are ignored.', directory.after)
  if (directory.hasStrayRecords) return note('The comment of the zip looks like a second directory; it is ignored.')
  return between > 0 ? note('There are bytes between the files that belong to none of them; they are ignored.', between) : null
}

/** The stops that the directory alone tells, one finding a code. */
function flagStops(headers: CentralHeader[], limits: CheckLimits): BundleFinding[] {
  const found = new Map<string, BundleFinding>()
  const add = (f: BundleFinding) => {
    if (!found.has(f.code)) found.set(f.code, f)
  }
  const clash = nameClash(headers)
  if (clash) add(clash)
  let total = 0
  for (const header of headers) {
    const file = shownName(header.name)
    if (header.isEncrypted)
      add(finding('zip-encrypted', 'Files in the zip are encrypted; upload it without a password.', { file }))
    else if (header.method !== 0 && header.method !== 8) {
      const message = 'The zip uses a compression that board houses cannot be expected to open.'
      add(
        finding('zip-method', message, { file, expected: 'stored or deflate (method 0 or 8)', found: `method ${header.method}` })
      )
    }
    if (isUnsafePath(header.name))
      add(finding('zip-path-unsafe', 'A name in the zip leads out of the folder it is unpacked in.', { file }))
    if (header.isLink) add(finding('zip-link', 'The zip holds a link or a device instead of a file.', { file }))
    total += header.size
    if (header.size > limits.fileBytes) {
      const message = 'A file in the zip is larger than allowed.'
      add(
        finding('zip-too-large', message, { file, expected: `at most ${limits.fileBytes} bytes`, found: `${header.size} bytes` })
      )
    } else if (header.size > limits.ratioFrom && header.size > header.packed * limits.ratio) {
      const found = `${Math.round(header.size / Math.max(1, header.packed))} : 1`
      add(
        finding('zip-too-large', 'A file in the zip unpacks to far more than it holds.', {
          file,
          expected: `at most ${limits.ratio} : 1`,
          found
        })
      )
    }
    if (header.isFolder && header.size > 0)
      add(finding('zip-unreadable', 'A folder in the zip holds bytes as a file does; programs disagree on what it is.', { file }))
  }
  if (total > limits.totalBytes) {
    const message = 'The zip unpacks to more than a bundle may hold.'
    add(finding('zip-too-large', message, { expected: `at most ${limits.totalBytes} bytes`, found: `${total} bytes` }))
  }
  return [...found.values()].filter(isStop)
}

/** Two names that would be one file when unpacked, or a file where another needs a folder. */
function nameClash(headers: readonly CentralHeader[]): BundleFinding | null {
  const seen = new Map<string, CentralHeader>()
  const between = (a: CentralHeader, b: CentralHeader) => {
    const message = `Two files in the zip would be one when unpacked: ${shownName(a.name)} and ${shownName(b.name)}.`
    return finding('zip-name-clash', message, { file: shownName(b.name) })
  }
  for (const header of headers) {
    const key = clashKey(normalPath(header.name))
    const other = seen.get(key)
    if (other && !(other.isFolder && header.isFolder)) return between(other, header)
    seen.set(key, header)
  }
  for (const [key, header] of seen) {
    for (let at = key.lastIndexOf('/'); at > 0; at = key.lastIndexOf('/', at - 1)) {
      const above = seen.get(key.slice(0, at))
      if (above && !above.isFolder) return between(above, header)
    }
  }
  return null
}

/** Remarks on names that do not keep the zip from being read: one for each odd name, one for all backslashes. */
function nameRemarks(entries: ZipEntry[], limits: CheckLimits): BundleFinding[] {
  const findings: BundleFinding[] = []
  for (const entry of entries) {
    const odd = oddName(entry.path, limits)
    if (odd)
      findings.push(
        finding('zip-name-odd', `Board houses may refuse or lose this file: ${odd}.`, { file: shownName(entry.path) })
      )
  }
  const backslashed = entries.filter((entry) => entry.name.includes('\\'))
  if (backslashed.length > 0) {
    const message = 'Names in the zip use backslashes between folders; they are read as folders.'
    findings.push(
      finding('zip-backslash', message, { file: shownName(backslashed[0]!.path), found: `${backslashed.length} files` })
    )
  }
  return findings
}
