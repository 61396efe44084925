import { describe, expect, it } from 'vitest'
import { textShape } from '../../../src/core/read/text-shape.ts'

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
  it('a running number in front of the times is not the time', () => {
    expect(rolesOf('index,time (s),n\n0,0,5\n1,0.01,7\n2,0.02,6\n')).toEqual(['ignore', 'time', 'counts'])
    expect(rolesOf('1,0,5\n2,0.01,7\n3,0.02,6\n')).toEqual(['ignore', 'time', 'counts'])
  })
  it('takes one column of times; time stamps of even steps beside counts are those of bins', () => {
    expect(rolesOf('arrival 1 (us),arrival 2 (us)\n1,2\n5,9\n')).toEqual(['arrival', 'ignore'])
    expect(rolesOf('time A,dot A,time B,dot B\n0,5,0,1\n1,6,1,2\n')).toEqual([
      'time',
      'counts',
      'ignore',
      'counts',
    ])
    expect(rolesOf('timestamp (s),counts\n0,5\n0.1,6\n0.2,4\n')).toEqual(['time', 'counts'])
    expect(rolesOf('timestamp (s),counts\n0,5\n0.1,6\n0.9,4\n')).toEqual(['arrival', 'counts'])
  })
  it('a gate by name is a gate only if it holds 0 and 1', () => {
    expect(rolesOf('t/s,n,field (V)\n0,1,0\n1,2,1000\n')).toEqual(['time', 'counts', 'ignore'])
    expect(rolesOf('t/s,beam counts\n0,1\n1,2\n')).toEqual(['time', 'counts'])
  })
  it('joins a line of units to the names above it', () => {
    const shape = textShape('Time\tSignal\tDot\n[ms]\tkcps\t\n0\t1\t2\n10\t2\t3\n')
    expect(shape?.header).toEqual(['Time (ms)', 'Signal (kcps)', 'Dot'])
    expect(shape?.answer).toMatchObject({
      headerLines: 2,
      timeUnit: 'ms',
      columns: ['time', 'rate-kcps', 'counts'],
    })
  })
  it('finds names below a preamble with numbers of another width', () => {
    const shape = textShape('10\n20\ntime (s)\tdot\n0\t5\n1\t6\n2\t4\n')
    expect(shape?.answer).toMatchObject({ headerLines: 3, columns: ['time', 'counts'] })
    // Rows of the table's own width are data, whatever stands below them.
    expect(textShape('0,1\n1,2\nx,y\n2,3\n3,4\n')?.answer.headerLines).toBe(0)
    expect(textShape('0,1\n1,2,3\n2,3\n3,4\n')?.answer.headerLines).toBe(0)
  })
  it('units that are not in the list become ticks of their length', () => {
    expect(textShape('time (min),n\n0,1\n0.5,2\n')?.answer).toMatchObject({
      timeUnit: 'ticks',
      tickSeconds: 60,
    })
    expect(textShape('arrival (ps)\n1\n5\n9\n')?.answer).toMatchObject({
      timeUnit: 'ticks',
      tickSeconds: 1e-12,
    })
    expect(textShape('arrival (min)\n1\n5.5\n9\n')?.answer).toMatchObject({
      timeUnit: null,
      tickSeconds: null,
    })
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
