import { createHash } from 'node:crypto'
import { crc32Digester, crc32cDigester, crc64nvmeDigester, type Digester } from './crc'
import { S3Error } from './errors'

const hash = (name: string) => (): Digester => {
  const inner = createHash(name)
  return { update: (data) => void inner.update(data), digest: () => inner.digest() }
}

/** The checksums of the S3 API: header suffix, size in bytes, and how it is computed. */
const algorithms = {
  crc32: { bytes: 4, start: crc32Digester },
  crc32c: { bytes: 4, start: crc32cDigester },
  crc64nvme: { bytes: 8, start: crc64nvmeDigester },
  sha1: { bytes: 20, start: hash('sha1') },
  sha256: { bytes: 32, start: hash('sha256') }
}

export type ChecksumName = keyof typeof algorithms
export const checksumNames = Object.keys(algorithms) as ChecksumName[]
export const checksumHeader = (name: ChecksumName): string => `x-amz-checksum-${name}`

/** Base64 values by checksum. */
export type Checksums = Partial<Record<ChecksumName, string>>

/** The checksum a header or trailer of this name carries; undefined when it is another header. */
export function checksumOfHeader(header: string): ChecksumName | undefined {
  return checksumNames.find((name) => checksumHeader(name) === header)
}

export const startChecksum = (name: ChecksumName): Digester => algorithms[name].start()

/** Throws when a stated checksum is no base64 of the right size. */
export function checkForm(name: ChecksumName, value: string): void {
  if (decodeBase64(value)?.length !== algorithms[name].bytes) {
    throw new S3Error('InvalidRequest', `Value for ${checksumHeader(name)} header is invalid.`)
  }
}

/** Bytes of a strict base64 text, undefined when it is none. */
export function decodeBase64(text: string): Buffer | undefined {
  const bytes = Buffer.from(text, 'base64')
  return bytes.toString('base64') === text ? bytes : undefined
}
