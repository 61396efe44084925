import { describe, expect, it } from 'vitest'
import { binIn, textShape, unitIn } from '../../../src/core/read/text-shape.ts'

describe('unitIn', () => {
  it('finds the unit at the end of a name', () => {
    const CASES = [
      ['time (ms)', 'ms'],
      ['t/s', 's'],
      ['Time [µs]', 'us'],
      ['Time [μs]', 'us'],
      ['time_ns', 'ns'],
      ['time, seconds', 's'],
      ['time in milliseconds', 'ms'],
      ['arrival {ticks}', 'ticks'],
      ['time', null],
      ['dots', null],
      ['counts', null],
      ['class', null],
    ] as const
    for (const [name, unit] of CASES) expect([name, unitIn(name)]).toEqual([name, unit])
  })
})

describe('binIn', () => {
  it('finds a width with its unit', () => {
    expect(binIn('counts per 10 ms')).toBeCloseTo(0.01, 15)
    expect(binIn('counts/bin (2,5 ms)')).toBeCloseTo(0.0025, 15)
    expect(binIn('n in 100us')).toBeCloseTo(1e-4, 15)
    expect(binIn('counts')).toBeNull()
    expect(binIn('dot 12')).toBeNull()
  })
})

describe('textShape', () => {
  const rolesOf = (text: string): readonly string[] | undefined => textShape(text)?.answer.columns
  it('takes roles from names in any order', () => {
    expect(rolesOf('dot,t/s,field\n5,0,1\n6,1,0\n')).toEqual(['counts', 'time', 'gate'])
    expect(rolesOf('time_s,rate (Hz),signal (kcps)\n0,1,2\n1,2,3\n')).toEqual([
      'time',
      'rate-cps',
      'rate-kcps',
    ])
    expect(rolesOf('macro time\n5\n6\n')).toEqual(['arrival'])
  })
  it('without names: even first column is time, whole numbers are counts, others rates', () => {
    expect(rolesOf('0,5,0.5\n1,7,1.5\n2,6,2\n')).toEqual(['time', 'counts', 'rate-cps'])
    expect(rolesOf('9,5\n3,7\n8,6\n')).toEqual(['counts', 'counts'])
    expect(rolesOf('9\n3\n8\n')).toEqual(['counts'])
    expect(rolesOf('9\n13\n13\n18\n')).toEqual(['arrival'])
  })
  it('is not misled by one bad row', () => {
    const rows = Array.from({ length: 30 }, (_, i) => `${i},${i % 7}`)
    rows[12] = 'oops'
    expect(rolesOf(rows.join('\n'))).toEqual(['time', 'counts'])
  })
  it('keeps names short enough to be remembered', () => {
    const shape = textShape(`time_s,${'x'.repeat(9000)}\n0,1\n1,2\n`)
    expect(shape?.answer.names[1].length).toBe(200)
  })
  it('many short rows', () => {
    expect(
      rolesOf(Array.from({ length: 131_072 }, (_, i) => String(Math.floor(i / 20_000))).join('\n')),
    ).toEqual(['arrival'])
  })
  it('is null without numbers', () => {
    for (const text of ['', '\n\n', '# only\n', 'a,b\n', '--\n']) expect(textShape(text)).toBeNull()
  })
})
