import { quantile } from '../numeric/quantile.ts'
import { seededRandom, splitSeed } from '../numeric/seeded-random.ts'
import { GATE_CLASSES } from '../photons/gate.ts'
import { correctedOnFraction } from '../states/corrected-on-fraction.ts'
import type { ErrorRates } from '../states/spurious-runs.ts'
import type { ThresholdTable } from '../states/threshold-table.ts'
import type { DwellTable } from './dwell-table.ts'

/** The share of time on with its interval; null where it does not exist. */
export interface OnFraction {
  readonly estimate: number | null
  readonly low: number | null
  readonly high: number | null
  readonly unit: ''
}

export interface OnFractionOptions extends ErrorRates {
  /** Two-sided, 0..1. */
  readonly confidence: number
  readonly seed: number | string
  /** Bootstrap samples. */
  readonly samples?: number
}

/** Blocks drawn from; more cycles than this are joined so that the cost does not grow with them. */
const MOST_BLOCKS = 100
/** Fewer blocks than this cannot show their own scatter. */
const FEWEST_BLOCKS = 10

/**
 * On fraction of the dwells the table uses, corrected for the chances of a wrong state, with a bootstrap interval.
 *
 * Blocks are on-and-off cycles (a renewal record repeats itself from cycle to cycle), neighbouring cycles
 * joined beyond 100. Blocks are drawn with replacement (block bootstrap, Kunsch, Ann. Stat. 17, 1217 (1989))
 * and the ratio of on bins to all bins is studentised on the logit scale (bootstrap-t: Hall, Ann. Stat. 16, 927
 * (1988)), with the linearised variance of a ratio. The correction maps the ends of the interval as it maps the
 * estimate; p0 and p1 are taken as known.
 *
 * Tested on 4000 simulated records a case (see the test): 95 % intervals hold the long-run value in 94 % of
 * records with exponential dwells (30 or 200 cycles), 93 % with log-normal dwells (100 cycles) and 94 % with
 * power laws cut well inside the record. No interval can be trusted when one dwell is a large share of the
 * record, nor does the on fraction of a record without a cutoff well inside it settle; it then describes this
 * record only. Null limits with fewer than 10 cycles. Cost: one walk over dwells plus samples x 100.
 */
export function onFraction(table: DwellTable, options: OnFractionOptions): OnFraction {
  const { on, all } = cycles(table)
  let onBins = 0
  let bins = 0
  for (let i = 0; i < on.length; i++) {
    onBins += on[i]
    bins += all[i]
  }
  const corrected = (share: number): number | null =>
    correctedOnFraction(share, options.falseOnPerBin, options.falseOffPerBin)
  const estimate = bins > 0 ? corrected(onBins / bins) : null
  const limits = estimate === null ? null : bootstrapLimits(on, all, options)
  return {
    estimate,
    low: limits === null ? null : corrected(limits.low),
    high: limits === null ? null : corrected(limits.high),
    unit: '',
  }
}

/** On fraction of one row of the threshold table, corrected; null when nothing is usable. No interval: cheap at every drag step. */
export function onFractionOfRow(
  table: ThresholdTable,
  row: number,
  errors: ErrorRates,
  group = 0,
): number | null {
  const [off, on] = table.blocks[group]
  const bins = off.stateBins[row] + on.stateBins[row]
  return bins > 0
    ? correctedOnFraction(on.stateBins[row] / bins, errors.falseOnPerBin, errors.falseOffPerBin)
    : null
}

/** Bins on and bins in all of each block, blocks in time order. */
function cycles(table: DwellTable): { on: Float64Array; all: Float64Array } {
  const code = table.gate === 'all' ? -1 : GATE_CLASSES.indexOf(table.gate)
  const used = (row: number): boolean => code < 0 || table.gateAtStart[row] === code
  let count = 0
  for (let pass = 0, state = 0; pass < table.rows; pass++) {
    if (!used(pass)) continue
    if (count === 0 || (table.state[pass] === 1 && state === 0)) count++
    state = table.state[pass]
  }
  const blocks = Math.min(MOST_BLOCKS, count)
  const on = new Float64Array(blocks)
  const all = new Float64Array(blocks)
  let cycle = -1
  for (let row = 0, state = 0; row < table.rows; row++) {
    if (!used(row)) continue
    if (cycle < 0 || (table.state[row] === 1 && state === 0)) cycle++
    state = table.state[row]
    const block = Math.floor((cycle * blocks) / count)
    all[block] += table.durationBins[row]
    if (state === 1) on[block] += table.durationBins[row]
  }
  return { on, all }
}

/** Logit of the ratio and its linearised standard error; null when the ratio is 0 or 1 or does not vary. */
function logitOfRatio(on: Float64Array, all: Float64Array): { logit: number; error: number } | null {
  let x = 0
  let t = 0
  for (let i = 0; i < on.length; i++) {
    x += on[i]
    t += all[i]
  }
  const ratio = x / t
  let squares = 0
  for (let i = 0; i < on.length; i++) squares += (on[i] - ratio * all[i]) ** 2
  const n = on.length
  const error = Math.sqrt((squares * n) / (n - 1)) / t / (ratio * (1 - ratio))
  return ratio > 0 && ratio < 1 && error > 0 ? { logit: Math.log(ratio / (1 - ratio)), error } : null
}

function bootstrapLimits(
  on: Float64Array,
  all: Float64Array,
  { confidence, seed, samples = 999 }: OnFractionOptions,
): { low: number; high: number } | null {
  const n = on.length
  const centre = n >= FEWEST_BLOCKS ? logitOfRatio(on, all) : null
  if (centre === null) return null
  const random = seededRandom(splitSeed(seed, 'on fraction'))
  const drawnOn = new Float64Array(n)
  const drawnAll = new Float64Array(n)
  const studentised: number[] = []
  for (let b = 0; b < samples; b++) {
    for (let i = 0; i < n; i++) {
      const block = Math.floor(random.uniform() * n)
      drawnOn[i] = on[block]
      drawnAll[i] = all[block]
    }
    const drawn = logitOfRatio(drawnOn, drawnAll)
    if (drawn !== null) studentised.push((drawn.logit - centre.logit) / drawn.error)
  }
  if (studentised.length < samples / 2) return null
  const sorted = Float64Array.from(studentised).sort()
  const tail = (1 - confidence) / 2
  const back = (t: number): number => 1 / (1 + Math.exp(-(centre.logit - t * centre.error)))
  return { low: back(quantile(sorted, 1 - tail)), high: back(quantile(sorted, tail)) }
}
