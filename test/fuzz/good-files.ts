import { zipSync } from 'fflate'
import type { RandomSource } from '../../src/core/numeric/random-source.ts'
import { itemBytes, npyFile } from '../core/read/npy-file.ts'

/** A file that is read without complaint, to be damaged. */
export interface GoodFile {
  readonly name: string
  readonly bytes: Uint8Array
}

/** A whole number in [0, below). */
export function below(random: RandomSource, most: number): number {
  return Math.floor(random.uniform() * most)
}

export function oneOf<T>(random: RandomSource, items: readonly T[]): T {
  return items[below(random, items.length)]
}

const DIALECTS = [
  [',', '.'],
  [';', '.'],
  [';', ','],
  ['\t', '.'],
  ['\t', ','],
  [' ', '.'],
  ['   ', ','],
] as const
const TIME_NAMES = ['time (s)', 't/ms', 'time_us', 'time', '"time (s)"', 'time (min)', 'timestamp/s']

function textTable(random: RandomSource): GoodFile {
  const [delimiter, point] = oneOf(random, DIALECTS)
  const end = oneOf(random, ['\n', '\n', '\r\n', '\r'])
  const width = 1 + below(random, 4)
  const rows = 3 + below(random, 40)
  const rate = below(random, 4) === 0
  const gate = below(random, 5) === 0
  const timed = below(random, 5) > 0
  const start = below(random, 3) * 7
  // The last one falls between two printable times.
  const step = oneOf(random, [0.01, 0.01, 0.02, 0.1, 1 / 30])
  const number = (value: number | string): string => String(value).replace('.', point)
  const lines: string[] = []
  if (below(random, 3) === 0) lines.push(oneOf(random, ['# made today', '% x', '// notes', '']))
  if (below(random, 3) > 0) {
    const names = Array.from({ length: width }, (_, i) => (rate ? `rate${i} (cps)` : `dot${i}`))
    const line = [...(timed ? [oneOf(random, TIME_NAMES)] : []), ...names, ...(gate ? ['field'] : [])]
    // A name with a space would be two columns.
    lines.push(
      line.map((name) => (delimiter.trim() === '' ? name.replaceAll(' ', '_') : name)).join(delimiter),
    )
  }
  for (let i = 0, at = 0; i < rows; i++, at += below(random, 25) === 0 ? 3 : 1) {
    const counts = Array.from({ length: width }, () => below(random, 300) * (rate ? 100 : 1))
    const row = [
      ...(timed ? [(start + at * step).toFixed(2)] : []),
      ...counts,
      ...(gate ? [i % 3 === 0 ? 1 : 0] : []),
    ]
    lines.push(row.map(number).join(delimiter))
  }
  const bom = below(random, 8) === 0 ? '\uFEFF' : ''
  return {
    name: 'a.csv',
    bytes: new TextEncoder().encode(bom + lines.join(end) + (below(random, 4) > 0 ? end : '')),
  }
}

function textArrivals(random: RandomSource): GoodFile {
  const lines =
    below(random, 2) === 0 ? [oneOf(random, ['arrival (us)', 'timestamp', 'time_ns', 'arrival / ps'])] : []
  const decimals = below(random, 4)
  for (let i = 0, time = 0; i < 5 + below(random, 60); i++) {
    time += random.uniform() * 200
    lines.push(time.toFixed(decimals))
  }
  return { name: 'a.txt', bytes: new TextEncoder().encode(`${lines.join('\n')}\n`) }
}

/** A fixed date keeps archives the same from run to run. */
const SAVED = new Date(2020, 0, 1)

const TYPES = [
  '|b1',
  '|i1',
  '|u1',
  ...['i2', 'u2', 'i4', 'u4', 'i8', 'u8', 'f2', 'f4', 'f8'].flatMap((type) => [`<${type}`, `>${type}`]),
]

function array(random: RandomSource): Uint8Array {
  const descr = oneOf(random, TYPES)
  if (below(random, 3) === 0) {
    let time = 0
    const times = Array.from(
      { length: 3 + below(random, 40) },
      () => (time = Math.min(descr === '|b1' ? 1 : 120, time + below(random, 5))),
    )
    return npyFile(descr, `${times.length},`, itemBytes(descr, times))
  }
  const rows = 1 + below(random, 4)
  const columns = 1 + below(random, 30)
  const most = descr === '|b1' ? 2 : 120
  const values = Array.from({ length: rows * columns }, () => below(random, most))
  const shape = rows === 1 ? `${columns},` : `${rows}, ${columns}`
  return npyFile(descr, shape, itemBytes(descr, values), below(random, 2) === 0)
}

/** A good file of any kind the program reads. */
export function goodFile(random: RandomSource): GoodFile {
  const kind = below(random, 10)
  if (kind < 4) return textTable(random)
  if (kind < 5) return textArrivals(random)
  if (kind < 8) return { name: 'a.npy', bytes: array(random) }
  const members: Record<string, Uint8Array> = { 'first.npy': array(random) }
  if (below(random, 2) === 0) members['second.npy'] = array(random)
  if (below(random, 4) === 0) members['notes.txt'] = new TextEncoder().encode('hello')
  return { name: 'a.npz', bytes: zipSync(members, { level: oneOf(random, [0, 6] as const), mtime: SAVED }) }
}
