import type { Baseline } from '../../src/core/baseline/baseline.ts'
import { dwellTableOf } from '../../src/core/dwells/dwell-table-of.ts'
import { sampleFromDwells } from '../../src/core/dwells/dwell-sample-of.ts'
import { onFraction } from '../../src/core/dwells/on-fraction.ts'
import type { DwellTable } from '../../src/core/dwells/dwell-table.ts'
import type { Fit } from '../../src/core/fits/fit.ts'
import { fitLaw } from '../../src/core/fits/fit-law.ts'
import { shortestFitted } from '../../src/core/fits/shortest-fitted.ts'
import { lawNamed } from '../../src/core/laws/all-laws.ts'
import { benchNumbers } from '../../src/core/pipeline/bench-numbers.ts'
import type { ThresholdProduct } from '../../src/core/pipeline/analysis-products.ts'
import { prepareTrace } from '../../src/core/pipeline/prepare-trace.ts'
import { rowOf, studyThresholds, thresholdOf } from '../../src/core/pipeline/study-thresholds.ts'
import { DEFAULT_RECIPE } from '../../src/core/recipe/default-recipe.ts'
import type { Recipe } from '../../src/core/recipe/recipe.ts'
import { simulateTrace } from '../../src/core/simulate/simulate-trace.ts'
import type { Truth } from '../../src/core/simulate/truth.ts'
import { edgeShare } from '../../src/core/states/edge-share.ts'
import type { LevelledTrace } from '../../src/core/states/levels.ts'
import { spuriousSafeBins } from '../../src/core/states/spurious-runs.ts'
import { statesAt } from '../../src/core/states/states-at.ts'
import { cramerRao, informationTable, type InformationTable } from './cramer-rao.ts'
import type { Scenario } from './scenario.ts'
import { dwellsOneByOne, occupancyTrace } from './noise-free.ts'

/**
 * What is analysed. `counts`: the record as the app sees it. `occupancy`: the same switches binned without shot noise
 * at the true levels, so that only bins and merging act. `dwells`: each true dwell rounded by itself, none merged.
 */
export const STAGES = ['counts', 'occupancy', 'dwells'] as const
export type Stage = (typeof STAGES)[number]

/** One parameter in one record. */
export interface Estimated {
  readonly estimate: number | null
  readonly low: number | null
  readonly high: number | null
  /** Cramér-Rao standard deviation of the free coordinate (alpha, or kappa for tau); null without information. */
  readonly bound: number | null
}

export interface StateOutcome {
  readonly status: Fit['status']
  readonly shortestBins: number
  readonly complete: number
  readonly censored: number
  readonly alpha: Estimated
  /** As kappa = 1 / tau, 1/s, where it is well behaved; null for laws without cutoff. */
  readonly kappa: Estimated | null
}

export interface RecordOutcome {
  readonly seed: string
  /** Whether the recipe found two levels. */
  readonly levels: Baseline['status']
  readonly baseline: Baseline['method']
  readonly threshold: number
  readonly falseOnPerBin: number
  readonly falseOffPerBin: number
  readonly off: StateOutcome
  readonly on: StateOutcome
  readonly onFraction: number | null
  readonly trueOnFraction: number
  readonly longestOnSeconds: number
  readonly trueLongestOnSeconds: number
  /** Keys of the flags shown; null when they were not asked for. */
  readonly flags: readonly string[] | null
}

const CLEAN_FALSE_BINS = 0.05

const tables = new Map<string, InformationTable>()

/**
 * Which threshold: that of the recipe's rule; half-way between the two levels found, where rounding of dwells is even;
 * or as near to half-way as keeps the false bins of either kind to be expected in the whole record below 0.05.
 */
export const THRESHOLDS = ['recipe', 'half', 'clean-half'] as const
export type ThresholdChoice = (typeof THRESHOLDS)[number]

export interface StudyChoices {
  readonly stage: Stage
  readonly threshold: ThresholdChoice
  /** Also gather the flags the app would show; slower. */
  readonly flags: boolean
}

/** Simulates one record of a scenario, runs the default recipe on it and compares with the truth. */
export function studyRecord(scenario: Scenario, choices: StudyChoices, seed: string): RecordOutcome {
  const { model, binSeconds } = scenario
  const { stage } = choices
  const { trace, gate, truth } = simulateTrace(model, binSeconds, seed)
  const bins = trace.counts.length
  const recipe: Recipe = { ...DEFAULT_RECIPE, bin: { seconds: binSeconds } }
  const prepared = prepareTrace({ record: trace, gate }, recipe)
  const product = studyThresholds(prepared, recipe)
  const row = rowChosen(product, prepared.levelled, choices.threshold)
  const found = thresholdOf(product.table, row)
  const errors = {
    falseOnPerBin: product.falseOnPerBin[row],
    falseOffPerBin: product.falseOffPerBin[row],
  }
  const shortest = (state: 0 | 1): number => {
    const safe = spuriousSafeBins(product.table, product.group, row, state, errors)
    return shortestFitted(recipe.fit.shortest, state === 1 ? 'on' : 'off', safe).bins
  }
  const share = edgeShare(found, prepared.levelled, 1)
  const noiseFree = stage === 'counts' ? null : occupancyTrace(model, truth, binSeconds, bins)
  const levelled: LevelledTrace = noiseFree ?? prepared.levelled
  const threshold = noiseFree === null ? found : Math.ceil(share * noiseFree.onCounts)
  const perBin = noiseFree === null ? errors : { falseOnPerBin: 0, falseOffPerBin: 0 }
  const dwells =
    stage === 'dwells'
      ? dwellsOneByOne(truth, binSeconds, bins, share)
      : dwellTableOf(statesAt(levelled, threshold), levelled, null, 'all', perBin)
  const one = (state: 0 | 1): StateOutcome =>
    stateOutcome(scenario, dwells, state, edgeShare(threshold, levelled, state), shortest(state), bins)
  return {
    seed,
    levels: prepared.baseline.status,
    baseline: prepared.baseline.method,
    threshold: found,
    ...perBin,
    off: one(0),
    on: one(1),
    onFraction: onFraction(dwells, { ...perBin, confidence: 0.95, seed: 1 }).estimate,
    trueOnFraction: truth.onFraction,
    longestOnSeconds: longest(dwells),
    trueLongestOnSeconds: longestTrue(truth),
    flags: choices.flags ? benchNumbers(prepared, product, recipe, found).flags.map(({ key }) => key) : null,
  }
}

function rowChosen(product: ThresholdProduct, levelled: LevelledTrace, choice: ThresholdChoice): number {
  const byRule = rowOf(product.table, product.byRule.counts)
  if (choice === 'recipe') return byRule
  const half = rowOf(product.table, Math.ceil((levelled.offCounts + levelled.onCounts) / 2))
  if (choice === 'half') return half
  const bins = levelled.values.length
  const step = half < byRule ? 1 : -1
  for (let row = half; row !== byRule; row += step)
    if (bins * Math.max(product.falseOnPerBin[row], product.falseOffPerBin[row]) < CLEAN_FALSE_BINS)
      return row
  return byRule
}

function stateOutcome(
  scenario: Scenario,
  dwells: DwellTable,
  state: 0 | 1,
  share: number,
  shortestBins: number,
  recordBins: number,
): StateOutcome {
  const truth = scenario.model.states[state].dwell
  const sample = sampleFromDwells(dwells, state, share)
  const fit = fitLaw(lawNamed(truth.law), sample, shortestBins, {
    confidence: 0.95,
    intervals: true,
  })
  const rounded = Math.round(share * 100) / 100
  const key = `${scenario.name} ${state} ${rounded} ${shortestBins}`
  let table = tables.get(key)
  if (table === undefined) {
    table = informationTable(truth, scenario.binSeconds, rounded, shortestBins, recordBins)
    tables.set(key, table)
  }
  const bound = cramerRao(table, dwells, state, recordBins)
  const { alpha, tauSeconds } = fit.parameters
  return {
    status: fit.status,
    shortestBins,
    complete: fit.complete,
    censored: fit.censored,
    alpha: {
      estimate: alpha?.estimate ?? null,
      low: alpha?.low ?? null,
      high: alpha?.high ?? null,
      bound: bound?.[0] ?? null,
    },
    kappa:
      truth.parameters.tauSeconds === undefined
        ? null
        : {
            estimate: fit.coordinates[1] ?? null,
            // A one-sided tau > low is kappa < 1 / low: kappa = 0 lies inside.
            low: tauSeconds?.high == null ? 0 : 1 / tauSeconds.high,
            high: tauSeconds?.low == null ? null : 1 / tauSeconds.low,
            bound: bound?.[1] ?? null,
          },
  }
}

function longest(dwells: DwellTable): number {
  let bins = 0
  for (let i = 0; i < dwells.rows; i++)
    if (dwells.state[i] === 1) bins = Math.max(bins, dwells.durationBins[i])
  return bins * dwells.binSeconds
}

function longestTrue({ dwells }: Truth): number {
  let seconds = 0
  dwells.durationSeconds.forEach((d, i) => {
    if (dwells.state[i] === 1) seconds = Math.max(seconds, d)
  })
  return seconds
}
