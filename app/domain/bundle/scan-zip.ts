import type { BundleFinding } from './bundle-check.types'
import { finding } from './finding'
import type { CheckLimits } from './limits'
import { findDirectory, readCentralHeader, readLocalHeader, type CentralHeader } from './zip-headers'
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

  const flagged = flagStops(headers, limits)
  if (flagged.length > 0) return { ...scan, findings: flagged }

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
  if (ranges.some(([from], i) => i > 0 && from < ranges[i - 1]![1])) {
    return stop(finding('zip-too-large', 'Files in the zip share the same packed bytes, as archives made to swell do.'))
  }
  if (scan.entries.length === 0) return stop(finding('zip-unreadable', 'The zip holds folders only, no files.'))

  const before = ranges[0]![0]
  if (before > 0 || directory.hasStrayRecords) {
    const message =
      before > 0
        ? 'There are bytes in front of the archive, which are ignored.'
        : 'The comment of the zip looks like a second directory; it is ignored.'
    scan.findings.push(finding('zip-extra-data', message, before > 0 ? { found: `${before} bytes` } : {}))
  }
  scan.findings.push(...nameRemarks(scan.entries, limits))
  return scan
}

/** The stops that the directory alone tells, one finding a code. */
function flagStops(headers: CentralHeader[], limits: CheckLimits): BundleFinding[] {
  const found = new Map<string, BundleFinding>()
  const add = (f: BundleFinding) => {
    if (!found.has(f.code)) found.set(f.code, f)
  }
  const seen = new Map<string, string>()
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
    if (header.isLink) add(finding('zip-link', 'The zip holds a link instead of a file.', { file }))
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
    const key = clashKey(normalPath(header.name))
    const other = seen.get(key)
    if (other !== undefined && !header.isFolder) {
      const message = `Two files in the zip would be one when unpacked: ${shownName(other)} and ${file}.`
      add(finding('zip-name-clash', message, { file }))
    }
    seen.set(key, header.name)
  }
  if (total > limits.totalBytes) {
    const message = 'The zip unpacks to more than a bundle may hold.'
    add(finding('zip-too-large', message, { expected: `at most ${limits.totalBytes} bytes`, found: `${total} bytes` }))
  }
  return [...found.values()].filter(isStop)
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
