import { describe, expect, it } from 'vitest'
import { exponential } from '../../../src/core/laws/exponential.ts'
import { power } from '../../../src/core/laws/power.ts'
import { seededRandom } from '../../../src/core/numeric/seeded-random.ts'
import { drivenDwell } from '../../../src/core/simulate/driven-dwell.ts'

const POWER = power.at(power.coordinatesOf([1.5]), 0.01)
const EVERY_SECOND = Float64Array.from({ length: 200 }, (_, i) => i + 1)

describe('drivenDwell', () => {
  it('leaves dwells alone that see no driven time', () => {
    const effect = { hazardFactor: 3, extraPerSecond: 1 }
    expect(drivenDwell(POWER, 0.7, 0.2, EVERY_SECOND, effect, 100)).toBe(0.7)
    expect(drivenDwell(POWER, 7, 0.2, new Float64Array(0), effect, 100)).toBe(7)
  })

  it('returns the drawn length when the effect is none', () => {
    const none = { hazardFactor: 1, extraPerSecond: 0 }
    for (const drawn of [0.9, 1.7, 12.34, 60])
      expect(drivenDwell(POWER, drawn, 0.4, EVERY_SECOND, none, 1000)).toBeCloseTo(drawn, 7)
  })

  it('shortens an exponential dwell by the closed form', () => {
    // Hazard 1/4 per s outside, 2/4 + 0.3 inside; start at 0.5, driven over [1, 2).
    const law = exponential.at(exponential.coordinatesOf([4]), 1e-9)
    const spans = Float64Array.of(1, 2)
    const effect = { hazardFactor: 2, extraPerSecond: 0.3 }
    // Drawn 2 s: cumulative hazard 0.5; 0.125 is used before the edge, the rest at 0.8 per s.
    expect(drivenDwell(law, 2, 0.5, spans, effect, 100)).toBeCloseTo(0.5 + 0.375 / 0.8, 7)
    // Drawn 6 s: 1.5; 0.125 + 0.8 are used by 2 s, the rest at 0.25 per s.
    expect(drivenDwell(law, 6, 0.5, spans, effect, 100)).toBeCloseTo(1.5 + 0.575 / 0.25, 7)
    expect(drivenDwell(law, 600, 0.5, spans, effect, 100)).toBe(Number.POSITIVE_INFINITY)
  })

  it('never ends while driven when the factor is 0', () => {
    const length = drivenDwell(POWER, 1.2, 0.2, EVERY_SECOND, { hazardFactor: 0, extraPerSecond: 0 }, 1000)
    expect((0.2 + length) % 2).toBeLessThan(1)
  })

  it('follows the hazard of a power law stepped in small times', () => {
    // Slow reference: leave in [age, age + h) with chance (a / age x factor + extra) h. Share of dwells gone by 1.5 s.
    const effect = { hazardFactor: 1.6, extraPerSecond: 0.4 }
    let lnStay = 0
    const h = 1e-4
    for (let age = 0.01; age < 1.5; age += h) {
      const middle = age + h / 2
      const driven = Math.floor(middle + 0.6) % 2 === 1
      lnStay -= h * (driven ? (1.6 * 0.5) / middle + 0.4 : 0.5 / middle)
    }
    const gone = 1 - Math.exp(lnStay)
    const random = seededRandom('driven dwell')
    const n = 20_000
    let count = 0
    for (let i = 0; i < n; i++) {
      const drawn = power.sample(random, power.coordinatesOf([1.5]), 0.01)
      if (drivenDwell(POWER, drawn, 0.6, EVERY_SECOND, effect, 1000) < 1.5) count++
    }
    // 4.5 standard errors: false alarm 7e-6.
    expect(Math.abs(count / n - gone)).toBeLessThan(4.5 * Math.sqrt((gone * (1 - gone)) / n))
  })
})
