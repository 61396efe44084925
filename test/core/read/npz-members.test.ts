import { deflateSync, strToU8, zipSync } from 'fflate'
import { describe, expect, it } from 'vitest'
import { bytesSource } from '../../../src/core/read/byte-source.ts'
import { previewSource } from '../../../src/core/read/import-preview.ts'
import { npzMember, npzMembers } from '../../../src/core/read/npz-members.ts'
import { readSource } from '../../../src/core/read/read-source.ts'
import numpyFiles from '../../reference/numpy-files.json' with { type: 'json' }
import { countsIn, problemIn, QUIET, readGiven } from './given-source.ts'
import { itemBytes, npyFile } from './npy-file.ts'

const fileOf = (word: string): Uint8Array =>
  new Uint8Array(Buffer.from(numpyFiles.files.find((f) => f.word === word)?.base64 ?? '', 'base64'))
const COUNTS = { content: 'counts', binSeconds: 0.01 }
const dots = npyFile('<u2', '2, 3', itemBytes('<u2', [1, 2, 3, 4, 5, 6]))
const zipped = zipSync({ 'notes.txt': strToU8('hello'), 'dots.npy': dots }, { level: 6 })

/** Place of the directory entry of a member, by its signature and name. */
function entryAt(zip: Uint8Array, name: string): number {
  const view = new DataView(zip.buffer, zip.byteOffset)
  for (let i = 0; i + 46 <= zip.length; i++) {
    if (view.getUint32(i, true) !== 0x02014b50) continue
    if (new TextDecoder().decode(zip.subarray(i + 46, i + 46 + view.getUint16(i + 28, true))) === name)
      return i
  }
  throw new Error('no such entry')
}

function changed(zip: Uint8Array, change: (view: DataView) => void): Uint8Array {
  const copy = zip.slice()
  change(new DataView(copy.buffer))
  return copy
}

async function refusal(zip: Uint8Array): Promise<string> {
  return problemIn(await readGiven(bytesSource(zip, 'a.npz'), COUNTS))
}

describe('archives written by NumPy', () => {
  for (const word of ['stored', 'deflated']) {
    it(word, async () => {
      const source = bytesSource(fileOf(`npz ${word}`), 'a.npz')
      const preview = await previewSource(source)
      expect(preview.members).toEqual(['dots.npy', 'times.npy'])
      expect(preview.arrays).toMatchObject([
        { dimensions: 2, answer: { member: 'dots.npy', content: 'counts', emitters: 'rows' } },
        { dimensions: 1, answer: { member: 'times.npy', content: 'arrival' } },
      ])
      const read = await readGiven(source, COUNTS)
      expect(countsIn(read)).toEqual([
        [0, 1, 2, 3, 100],
        [7, 6, 5, 4, 127],
      ])
      expect(countsIn(await readGiven(source, { ...COUNTS, member: 'times.npy' }))).toEqual([[1, 5, 9, 12]])
    })
  }
})

describe('archives of others', () => {
  it('the first array looks like arrival times when its numbers rise: proposed, and asked', async () => {
    const times = npyFile('<i8', '4,', itemBytes('<i8', [5, 9, 9, 30]))
    const preview = await previewSource(
      bytesSource(zipSync({ 'times.npy': times, 'dots.npy': dots }), 'a.npz'),
    )
    expect(preview.answer).toMatchObject({ content: 'arrival' })
    expect(preview.questions).toMatchObject([
      { key: 'content', choices: ['arrival', 'counts'], guess: 'arrival', required: false },
      { key: 'timeUnit', guess: 'ns', required: true },
    ])
    const counts = npyFile('<i8', '4,', itemBytes('<i8', [5, 9, 3, 30]))
    const other = await previewSource(bytesSource(zipSync({ 'n.npy': counts }), 'a.npz'))
    expect(other.answer).toMatchObject({ content: null })
    expect(other.questions).toMatchObject([{ key: 'content', guess: 'counts', required: true }])
  })
  it('passes over what is not an array', async () => {
    expect((await npzMembers(bytesSource(zipped, 'a.npz'))).members.map(({ name }) => name)).toEqual([
      'dots.npy',
    ])
    expect(countsIn(await readGiven(bytesSource(zipped, 'a.npz'), COUNTS))).toEqual([
      [1, 2, 3],
      [4, 5, 6],
    ])
  })
  it('reads the arrays beside single numbers, and says what it cannot read', async () => {
    const scalar = npyFile('<f8', '', itemBytes('<f8', [0.01]))
    const source = bytesSource(zipSync({ 'bin.npy': scalar, 'dots.npy': dots }), 'a.npz')
    const preview = await previewSource(source)
    expect(preview.members).toEqual(['dots.npy'])
    expect(preview.understood.at(-1)).toBe(
      '1 of 2 arrays cannot be read; the first: “a.npz: bin.npy”: the array has 0 dimensions; one or two are read. Reshape it before saving.',
    )
    expect(countsIn(await readGiven(source, COUNTS)).length).toBe(2)
  })
  it('control characters in names do not reach the sentences', async () => {
    const bad = zipSync({ 'a\u0007.npy': npyFile('<i4', '9,', new Uint8Array(4)) })
    expect(await refusal(bad)).toContain('“a.npz: a·.npy”, byte 128: the header promises')
  })
  it('without arrays', async () => {
    expect(await refusal(zipSync({ 'a.txt': strToU8('hello') }))).toContain(
      'the archive holds no NumPy arrays.',
    )
  })
  it('a member that is not there', async () => {
    const outcome = await readGiven(bytesSource(zipped, 'a.npz'), { ...COUNTS, member: 'x.npy' })
    expect(problemIn(outcome)).toContain(
      'the archive holds no array named “x.npy”. Choose another of its arrays.',
    )
  })
})

describe('damage', () => {
  it('cut anywhere: always a sentence', async () => {
    for (let cut = 4; cut < zipped.length; cut += 7)
      expect(await refusal(zipped.subarray(0, cut))).toContain(
        'The archive is damaged or cut short; copy it again',
      )
  })
  it('any bit of a stored member flipped: the checksum tells', async () => {
    const stored = zipSync({ 'dots.npy': dots }, { level: 0 })
    const start = 30 + 'dots.npy'.length
    for (let at = start + dots.length - 12; at < start + dots.length; at++) {
      const flipped = changed(stored, (view) => view.setUint8(at, view.getUint8(at) ^ 1))
      expect(await refusal(flipped)).toBe(
        '“a.npz”: member “dots.npy” does not match its checksum. The archive is damaged; copy it again or save it anew.',
      )
    }
  })
  it('no deflated data', async () => {
    const start = zipped.length - 22 - 46 * 2 - 'notes.txt'.length - 'dots.npy'.length
    const junk = changed(zipped, (view) => {
      for (let i = start - 60; i < start; i++) view.setUint8(i, 255)
    })
    expect(await refusal(junk)).toMatch(/does not unpack|unpacks to|checksum|damaged/)
  })
  it('a way of compressing that is not read', async () => {
    const lzma = changed(zipped, (view) => view.setUint16(entryAt(zipped, 'dots.npy') + 10, 14, true))
    expect(await refusal(lzma)).toContain('(method 14). Save with numpy.savez_compressed.')
  })
  it('encrypted', async () => {
    const locked = changed(zipped, (view) => view.setUint16(entryAt(zipped, 'dots.npy') + 8, 1, true))
    expect(await refusal(locked)).toContain('is encrypted. Save it without a password.')
  })
  it('zip64', async () => {
    const at = entryAt(zipped, 'dots.npy')
    const big = changed(zipped, (view) => view.setUint32(at + 24, 0xffffffff, true))
    expect(await refusal(big)).toContain('(zip64), which is not read. Save its arrays one by one.')
    const end = changed(zipped, (view) => view.setUint16(zipped.length - 12, 0xffff, true))
    const fewer = changed(zipped, (view) => {
      view.setUint16(zipped.length - 12, 1, true)
      view.setUint16(zipped.length - 14, 1, true)
    })
    expect(await refusal(fewer)).toContain(
      'the directory goes on after its 1 members. The archive is damaged',
    )
    expect(await refusal(end)).toContain('(zip64), which is not read.')
  })
})

describe('bombs', () => {
  it('a directory that claims 2 GB of a few bytes is refused before room is made', async () => {
    const at = entryAt(zipped, 'dots.npy')
    const lie = changed(zipped, (view) => view.setUint32(at + 24, 2 ** 31, true))
    expect(await refusal(lie)).toMatch(
      /member “dots.npy” cannot hold 2147483648 bytes in \d+\. The archive is damaged/,
    )
    const more = changed(zipped, (view) => view.setUint32(at + 24, 2 ** 31 + 1, true))
    expect(await refusal(more)).toContain('unpacks to more than 2 GB. Save a part of the array.')
  })
  it('data that unpack to more than array and directory say stop there', async () => {
    const zeros = new Uint8Array(50_000_000)
    zeros.set(dots)
    const bomb = zipSync({ 'dots.npy': zeros }, { level: 9 })
    expect(bomb.length).toBeLessThan(60_000)
    expect(await refusal(bomb)).toContain('the header promises 6 numbers of 2 bytes')
    const quiet = changed(bomb, (view) => view.setUint32(entryAt(bomb, 'dots.npy') + 24, dots.length, true))
    expect(await refusal(quiet)).toContain('member “dots.npy” unpacks to more than it says.')
  })
  it('an honest array of zeros is read', async () => {
    const size = 3_000_000
    const zip = zipSync({ 'z.npy': npyFile('|u1', `${size},`, new Uint8Array(size)) }, { level: 9 })
    const [counts] = countsIn(await readGiven(bytesSource(zip, 'z.npz'), COUNTS))
    expect(counts.length).toBe(size)
    expect(counts.every((count) => count === 0)).toBe(true)
  })
})

describe('stopping', () => {
  it('in the middle keeps nothing', async () => {
    // xorshift (Marsaglia 2003): noise that does not deflate.
    let x = 2463534242
    const noise = Uint8Array.from({ length: 400_000 }, () => {
      x ^= x << 13
      x ^= x >>> 17
      x ^= x << 5
      return x >>> 24
    })
    const zip = zipSync({ 'n.npy': npyFile('|u1', `${noise.length},`, noise) })
    expect(deflateSync(noise).length).toBeGreaterThan(200_000)
    const source = bytesSource(zip, 'n.npz')
    let calls = 0
    const hooks = { onProgress: () => {}, shouldStop: () => ++calls > 2 }
    expect(await npzMember(source, 'n.npy', hooks)).toBeNull()
    calls = 0
    const { answer } = await previewSource(source)
    if (answer === null) throw new Error('no answer')
    const outcome = await readSource(source, { ...answer, ...COUNTS } as typeof answer, hooks)
    expect(outcome).toMatchObject({ ok: false, stopped: true })
    expect(outcome).not.toHaveProperty('records')
    expect((await npzMember(source, 'n.npy', QUIET))?.size).toBe(noise.length + 128)
  })
})

describe('names', () => {
  it('in UTF-8 are kept', async () => {
    const zip = zipSync({ 'Kügelchen µ.npy': dots })
    expect((await npzMembers(bytesSource(zip, 'a.npz'))).members.map(({ name }) => name)).toEqual([
      'Kügelchen µ.npy',
    ])
    expect(countsIn(await readGiven(bytesSource(zip, 'a.npz'), COUNTS)).length).toBe(2)
  })
})
