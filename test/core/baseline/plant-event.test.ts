import { describe, expect, it } from 'vitest'
import { fitBaseline } from '../../../src/core/baseline/fit-baseline.ts'
import { plantEvent } from '../../../src/core/baseline/plant-event.ts'
import { DEFAULT_STIFFNESS_SECONDS } from '../../../src/core/baseline/stiffness.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { telegraph, traceOf } from './telegraph.ts'

const choices = {
  method: 'drifting' as const,
  stiffnessSeconds: DEFAULT_STIFFNESS_SECONDS,
  excludedSeconds: [],
}
const made = telegraph({
  seconds: 300,
  binSeconds: 0.01,
  offCps: (t) => 1000 * (1 + 0.5 * Math.sin(t / 50)),
  signalCps: 9000,
  tauSeconds: 2,
  seed: 6,
})
const baseline = fitBaseline(made.trace, choices, null)
const wish = { atSeconds: null, durationSeconds: 30, countsAboveBaseline: 45 }

describe('plantEvent', () => {
  it('finds 30 s whole after refitting, in the middle of the longest off stretch', () => {
    const counts = made.trace.counts.slice()
    const planted = plantEvent(made.trace, baseline, choices, null, wish, seededRandom('plant'))
    expect(planted).not.toBeNull()
    if (planted === null) return
    expect(planted.plantedSeconds).toBeCloseTo(30, 9)
    // 3000 bins of mean about 100 against 45 above about 10: a bin below has probability below 1e-4; seeded.
    expect(planted.survivingShare).toBeGreaterThan(0.95)
    expect(planted.message).toMatch(
      /^Of an on-time of 30 s planted at .* survive in one piece: the baseline does not eat it\.$/,
    )
    expect(made.trace.counts).toEqual(counts)
    // The longest off stretch, found the plain way.
    let best = { length: 0, end: 0 }
    for (let i = 0, run = 0; i < counts.length; i++) {
      const off = counts[i] - made.baseline[i] < 45
      run = off ? run + 1 : 0
      if (run > best.length) best = { length: run, end: i + 1 }
    }
    const middle = (best.end - best.length / 2) * 0.01
    expect(Math.abs(planted.startSeconds + 15 - middle)).toBeLessThan(0.5)
  })

  it('changes only the planted bins, to the on level', () => {
    const planted = plantEvent(
      made.trace,
      baseline,
      choices,
      null,
      { ...wish, atSeconds: 100 },
      seededRandom(1),
    )
    if (planted === null) throw new Error('nothing planted')
    expect(planted.startSeconds).toBe(100)
    let inside = 0
    for (let i = 0; i < made.trace.counts.length; i++) {
      if (i >= 10000 && i < 13000) inside += planted.trace.counts[i] - made.baseline[i]
      else if (planted.trace.counts[i] !== made.trace.counts[i]) throw new Error(`bin ${i} changed`)
    }
    // Mean of 3000 Poisson counts near 100: 0.2 is one sd; the baseline adds up to a few counts.
    expect(Math.abs(inside / 3000 - baseline.onAboveCps * 0.01)).toBeLessThan(6)
    expect(plantEvent(made.trace, baseline, choices, null, wish, seededRandom(2))?.trace.counts).toEqual(
      plantEvent(made.trace, baseline, choices, null, wish, seededRandom(2))?.trace.counts,
    )
  })

  it('keeps to the record, and to usable bins', () => {
    const late = plantEvent(made.trace, baseline, choices, null, { ...wish, atSeconds: 295 }, seededRandom(3))
    expect(late?.startSeconds).toBeCloseTo(270, 9)
    const whole = plantEvent(
      made.trace,
      baseline,
      choices,
      null,
      { ...wish, durationSeconds: 1e6 },
      seededRandom(3),
    )
    expect(whole?.startSeconds).toBe(0)
    expect(whole?.plantedSeconds).toBeCloseTo(300, 9)
    const unusable = new Uint8Array(made.trace.counts.length).fill(1, 10000, 11000)
    const cut = plantEvent(
      made.trace,
      baseline,
      choices,
      unusable,
      { ...wish, atSeconds: 100 },
      seededRandom(4),
    )
    expect(cut?.survivingSeconds).toBeLessThan(20.01)
  })

  it('tells an eaten event from one split by noise', () => {
    // A threshold in the middle of the on level splits runs whatever the baseline.
    const split = plantEvent(
      made.trace,
      baseline,
      choices,
      null,
      { ...wish, countsAboveBaseline: 90 },
      seededRandom(5),
    )
    expect(split?.survivingShare).toBeLessThan(0.2)
    expect(split?.message).toMatch(/split by shot noise at this threshold, not eaten/)
  })

  it('plants nothing where there is no signal, no length or no off bin', () => {
    const dark = traceOf(new Uint16Array(1000))
    expect(
      plantEvent(dark, fitBaseline(dark, choices, null), choices, null, wish, seededRandom(1)),
    ).toBeNull()
    const none = { ...wish, durationSeconds: 0.004 }
    expect(plantEvent(made.trace, baseline, choices, null, none, seededRandom(1))).toBeNull()
    const never = { ...wish, countsAboveBaseline: -1000 }
    expect(plantEvent(made.trace, baseline, choices, null, never, seededRandom(1))).toBeNull()
  })
})
