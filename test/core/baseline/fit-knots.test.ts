import { describe, expect, it } from 'vitest'
import { fitKnots } from '../../../src/core/baseline/fit-knots.ts'
import { DEFAULT_STIFFNESS_SECONDS, knotPlan, penaltyWeights } from '../../../src/core/baseline/stiffness.ts'
import { poissonCount, uniformSource } from './telegraph.ts'

type Matrix = number[][]

/** Inverse of a small matrix by Gauss-Jordan elimination with row exchange. */
function inverseOf(matrix: Matrix): Matrix {
  const n = matrix.length
  const rows = matrix.map((row, i) => [...row, ...Array.from({ length: n }, (_, j) => (i === j ? 1 : 0))])
  for (let c = 0; c < n; c++) {
    let best = c
    for (let r = c + 1; r < n; r++) if (Math.abs(rows[r][c]) > Math.abs(rows[best][c])) best = r
    ;[rows[c], rows[best]] = [rows[best], rows[c]]
    const pivot = rows[c][c]
    rows[c] = rows[c].map((v) => v / pivot)
    for (let r = 0; r < n; r++) {
      if (r === c) continue
      const factor = rows[r][c]
      rows[r] = rows[r].map((v, k) => v - factor * rows[c][k])
    }
  }
  return rows.map((row) => row.slice(n))
}

/** The same maximum with full matrices: D written out, D'D multiplied out, Newton steps by a full inverse. */
function denseFit(
  W: number[],
  Y: number[],
  bend: number,
  pull: number,
  lnOff: number,
): { eta: number[]; variance: number[] } {
  const n = W.length
  const D = Array.from({ length: n - 2 }, (_, i) =>
    Array.from({ length: n }, (_, j) => (j === i || j === i + 2 ? 1 : j === i + 1 ? -2 : 0)),
  )
  const penalty = Array.from({ length: n }, (_, i) =>
    Array.from(
      { length: n },
      (_, j) => bend * D.reduce((sum, row) => sum + row[i] * row[j], 0) + (i === j ? pull : 0),
    ),
  )
  let eta = Array.from({ length: n }, () => lnOff)
  let inverse: Matrix = []
  for (let step = 0; step < 400; step++) {
    const hessian = penalty.map((row, i) => row.map((v, j) => v + (i === j ? Math.exp(eta[i]) * W[i] : 0)))
    inverse = inverseOf(hessian)
    const gradient = eta.map(
      (_, i) =>
        Y[i] - Math.exp(eta[i]) * W[i] - penalty[i].reduce((sum, v, j) => sum + v * (eta[j] - lnOff), 0),
    )
    // Half steps: slow, but no overshoot to guard against.
    eta = eta.map((v, i) => v + 0.5 * inverse[i].reduce((sum, g, j) => sum + g * gradient[j], 0))
  }
  return { eta, variance: inverse.map((row, i) => row[i]) }
}

const record = (seed: number, n: number): { W: number[]; Y: number[] } => {
  const uniform = uniformSource(seed)
  const W = Array.from({ length: n }, () => (uniform() < 0.3 ? 0 : 100 * uniform()))
  return { W, Y: W.map((w, j) => poissonCount(uniform, w * 10 * (1 + 0.5 * Math.sin(j / 3)))) }
}

describe('fitKnots', () => {
  it.each([
    [1, 3, 300, 0.02],
    [2, 12, 300, 0.02],
    [3, 25, 5, 0.1],
    [4, 40, 3000, 0.02],
  ])('equals full matrices (record %d, %d knots, bend %d, pull %d)', (seed, n, bend, pull) => {
    const { W, Y } = record(seed, n)
    const slow = denseFit(W, Y, bend, pull, Math.log(10))
    const start = new Float64Array(n).fill(Math.log(3))
    const fast = fitKnots(Float64Array.from(W), Float64Array.from(Y), start, bend, pull, Math.log(10))
    fast.lnBaseline.forEach((eta, j) => expect(eta).toBeCloseTo(slow.eta[j], 7))
    fast.variance.forEach((v, j) => expect(v / slow.variance[j]).toBeCloseTo(1, 5))
  })

  it('is counts over exposure at every knot without penalty', () => {
    const Y = Float64Array.from([50, 900, 3, 77, 12])
    const W = Float64Array.from([10, 30, 1, 7, 2])
    const { lnBaseline, variance } = fitKnots(W, Y, new Float64Array(5), 0, 1e-12, 0)
    lnBaseline.forEach((eta, j) => expect(Math.exp(eta)).toBeCloseTo(Y[j] / W[j], 9))
    variance.forEach((v, j) => expect(v).toBeCloseTo(1 / Y[j], 9))
  })

  it('is a straight line in ln rate at infinite stiffness, and the constant when the record has no slope', () => {
    const n = 60
    const { bend, pull } = penaltyWeights(Number.POSITIVE_INFINITY, 1, 1000)
    const W = new Float64Array(n).fill(100)
    const sloped = W.map((w, j) => w * 10 * Math.exp(0.01 * j))
    const line = fitKnots(W, sloped, new Float64Array(n).fill(2), bend, pull, Math.log(13))
    line.lnBaseline.forEach((eta, j) => expect(eta).toBeCloseTo(Math.log(10) + 0.01 * j, 4))
    // Counts the same from either end have no slope: the constant, total counts over total exposure.
    const wavy = W.map((w, j) => w * (10 + 4 * Math.sin(Math.abs(j - (n - 1) / 2))))
    const level = wavy.reduce((a, b) => a + b, 0) / W.reduce((a, b) => a + b, 0)
    const flat = fitKnots(W, wavy, new Float64Array(n).fill(2), bend, pull, Math.log(level))
    flat.lnBaseline.forEach((eta) => expect(Math.exp(eta) / level).toBeCloseTo(1, 4))
  })

  it('starts anywhere and stays finite without counts', () => {
    const n = 30
    const W = new Float64Array(n).fill(100)
    for (const from of [-15, 0, 9]) {
      const found = fitKnots(
        W,
        W.map((w) => 10 * w),
        new Float64Array(n).fill(from),
        300,
        0.02,
        2,
      )
      found.lnBaseline.forEach((eta) => expect(eta).toBeCloseTo(Math.log(10), 3))
    }
    const nothing = fitKnots(new Float64Array(n), new Float64Array(n), new Float64Array(n), 300, 0.02, 2)
    nothing.lnBaseline.forEach((eta) => expect(eta).toBeCloseTo(2, 6))
    expect(nothing.variance.every((v) => v > 1 && Number.isFinite(v))).toBe(true)
  })

  it('is finite for one and for two knots', () => {
    for (const n of [1, 2]) {
      const found = fitKnots(
        new Float64Array(n).fill(4),
        new Float64Array(n).fill(8),
        new Float64Array(n),
        300,
        1e-9,
        0,
      )
      found.lnBaseline.forEach((eta) => expect(Math.exp(eta)).toBeCloseTo(2, 6))
      found.variance.forEach((v) => expect(v).toBeCloseTo(1 / 8, 6))
    }
  })
})

describe('stiffness', () => {
  it('gives mu = 300 and rho = 0.02 at 1 s knots on 1 kcps by default', () => {
    const plan = knotPlan(60000, 0.01, DEFAULT_STIFFNESS_SECONDS)
    expect(plan).toEqual({ binsPerKnot: 100, knots: 600, knotSeconds: 1 })
    const { bend, pull } = penaltyWeights(DEFAULT_STIFFNESS_SECONDS, 1, 1000)
    expect(Math.abs(bend / 300 - 1)).toBeLessThan(0.001)
    expect(pull).toBeCloseTo(0.02, 12)
  })

  it.each([0.25, 0.5, 1, 2])(
    'halves a wave whose period is the stiffness, whatever the knot spacing (%d s)',
    (knotSeconds) => {
      const stiffness = 24
      const off = 1000
      const n = Math.round(480 / knotSeconds)
      const amplitudeAt = (period: number): number => {
        const wave = (j: number) => Math.sin((2 * Math.PI * j * knotSeconds) / period)
        const W = new Float64Array(n).fill(knotSeconds)
        const Y = W.map((w, j) => w * off * (1 + 0.01 * wave(j)))
        const { bend, pull } = penaltyWeights(stiffness, knotSeconds, off)
        const { lnBaseline } = fitKnots(
          W,
          Y,
          new Float64Array(n).fill(Math.log(off)),
          bend,
          pull,
          Math.log(off),
        )
        let sum = 0
        for (let j = n >> 2; j < (3 * n) >> 2; j++) sum += (lnBaseline[j] - Math.log(off)) * wave(j)
        return sum / (n / 4) / 0.01
      }
      // Second differences of a wave fall short of derivatives by (w h)^2 / 6 of themselves, 4.5 % at 2 s knots.
      expect(Math.abs(amplitudeAt(24) - 0.5)).toBeLessThan(0.015)
      expect(Math.abs(amplitudeAt(48) - 16 / 17)).toBeLessThan(0.015)
      expect(Math.abs(amplitudeAt(12) - 1 / 17)).toBeLessThan(0.015)
    },
  )

  it('plans whole bins, at least ten a knot and four knots, or none', () => {
    expect(knotPlan(39, 0.01, 5)).toBeNull()
    expect(knotPlan(40, 0.01, 5)).toEqual({ binsPerKnot: 10, knots: 4, knotSeconds: 0.1 })
    expect(knotPlan(1000, 1, 4.65)?.binsPerKnot).toBe(10)
    expect(knotPlan(60000, 0.01, Number.POSITIVE_INFINITY)?.knots).toBe(4)
    expect(knotPlan(1e7, 1e-3, 0.1)?.knots).toBeLessThanOrEqual(20000)
  })
})
