import type { RandomSource } from '../../src/core/numeric/random-source.ts'
import { below, oneOf } from './good-files.ts'

const TOKENS = [
  'NaN',
  'nan',
  'inf',
  '-inf',
  '-1',
  '-0',
  '1e999',
  '1e-999',
  '1e15',
  '9007199254740993',
  '4294967296',
  '99999999999999999999',
  '0.5',
  '1.5',
  '1,5',
  '',
  ',',
  ';',
  '\t',
  ' ',
  '\n',
  '\r',
  '\r\n',
  '\0',
  '#',
  '%',
  '//',
  '"',
  '0x10',
  'True',
  '\uFEFF',
  'é',
  '--',
  '+',
  '.',
  'e',
  '(3,)',
  "'<i8'",
  '2147483648',
  '536870912,',
  '\u0085',
  'time (s)',
  'arrival',
]
const WORDS = [0, 1, 0x7f, 0xff, 0x7fff, 0xffff, 0x7fffffff, 0x80000000, 0xffffffff]

function spliced(bytes: Uint8Array, from: number, to: number, middle: Uint8Array): Uint8Array {
  const all = new Uint8Array(from + middle.length + bytes.length - to)
  all.set(bytes.subarray(0, from))
  all.set(middle, from)
  all.set(bytes.subarray(to), from + middle.length)
  return all
}

/** One change of a kind that transfer, editors, other programs or malice make. `other` is another good file. */
function mutatedOnce(bytes: Uint8Array, random: RandomSource, other: Uint8Array): Uint8Array {
  const from = below(random, bytes.length + 1)
  const to = Math.min(bytes.length, from + below(random, 20))
  switch (below(random, 11)) {
    case 0: {
      const copy = bytes.slice()
      if (from < copy.length) copy[from] ^= 1 << below(random, 8)
      return copy
    }
    case 1: {
      const copy = bytes.slice()
      if (from < copy.length) copy[from] = below(random, 256)
      return copy
    }
    case 2:
      return spliced(bytes, from, to, new Uint8Array(0))
    case 3:
      return spliced(bytes, from, from, bytes.subarray(from, to))
    case 4:
      return bytes.slice(0, from)
    case 5:
    case 6:
      return spliced(
        bytes,
        from,
        below(random, 2) === 0 ? from : to,
        new TextEncoder().encode(oneOf(random, TOKENS)),
      )
    case 7: {
      const copy = bytes.slice()
      const view = new DataView(copy.buffer)
      const at = below(random, 2) === 0 ? from : bytes.length - 1 - below(random, Math.min(120, bytes.length))
      if (at >= 0 && at + 4 <= copy.length) view.setUint32(at, oneOf(random, WORDS), true)
      return copy
    }
    case 8:
      return spliced(bytes, from, bytes.length, other.subarray(below(random, other.length)))
    case 9:
      return replacedNumber(bytes, from, random)
    default:
      return swappedLines(bytes, random)
  }
}

/** The number at or after a place is replaced. */
function replacedNumber(bytes: Uint8Array, place: number, random: RandomSource): Uint8Array {
  const digit = (i: number): boolean => bytes[i] >= 48 && bytes[i] <= 57
  let from = place
  while (from < bytes.length && !digit(from)) from++
  let to = from
  while (to < bytes.length && digit(to)) to++
  const number =
    below(random, 2) === 0 ? oneOf(random, TOKENS) : String(below(random, 10 ** below(random, 12)))
  return spliced(bytes, from, to, new TextEncoder().encode(number))
}

function swappedLines(bytes: Uint8Array, random: RandomSource): Uint8Array {
  const text = Buffer.from(bytes).toString('latin1')
  const lines = text.split('\n')
  const a = below(random, lines.length)
  const b = below(random, lines.length)
  const kept = lines[a]
  lines[a] = lines[b]
  lines[b] = kept
  return new Uint8Array(Buffer.from(lines.join('\n'), 'latin1'))
}

/** One to four changes, often one. */
export function mutated(bytes: Uint8Array, random: RandomSource, other: Uint8Array): Uint8Array {
  let changed = bytes
  for (let more = 1 + below(random, 1 + below(random, 4)); more > 0; more--)
    changed = mutatedOnce(changed, random, other)
  return changed
}
