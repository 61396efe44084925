const TABLE = Uint32Array.from({ length: 256 }, (_, byte) => {
  let value = byte
  for (let bit = 0; bit < 8; bit++) value = value & 1 ? (value >>> 1) ^ 0xedb88320 : value >>> 1
  return value
})

/** Checksum of ZIP members (ISO 3309), continued from `before` (0 at the start): `crc32(all) = crc32(rest, crc32(first))`. */
export function crc32(bytes: Uint8Array, before = 0): number {
  let value = ~before
  for (let i = 0; i < bytes.length; i++) value = TABLE[(value ^ bytes[i]) & 255] ^ (value >>> 8)
  return ~value >>> 0
}
