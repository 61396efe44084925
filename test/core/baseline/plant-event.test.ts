import { describe, expect, it } from 'vitest'
import { fitBaseline } from '../../../src/core/baseline/fit-baseline.ts'
import { plantEvent, plantInto } from '../../../src/core/baseline/plant-event.ts'
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
const wish = (seed: number | string) => ({
  atSeconds: null,
  durationSeconds: 30,
  thresholdAboveBaseline: 45,
  random: seededRandom(seed),
})

describe('plantEvent', () => {
  it('finds 30 s whole after refitting, in the middle of the longest off stretch', () => {
    const counts = made.trace.counts.slice()
    const planted = plantEvent(made.trace, baseline, choices, wish('plant'))
    expect(planted.plantedSeconds).toBeCloseTo(30, 9)
    // 3000 bins of mean about 100 against 45 above about 10: a bin below has probability below 1e-5; seeded.
    expect(planted.survivingShare).toBeGreaterThan(0.95)
    expect(planted.message).toMatch(
      /^Of an on-time of 30 s planted at .* survive in one piece: the baseline does not eat it\.$/,
    )
    expect(made.trace.counts).toEqual(counts)
    // The longest off stretch, found the plain way.
    let best = { length: 0, end: 0 }
    for (let i = 0, run = 0; i < counts.length; i++) {
      run = counts[i] - made.baseline[i] < 45 ? run + 1 : 0
      if (run > best.length) best = { length: run, end: i + 1 }
    }
    const middle = (best.end - best.length / 2) * 0.01
    expect(Math.abs(planted.startSeconds + 15 - middle)).toBeLessThan(0.5)
    expect(plantEvent(made.trace, baseline, choices, wish('plant'))).toEqual(planted)
  })

  it('holds the threshold still: an event too weak to reach it does not survive', () => {
    const weak = { ...baseline, onAboveCps: 500 }
    expect(plantEvent(made.trace, weak, choices, wish(7)).survivingShare).toBeLessThan(0.1)
  })

  it('keeps to the record, and to usable bins', () => {
    expect(
      plantEvent(made.trace, baseline, choices, { ...wish(3), atSeconds: 295 }).startSeconds,
    ).toBeCloseTo(270, 9)
    const whole = plantEvent(made.trace, baseline, choices, { ...wish(3), durationSeconds: 1e6 })
    expect(whole.startSeconds).toBe(0)
    expect(whole.plantedSeconds).toBeCloseTo(300, 9)
    const excluding = { ...choices, excludedSeconds: [[100, 110]] as const }
    const cut = plantEvent(made.trace, baseline, excluding, { ...wish(4), atSeconds: 100 })
    expect(cut.plantedSeconds).toBeCloseTo(30, 9)
    expect(cut.survivingSeconds).toBeLessThan(20.01)
  })

  it('tells an eaten event from one split by noise', () => {
    // A threshold in the middle of the on level splits runs whatever the baseline.
    const split = plantEvent(made.trace, baseline, choices, { ...wish(5), thresholdAboveBaseline: 90 })
    expect(split.survivingShare).toBeLessThan(0.2)
    expect(split.message).toMatch(/split by shot noise at this threshold, not eaten/)
  })

  it('plants nothing, and says why, where there is no signal, no length or no off bin', () => {
    const dark = traceOf(new Uint16Array(1000))
    const nothing = [
      plantEvent(dark, fitBaseline(dark, choices, null), choices, wish(1)),
      plantEvent(made.trace, baseline, choices, { ...wish(1), durationSeconds: 0.004 }),
      plantEvent(made.trace, baseline, choices, { ...wish(1), durationSeconds: Number.NaN }),
      plantEvent(made.trace, baseline, choices, { ...wish(1), thresholdAboveBaseline: -1000 }),
    ]
    for (const planted of nothing) {
      expect(planted.plantedSeconds).toBe(0)
      expect(planted.message).toMatch(/^Nothing was planted\. /)
    }
  })
})

describe('plantInto', () => {
  it('changes only the planted bins, to the on level', () => {
    const planted = plantInto(made.trace, made.baseline, 10000, 3000, 90, seededRandom(1))
    let excess = 0
    let changedOutside = 0
    for (let i = 0; i < made.trace.counts.length; i++)
      if (i >= 10000 && i < 13000) excess += planted.counts[i] - made.baseline[i]
      else if (planted.counts[i] !== made.trace.counts[i]) changedOutside++
    expect(changedOutside).toBe(0)
    // Mean of 3000 Poisson counts near 100: one sd is 0.18; 5 sd.
    expect(Math.abs(excess / 3000 - 90)).toBeLessThan(0.9)
  })
})
