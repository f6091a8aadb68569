/**
 * The checksum that zips use (CRC-32, polynomial 0xedb88320 reflected), for short inputs: it goes bit by bit.
 *
 * Source: the published .ZIP application note 6.3, section 4.4.7.
 */
export function crc32(bytes: Uint8Array): number {
  let crc = 0xffffffff
  for (const byte of bytes) {
    crc ^= byte
    for (let bit = 0; bit < 8; bit++) crc = (crc >>> 1) ^ (crc & 1 ? 0xedb88320 : 0)
  }
  return (crc ^ 0xffffffff) >>> 0
}
