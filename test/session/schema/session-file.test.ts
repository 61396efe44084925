import { createHash } from 'node:crypto'
import fc from 'fast-check'
import { strToU8, unzipSync, zipSync } from 'fflate'
import { describe, expect, it } from 'vitest'
import { newSession } from '../../../src/session/schema/session.ts'
import { readBundle, writeBundle } from '../../../src/session/schema/session-file.ts'
import { anySession } from '../any-session.ts'

const hash = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex')
const LARGEST = 1 << 26
const session = newSession('s', 'one', '2031-01-01T00:00:00.000Z', [])
const json = strToU8(JSON.stringify(session))

function bundleOf(...files: readonly Uint8Array[]): Uint8Array {
  return writeBundle({ session, raw: new Map(files.map((bytes) => [hash(bytes), bytes])) })
}

function problemOf(bytes: Uint8Array, largest = LARGEST): string {
  const read = readBundle(bytes, largest, hash)
  return read.ok ? '' : read.problem
}

describe('session file', () => {
  it('gives any session and its raw files back', () => {
    fc.assert(
      fc.property(
        anySession,
        fc.array(fc.uint8Array({ maxLength: 3000, size: 'max' }), { maxLength: 5 }),
        (one, files) => {
          const raw = new Map(files.map((bytes) => [hash(bytes), bytes]))
          const read = readBundle(writeBundle({ session: one, raw }), LARGEST, hash)
          expect(read.ok).toBe(true)
          if (!read.ok) return
          expect(read.bundle.session).toEqual(JSON.parse(JSON.stringify(one)))
          expect(read.bundle.raw).toEqual(raw)
        },
      ),
      { seed: 71, numRuns: 60 },
    )
  })

  it('gives back raw data of several reading steps', () => {
    const big = Uint8Array.from({ length: 3_500_000 }, (_, index) => (index * 2654435761) >>> 24)
    const read = readBundle(bundleOf(big, strToU8('small')), LARGEST, hash)
    expect(read.ok && read.bundle.raw.get(hash(big))?.length).toBe(big.length)
  })

  it('is an ordinary ZIP: session.json and raw files as they came', () => {
    const record = strToU8('time,counts\n0,1\n')
    const members = unzipSync(bundleOf(record))
    expect(Object.keys(members).sort()).toEqual([`raw/${hash(record)}`, 'session.json'])
    expect(members[`raw/${hash(record)}`]).toEqual(record)
  })

  it('refuses raw data that are not what their name says', () => {
    const name = hash(strToU8('what was measured'))
    const forged = zipSync({ 'session.json': json, [`raw/${name}`]: strToU8('what was made up') })
    expect(problemOf(forged)).toContain(name.slice(0, 12))
  })

  it.each([
    '../outside',
    'raw/short',
    `raw/${'A'.repeat(64)}`,
    'Session.json',
    `raw/${'0'.repeat(64)}/x`,
    'raw/',
  ])('refuses the foreign entry %s', (name) => {
    expect(problemOf(zipSync({ 'session.json': json, [name]: new Uint8Array(3) }))).toContain(name)
  })

  it('refuses an archive that unpacks to more than it may, before it has unpacked it', () => {
    const bomb = zipSync({
      'session.json': json,
      [`raw/${'0'.repeat(64)}`]: [new Uint8Array(64 << 20), { level: 9 }],
    })
    expect(bomb.length).toBeLessThan(200_000)
    let hashed = 0
    const read = readBundle(bomb, 1 << 20, (bytes) => {
      hashed += bytes.length
      return hash(bytes)
    })
    expect(read.ok ? '' : read.problem).toContain('more than it may')
    expect(hashed).toBe(0)
  })

  it('refuses a session.json that unpacks beyond its own limit', () => {
    const bomb = zipSync({ 'session.json': [new Uint8Array(65 << 20), { level: 9 }] })
    expect(problemOf(bomb, 1 << 30)).toContain('more than it may')
  })

  it.each([
    ['nothing', new Uint8Array(0)],
    ['text', strToU8('time,counts\n0,1\n')],
    ['a ZIP of something else', zipSync({})],
  ])('says that %s is not a session file', (_, bytes) => {
    expect(problemOf(bytes)).toMatch(/not a session file|damaged/)
  })

  it('says that session.json is not JSON, or not a session', () => {
    expect(problemOf(zipSync({ 'session.json': strToU8('{') }))).toContain('not JSON')
    expect(problemOf(zipSync({ 'session.json': strToU8('[]') }))).toContain('JSON object')
    const newer = strToU8(JSON.stringify({ ...session, version: 99 }))
    expect(problemOf(zipSync({ 'session.json': newer }))).toContain('newer version')
  })

  it('refuses a file cut short at any place', () => {
    const whole = bundleOf(Uint8Array.from({ length: 500 }, (_, index) => index % 251))
    const from = whole.length - 22 - 46 * 2 - 'session.json'.length - 'raw/'.length - 64
    for (let length = 0; length < from; length += 7) {
      const read = readBundle(whole.subarray(0, length), LARGEST, hash)
      // What was cut off after the session alone still reads as a session without data.
      if (read.ok) expect([...read.bundle.raw.values()].every((bytes) => bytes.length === 500)).toBe(true)
      else expect(read.problem.length).toBeGreaterThan(20)
    }
  })

  it('with bytes changed anywhere gives a problem, or data whose fingerprints are right', () => {
    const whole = bundleOf(strToU8('0\n1\n2\n'.repeat(200)))
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.nat(whole.length - 1), fc.nat(255)), { minLength: 1, maxLength: 6 }),
        (changes) => {
          const bytes = whole.slice()
          for (const [at, value] of changes) bytes[at] = value
          const read = readBundle(bytes, LARGEST, hash)
          if (!read.ok) {
            expect(read.problem.length).toBeGreaterThan(20)
            return
          }
          for (const [sha256, content] of read.bundle.raw) expect(hash(content)).toBe(sha256)
        },
      ),
      { seed: 72, numRuns: 3000 },
    )
  })
})
