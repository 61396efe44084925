import { createHash } from 'node:crypto'
import { crc32 as zlibCrc32 } from 'node:zlib'
import { expect, it } from 'vitest'
import { crc32 } from '../../../src/core/read/crc32.ts'

it('the check value of the standard, zlib on any bytes, and in parts', () => {
  const check = new TextEncoder().encode('123456789')
  expect(crc32(check)).toBe(0xcbf43926)
  expect(crc32(new Uint8Array(0))).toBe(0)
  for (let i = 0; i < 50; i++) {
    const bytes = new Uint8Array(createHash('sha512').update(String(i)).digest()).subarray(0, i)
    expect(crc32(bytes)).toBe(zlibCrc32(bytes))
    expect(crc32(bytes.subarray(i >> 1), crc32(bytes.subarray(0, i >> 1)))).toBe(crc32(bytes))
  }
})
