import type { Estimated, RecordOutcome, StateOutcome } from './study-record.ts'

/** Accuracy of one parameter over the records in which it was estimated. */
export interface Accuracy {
  readonly records: number
  readonly bias: number
  readonly biasError: number
  /** Share of intervals that hold the truth, and its binomial standard error. */
  readonly coverage: number
  readonly coverageError: number
  readonly spread: number
  /** Spread over the root mean square of the Cramér-Rao standard deviations, and its standard error. */
  readonly overBound: number
  readonly overBoundError: number
  /** Standard deviation of (estimate - truth) / own bound: the same ratio, not led by the poorest records. */
  readonly standardised: number
}

/** An absent end of an interval is open: a bound on one side only. */
export function accuracyOf(values: readonly Estimated[], truth: number): Accuracy | null {
  const known = values.filter((v) => v.estimate !== null && (v.low !== null || v.high !== null))
  const n = known.length
  if (n < 3) return null
  const errors = known.map((v) => (v.estimate as number) - truth)
  const bias = mean(errors)
  const squares = errors.map((e) => (e - bias) ** 2)
  const variance = (mean(squares) * n) / (n - 1)
  const holds = known.filter(
    (v) => (v.low ?? Number.NEGATIVE_INFINITY) <= truth && truth <= (v.high ?? Number.POSITIVE_INFINITY),
  ).length
  const coverage = holds / n
  const bounded = known.flatMap((v, i) => (v.bound === null ? [] : [{ bound: v.bound, error: errors[i] }]))
  const boundSquares = mean(bounded.map(({ bound }) => bound ** 2))
  const overBound = Math.sqrt(variance / boundSquares)
  // Delta method on the mean of squared deviations.
  const squaresError = Math.sqrt(mean(squares.map((s) => (s - mean(squares)) ** 2)) / n)
  const z = bounded.map(({ bound, error }) => error / bound)
  const zMean = mean(z)
  return {
    records: n,
    bias,
    biasError: Math.sqrt(variance / n),
    coverage,
    coverageError: Math.sqrt((coverage * (1 - coverage)) / n),
    spread: Math.sqrt(variance),
    overBound,
    overBoundError: (overBound * squaresError) / (2 * mean(squares)),
    standardised: Math.sqrt(mean(z.map((v) => (v - zMean) ** 2))),
  }
}

/** Fewer complete dwells than this and the app says that an exponent wants more. */
const ENOUGH_DWELLS = 50
const HEADER =
  '  parameter   dwells    n      bias ± error      covers 95 % ± error    SD        SD/bound ± error   SD of z'

/** Lines of text: one scenario, one stage. Records in which the recipe found no two levels are counted, not averaged. */
export function summaryLines(
  all: readonly RecordOutcome[],
  truths: { readonly alphaOn: number; readonly alphaOff: number; readonly kappaOn: number },
): string[] {
  const outcomes = all.filter(({ levels }) => levels !== 'no-on-bins' && levels !== 'no-off-bins')
  const lines = [HEADER]
  const row = (
    label: string,
    key: 'on' | 'off',
    pick: (o: StateOutcome) => Estimated | null,
    truth: number,
  ): void => {
    for (const fewest of [0, ENOUGH_DWELLS]) {
      const values = outcomes
        .map((o) => o[key])
        .filter((o) => o.complete >= fewest)
        .map(pick)
        .filter((v) => v !== null)
      const start = `  ${label.padEnd(11)} ${(fewest === 0 ? 'any' : `>= ${fewest}`).padEnd(6)}`
      lines.push(start + accuracyText(accuracyOf(values, truth)))
    }
  }
  row('alpha_on', 'on', (o) => o.alpha, truths.alphaOn)
  row('1/tau_on', 'on', (o) => o.kappa, truths.kappaOn)
  row('alpha_off', 'off', (o) => o.alpha, truths.alphaOff)
  const fractions = outcomes.flatMap((o) => (o.onFraction === null ? [] : [o.onFraction - o.trueOnFraction]))
  if (fractions.length > 0) {
    const worst = Math.max(...fractions.map(Math.abs))
    const rms = Math.sqrt(mean(fractions.map((f) => f * f)))
    lines.push(
      `  on fraction: mean error ${signed(mean(fractions))}, root mean square ${rms.toFixed(4)}, worst ${worst.toFixed(4)}`,
    )
  }
  const ratios = outcomes.map((o) => o.longestOnSeconds / o.trueLongestOnSeconds).sort((a, b) => a - b)
  const near = ratios.filter((r) => Math.abs(r - 1) <= 0.05).length / ratios.length
  const flagged = all.flatMap(({ flags }) => (flags === null ? [] : [flags]))
  const middle = (pick: (o: RecordOutcome) => number): number => median(outcomes.map(pick))
  return [
    ...lines,
    `  longest on-time / truth: median ${middle((o) => o.longestOnSeconds / o.trueLongestOnSeconds).toFixed(3)}, within 5 % in ${(100 * near).toFixed(1)} % of records`,
    `  medians: dwells fitted on ${middle((o) => o.on.complete)}, off ${middle((o) => o.off.complete)}; from bins on ${middle((o) => o.on.shortestBins)}, off ${middle((o) => o.off.shortestBins)}; threshold ${middle((o) => o.threshold)} counts; false on ${middle((o) => o.falseOnPerBin).toExponential(1)}, false off ${middle((o) => o.falseOffPerBin).toExponential(1)} per bin`,
    `  levels: ${tally(all.map((o) => o.levels))}; baseline: ${tally(outcomes.map((o) => o.baseline))}; fits on: ${tally(outcomes.map((o) => o.on.status))}; off: ${tally(outcomes.map((o) => o.off.status))}`,
    `  flags in ${flagged.length} records: ${tally(flagged.flat()) || 'none'}`,
  ]
}

function accuracyText(a: Accuracy | null): string {
  if (a === null) return ' not available: fewer than 3 records with an interval'
  return ` ${pad(a.records, 4, 0)}  ${signed(a.bias)} ± ${a.biasError.toFixed(4)}   ${pad(100 * a.coverage, 6, 1)} ± ${pad(100 * a.coverageError, 3, 1)}        ${a.spread.toFixed(4)}    ${a.overBound.toFixed(3)} ± ${a.overBoundError.toFixed(3)}      ${a.standardised.toFixed(3)}`
}

const mean = (values: readonly number[]): number => values.reduce((sum, v) => sum + v, 0) / values.length

const median = (values: readonly number[]): number =>
  [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)]

const pad = (value: number, width: number, digits: number): string => value.toFixed(digits).padStart(width)

const signed = (value: number): string => `${value < 0 ? '-' : '+'}${Math.abs(value).toFixed(4)}`

function tally(words: readonly string[]): string {
  const counts = new Map<string, number>()
  for (const word of words) counts.set(word, (counts.get(word) ?? 0) + 1)
  return [...counts].map(([word, n]) => `${word} ${n}`).join(', ')
}
