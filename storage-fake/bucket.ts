import { createHash, randomBytes } from 'node:crypto'
import { mkdirSync, readdirSync, rmSync } from 'node:fs'
import { link, mkdir, rename, unlink } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import { S3Error } from './errors'
import { describeObjectFile, isErrno, openObjectFile, syncFolder, type Description, type OpenObject } from './object-file'

/** What a write demands of the object already there; `ifMatch` is an ETag without quotes. */
export type WriteCondition = { ifAbsent?: boolean; ifMatch?: string }

export type Entry = Pick<Description, 'key' | 'bytes' | 'etag' | 'modifiedAt'>

/**
 * One bucket in a folder: `objects/ab/<SHA-256 of the key>`, `uploads/<id>/` for multipart uploads, `temporary/` for what is being written.
 * A key never becomes a path, so no key can leave the folder. The sorted index for listings is held in memory, read from the files at start:
 * one process at a time may write to a folder.
 */
export class Bucket {
  readonly name: string
  readonly #folder: string
  readonly #entries = new Map<string, Entry>()
  #sorted: Entry[] | null = null
  #turn: Promise<unknown> = Promise.resolve()

  /** Opens the bucket's folder, making it when it is absent; what an earlier process left half-written is removed. */
  constructor(folder: string, name: string) {
    this.name = name
    this.#folder = folder
    rmSync(join(folder, 'temporary'), { recursive: true, force: true })
    for (const part of ['objects', 'uploads', 'temporary']) mkdirSync(join(folder, part), { recursive: true })
    for (const shard of readdirSync(join(folder, 'objects'))) {
      for (const file of readdirSync(join(folder, 'objects', shard))) {
        const { key, bytes, etag, modifiedAt } = describeObjectFile(join(folder, 'objects', shard, file))
        this.#entries.set(key, { key, bytes, etag, modifiedAt })
      }
    }
  }

  /** A path of its own for something that is being written. */
  temporaryPath(): string {
    return join(this.#folder, 'temporary', randomBytes(16).toString('hex'))
  }

  uploadFolder(id: string): string {
    return join(this.#folder, 'uploads', id)
  }

  #path(key: string): string {
    const hash = createHash('sha256').update(key).digest('hex')
    return join(this.#folder, 'objects', hash.slice(0, 2), hash)
  }

  open(key: string): Promise<OpenObject | null> {
    return openObjectFile(this.#path(key))
  }

  /** Runs one change of the bucket after the other, so that file, condition and index stay together. */
  #inTurn<T>(change: () => Promise<T>): Promise<T> {
    const result = this.#turn.then(change, change)
    this.#turn = result.catch(() => undefined)
    return result
  }

  /** Throws when an object already there forbids the write. */
  async check(key: string, condition: WriteCondition): Promise<void> {
    const there = this.#entries.get(key)
    if (condition.ifAbsent && there) throw preconditionFailed('If-None-Match')
    if (condition.ifMatch === undefined) return
    if (!there) throw noSuchKey(key)
    if (there.etag !== condition.ifMatch) throw preconditionFailed('If-Match')
  }

  /** Puts a finished temporary file in the key's place, at once or not at all; durable when it returns. */
  async commit(temporary: string, description: Description, condition: WriteCondition): Promise<void> {
    const { key, bytes, etag, modifiedAt } = description
    const path = this.#path(key)
    const newFolder = await mkdir(dirname(path), { recursive: true })
    await this.#inTurn(async () => {
      await this.check(key, condition)
      if (condition.ifAbsent) {
        try {
          await link(temporary, path)
        } catch (error) {
          throw isErrno(error, 'EEXIST') ? preconditionFailed('If-None-Match') : error
        }
        await unlink(temporary)
      } else {
        await rename(temporary, path)
      }
      this.#entries.set(key, { key, bytes, etag, modifiedAt })
      this.#sorted = null
    })
    await syncFolder(dirname(path))
    if (newFolder !== undefined) await syncFolder(dirname(newFolder))
  }

  /** Removes an object; nothing happens when there is none. */
  async remove(key: string): Promise<void> {
    const path = this.#path(key)
    const isRemoved = await this.#inTurn(async () => {
      try {
        await unlink(path)
      } catch (error) {
        if (isErrno(error, 'ENOENT')) return false
        throw error
      }
      this.#entries.delete(key)
      this.#sorted = null
      return true
    })
    if (isRemoved) await syncFolder(dirname(path))
  }

  /** All objects by the UTF-8 bytes of their keys. */
  entries(): readonly Entry[] {
    this.#sorted ??= [...this.#entries.values()].sort((a, b) => compareKeys(a.key, b.key))
    return this.#sorted
  }
}

export const preconditionFailed = (condition: string): S3Error =>
  new S3Error('PreconditionFailed', 'At least one of the pre-conditions you specified did not hold', { Condition: condition })

export const noSuchKey = (key: string): S3Error => new S3Error('NoSuchKey', 'The specified key does not exist.', { Key: key })

/** Order of keys by their UTF-8 bytes, which differs from JavaScript's order above U+D7FF: surrogates come last. */
export function compareKeys(a: string, b: string): number {
  const length = Math.min(a.length, b.length)
  for (let i = 0; i < length; i++) {
    const [x, y] = [a.charCodeAt(i), b.charCodeAt(i)]
    if (x !== y) return rank(x) - rank(y)
  }
  return a.length - b.length
}

const rank = (unit: number): number => (unit >= 0xe000 ? unit - 0x800 : unit >= 0xd800 ? unit + 0x2000 : unit)

/** Bucket names as the S3 API allows them; this also makes them safe folder names. */
export function checkBucketName(name: string): void {
  const isValid = /^[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/.test(name) && !name.includes('..') && !/^\d+\.\d+\.\d+\.\d+$/.test(name)
  if (!isValid) throw new S3Error('InvalidBucketName', 'The specified bucket is not valid.', { BucketName: name })
}
