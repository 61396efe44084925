import type { ByteSource } from './byte-source.ts'
import type { NpyHeader } from './npy-header.ts'
import { readNpyValues } from './npy-values.ts'

const FIRST_ITEMS = 4096

/** Whether the first numbers of a 1-D array never fall and do not stay the same. `source` may end early. */
export async function startsRising(source: ByteSource, header: NpyHeader): Promise<boolean> {
  const items = Math.min(
    header.items,
    FIRST_ITEMS,
    Math.floor((source.size - header.dataStart) / header.itemBytes),
  )
  if (header.shape.length !== 1 || items < 3) return false
  let rising = true
  let before = Number.NEGATIVE_INFINITY
  let first = 0
  const hooks = { onProgress: () => {}, shouldStop: () => false }
  await readNpyValues(source, { ...header, items }, hooks, (values, count) => {
    first = values[0]
    for (let i = 0; i < count; i++) {
      if (values[i] < before) rising = false
      before = values[i]
    }
  })
  return rising && before > first
}
