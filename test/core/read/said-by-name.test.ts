import { describe, expect, it } from 'vitest'
import { binIn, isUnitWord, roleIn, tickIn, unitIn } from '../../../src/core/read/said-by-name.ts'

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
      ['Time(msec)', 'ms'],
      ['t / usec', 'us'],
      ['t [sec]', 's'],
      ['time (min)', null],
      ['time (ps)', null],
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

describe('tickIn', () => {
  it('finds units outside the list', () => {
    expect([tickIn('time (min)'), tickIn('arrival / ps'), tickIn('t_h'), tickIn('time (s)')]).toEqual([
      60,
      1e-12,
      3600,
      null,
    ])
  })
})

describe('roleIn', () => {
  it('tells counts, counts per second and kilocounts per second apart', () => {
    const CASES = [
      ['counts', 'counts'],
      ['counts/bin (5 ms)', 'counts'],
      ['counts / 10 ms', 'counts'],
      ['counts per sample', 'counts'],
      ['counts/s', 'rate-cps'],
      ['counts per seconds', 'rate-cps'],
      ['cts/s', 'rate-cps'],
      ['counts [1/s]', 'rate-cps'],
      ['signal (s^-1)', 'rate-cps'],
      ['rate0', 'rate-cps'],
      ['count_rate', 'rate-cps'],
      ['countrate (kHz)', 'rate-kcps'],
      ['kcounts/s', 'rate-kcps'],
      ['kcts/s', 'rate-kcps'],
      ['counts/ms', 'rate-kcps'],
      ['integrated counts', 'counts'],
      ['x', null],
    ] as const
    for (const [name, role] of CASES) expect([name, roleIn(name)]).toEqual([name, role])
  })
})

describe('isUnitWord', () => {
  it('knows fields that are units only', () => {
    for (const word of ['s', '[ms]', '(µs)', 'cps', 'kHz', 'counts', '1/s', 'a.u.'])
      expect([word, isUnitWord(word)]).toEqual([word, true])
    for (const word of ['', 'time', 'dot 1', 's p', '12'])
      expect([word, isUnitWord(word)]).toEqual([word, false])
  })
})
