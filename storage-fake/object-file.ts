import { closeSync, openSync, readSync, fstatSync } from 'node:fs'
import { open, rm, type FileHandle } from 'node:fs/promises'
import type { Readable } from 'node:stream'
import type { Checksums } from './checksums'

/**
 * One object is one file: the content, then its description as JSON, then the JSON's length (4 bytes) and a mark (4 bytes).
 * A single rename therefore replaces content and description together, and whoever has the file open keeps reading the old object.
 */
export type Description = {
  key: string
  bytes: number
  /** Without quotes. */
  etag: string
  modifiedAt: string
  /** Headers to give back: content-type and the like, and `x-amz-meta-…`. */
  headers: Record<string, string>
  checksums: Checksums
}

const mark = Buffer.from('FSO1')
const tailBytes = 8
const descriptionLimit = 65_536

export type ObjectWriter = {
  write: (piece: Buffer) => Promise<void>
  /** Adds the description, makes the file durable and closes it. */
  finish: (description: Description) => Promise<void>
  /** Closes the file and removes it where it still is; may be called after `finish`. */
  discard: () => Promise<void>
}

/** Starts a new file, which must not exist yet. */
export async function writeObjectFile(path: string): Promise<ObjectWriter> {
  const file = await open(path, 'wx')
  let isOpen = true
  const close = async () => {
    if (isOpen) await file.close()
    isOpen = false
  }
  return {
    write: (piece) => file.writeFile(piece),
    finish: async (description) => {
      const json = Buffer.from(JSON.stringify(description))
      const length = Buffer.alloc(4)
      length.writeUInt32BE(json.length)
      await file.writeFile(Buffer.concat([json, length, mark]))
      await file.sync()
      await close()
    },
    discard: async () => {
      await close()
      await rm(path, { force: true })
    }
  }
}

export type OpenObject = {
  description: Description
  /** Streams bytes `start` to `end` inclusive and closes the file at the end or when destroyed. */
  stream: (start: number, end: number) => Readable
  close: () => Promise<void>
}

/** Opens an object's file; null when there is none. */
export async function openObjectFile(path: string): Promise<OpenObject | null> {
  let file: FileHandle
  try {
    file = await open(path, 'r')
  } catch (error) {
    if (isErrno(error, 'ENOENT')) return null
    throw error
  }
  try {
    const description = readDescription(file.fd, path)
    return {
      description,
      stream: (start, end) => file.createReadStream({ start, end, autoClose: true }),
      close: () => file.close()
    }
  } catch (error) {
    await file.close()
    throw error
  }
}

/** The description of an object's file, for building an index at start. */
export function describeObjectFile(path: string): Description {
  const fd = openSync(path, 'r')
  try {
    return readDescription(fd, path)
  } finally {
    closeSync(fd)
  }
}

function readDescription(fd: number, path: string): Description {
  const size = fstatSync(fd).size
  const tail = Buffer.alloc(tailBytes)
  if (size < tailBytes || readSync(fd, tail, 0, tailBytes, size - tailBytes) !== tailBytes || !tail.subarray(4).equals(mark)) {
    throw new Error(`${path} is not an object file of this server`)
  }
  const length = tail.readUInt32BE(0)
  if (length > descriptionLimit || length > size - tailBytes) throw new Error(`${path} has a broken description`)
  const json = Buffer.alloc(length)
  readSync(fd, json, 0, length, size - tailBytes - length)
  const description = JSON.parse(json.toString('utf8')) as Description
  if (description.bytes !== size - tailBytes - length) throw new Error(`${path} has a broken description`)
  return description
}

/** Whether a thrown value is the system error of that code. */
export const isErrno = (error: unknown, code: string): boolean => error instanceof Error && 'code' in error && error.code === code

/** Makes names added to or removed from a folder durable. */
export async function syncFolder(path: string): Promise<void> {
  const folder = await open(path, 'r')
  try {
    await folder.sync()
  } finally {
    await folder.close()
  }
}
