import { crc32 } from 'node:zlib'

/** A checksum that is fed piece by piece; `digest` gives its bytes, most significant first. */
export type Digester = { update: (data: Uint8Array) => void; digest: () => Buffer }

const table32c = new Uint32Array(256)
const table64High = new Uint32Array(256)
const table64Low = new Uint32Array(256)
for (let n = 0; n < 256; n++) {
  let c = n
  for (let bit = 0; bit < 8; bit++) c = c & 1 ? (c >>> 1) ^ 0x82f63b78 : c >>> 1
  table32c[n] = c
  let [high, low] = [0, n]
  for (let bit = 0; bit < 8; bit++) {
    const odd = low & 1
    low = (low >>> 1) | (high << 31)
    high >>>= 1
    if (odd) [high, low] = [high ^ 0x9a6c9329, low ^ 0xac4bc9b5]
  }
  table64High[n] = high
  table64Low[n] = low
}

/** CRC-32 (ISO-HDLC), as in zip files. */
export function crc32Digester(): Digester {
  let value = 0
  return { update: (data) => void (value = crc32(data, value)), digest: () => bytes32(value) }
}

/** CRC-32C (Castagnoli; reflected polynomial 82F63B78). */
export function crc32cDigester(): Digester {
  let value = 0xffffffff
  return {
    update: (data) => {
      for (let i = 0; i < data.length; i++) value = table32c[(value ^ data[i]!) & 255]! ^ (value >>> 8)
    },
    digest: () => bytes32(~value)
  }
}

/** CRC-64/NVME (reflected polynomial 9A6C9329AC4BC9B5), held in two halves of 32 bits. */
export function crc64nvmeDigester(): Digester {
  let [high, low] = [0xffffffff, 0xffffffff]
  return {
    update: (data) => {
      for (let i = 0; i < data.length; i++) {
        const at = (low ^ data[i]!) & 255
        low = table64Low[at]! ^ ((low >>> 8) | (high << 24))
        high = table64High[at]! ^ (high >>> 8)
      }
    },
    digest: () => Buffer.concat([bytes32(~high), bytes32(~low)])
  }
}

function bytes32(value: number): Buffer {
  const bytes = Buffer.alloc(4)
  bytes.writeUInt32BE(value >>> 0)
  return bytes
}
