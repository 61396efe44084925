import { binnedDensity, neighbourDensity } from '../../core/dwells/density.ts'
import { sampleFromRow } from '../../core/dwells/dwell-sample-of.ts'
import type { DwellSample } from '../../core/dwells/dwell-sample.ts'
import { hazardTimesAge } from '../../core/dwells/hazard.ts'
import { kaplanMeier } from '../../core/dwells/survival.ts'
import type { Fit } from '../../core/fits/fit.ts'
import { lawNamed } from '../../core/laws/all-laws.ts'
import { formatEstimate, siDuration } from '../../core/numeric/units.ts'
import type { StateFits, ThresholdProduct } from '../../core/pipeline/analysis-products.ts'
import { rowOf, thresholdOf } from '../../core/pipeline/study-thresholds.ts'
import { edgeShare } from '../../core/states/edge-share.ts'
import type { LevelledTrace } from '../../core/states/levels.ts'
import { expectedSpurious } from '../../core/states/spurious-runs.ts'
import { type DwellPanelInput, dwellPanel } from './dwell-panel.ts'
import { fitCurve } from './fit-curve.ts'
import type { Frame, Panel } from './scene.ts'

export type DwellPlotKind = DwellPanelInput['plot']

/** Fixed axes of a plot, so that nothing jumps while the threshold moves. */
export interface DwellDomains {
  readonly x: readonly [number, number]
  readonly y: readonly [number, number]
}

export interface DwellsAtThreshold {
  readonly frame: Frame
  readonly state: 0 | 1
  readonly plot: DwellPlotKind
  readonly threshold: number
  readonly fits: StateFits | null
  /** Shortest fitted dwell while its mark is dragged, bins. */
  readonly liveShortestBins: number | null
  readonly hover: readonly [number, number] | null
  readonly domains: DwellDomains
  readonly letter: string
  readonly confidence: number
  readonly fontSize: number
}

const PER_DECADE = 7

function pad(low: number, high: number, factor: number): [number, number] {
  return [low / factor, high * factor]
}

/** Axes from the row of the rule's threshold, with room for its neighbours. */
export function dwellDomains(
  product: ThresholdProduct,
  levelled: LevelledTrace,
  plot: DwellPlotKind,
): DwellDomains {
  const { table, group } = product
  const record = levelled.values.length * levelled.binSeconds
  const row = rowOf(table, product.byRule.counts)
  const x: [number, number] = [0.75 * levelled.binSeconds, Math.max(record, 20 * levelled.binSeconds)]
  if (plot === 'hazard') return { x, y: [0.02, 30] }
  let n = 1
  let top = 1 / (20 * levelled.binSeconds)
  let bottom = Number.POSITIVE_INFINITY
  for (const state of [0, 1] as const) {
    const sample = sampleFromRow(table, group, state, row, 0.5)
    for (const point of binnedDensity(sample, PER_DECADE)) {
      n += point.count
      if (point.density > 0) {
        top = Math.max(top, point.density)
        bottom = Math.min(bottom, point.density)
      }
    }
  }
  if (plot === 'survival') return { x, y: [Math.max(1e-5, 0.4 / n), 1.3] }
  return { x, y: pad(Number.isFinite(bottom) ? bottom : top * 1e-4, top, 4) }
}

/** Everything of one state's plot at one threshold, from the table's row: cost bounded by its columns. */
export function dwellsAtThreshold(
  product: ThresholdProduct,
  levelled: LevelledTrace,
  options: DwellsAtThreshold,
): Panel {
  const { state, plot, domains, fits } = options
  const { table, group } = product
  const { binSeconds } = levelled
  const row = rowOf(table, options.threshold)
  const sample = sampleFromRow(table, group, state, row, edgeShare(thresholdOf(table, row), levelled, state))
  const fit = fits === null ? null : (fits.fits[fits.shown] ?? null)
  const shortest = options.liveShortestBins ?? fits?.shortest.bins ?? null
  const artefact = (state === 1 ? product.artefactCutoffOnSeconds : product.artefactCutoffOffSeconds)[row]
  const longest = table.blocks[group][state].longestBins[row] * binSeconds
  const points = pointsOf(sample, plot, options.confidence)
  const km = plot === 'survival' ? kaplanMeier(sample, options.confidence) : null
  const spurious = plot === 'density' ? spuriousOf(product, row, state, sample) : { spurious: [], split: [] }

  return dwellPanel({
    frame: options.frame,
    state: state === 1 ? 'on' : 'off',
    plot,
    points,
    limits: limitsOf(sample, plot),
    steps: km === null ? null : { seconds: km.seconds, values: km.survival, lows: km.low, highs: km.high },
    curve:
      fit === null
        ? null
        : fitCurve(fit, plot, shareAt(sample, fit, plot, km), domains.x[0], domains.x[1], longest),
    ...spurious,
    artefactSeconds: Number.isFinite(artefact) && artefact < domains.x[1] ? artefact : null,
    shortestSeconds: shortest === null ? null : shortest * binSeconds * (1 - 0.5 / shortest),
    hover: options.hover,
    cut: sample.censoredBins.map((bins) => bins * binSeconds),
    atRisk: km === null ? null : atDecades(km, domains.x),
    legend: legendOf(fit, sample, binSeconds),
    xDomain: domains.x,
    yDomain: domains.y,
    letter: options.letter,
    axisTitle: true,
    fontSize: options.fontSize,
  })
}

function pointsOf(sample: DwellSample, plot: DwellPlotKind, confidence: number) {
  const empty = { seconds: [], values: [], lows: null, highs: null }
  if (plot === 'survival') return empty
  if (plot === 'neighbour') {
    const points = neighbourDensity(sample)
    return {
      seconds: points.map(({ seconds }) => seconds),
      values: points.map(({ density }) => density),
      lows: null,
      highs: null,
    }
  }
  const rows =
    plot === 'density'
      ? binnedDensity(sample, PER_DECADE, confidence)
          .filter(({ count }) => count > 0)
          .map(({ seconds, density, low, high }) => ({ seconds, value: density, low, high }))
      : hazardTimesAge(sample, PER_DECADE, confidence).filter(({ events }) => events > 0)
  return {
    seconds: rows.map(({ seconds }) => seconds),
    values: rows.map(({ value }) => value),
    lows: rows.map(({ low }) => low),
    highs: rows.map(({ high }) => high),
  }
}

/** Numbers at risk at whole powers of ten of the axis. */
function atDecades(km: ReturnType<typeof kaplanMeier>, [from, to]: readonly [number, number]) {
  const seconds: number[] = []
  const numbers: number[] = []
  for (let decade = Math.ceil(Math.log10(from * 1.2)); decade <= Math.log10(to / 1.2); decade++) {
    const at = 10 ** decade
    const next = km.seconds.findIndex((t) => t >= at * (1 - 1e-9))
    seconds.push(at)
    numbers.push(next < 0 ? 0 : Math.round(km.atRisk[next]))
  }
  return { seconds, numbers }
}

function limitsOf(sample: DwellSample, plot: DwellPlotKind) {
  if (plot !== 'density') return { seconds: [], highs: [] }
  const empty = binnedDensity(sample, PER_DECADE).filter(({ count }) => count === 0)
  return { seconds: empty.map(({ seconds }) => seconds), highs: empty.map(({ high }) => high) }
}

/** Share of complete dwells at or above the shortest fitted one, or the survival there. */
function shareAt(
  sample: DwellSample,
  fit: Fit,
  plot: DwellPlotKind,
  km: ReturnType<typeof kaplanMeier> | null,
): number {
  if (plot === 'hazard') return 1
  if (km !== null) {
    let survival = 1
    for (let i = 0; i < km.seconds.length && sample.completeBins[i] < fit.shortestBins; i++)
      survival = km.survival[i]
    return survival
  }
  let all = 0
  let above = 0
  for (let i = 0; i < sample.completeBins.length; i++) {
    all += sample.completeWeights[i]
    if (sample.completeBins[i] >= fit.shortestBins) above += sample.completeWeights[i]
  }
  return all > 0 ? above / all : 0
}

/** Predicted spurious and split dwells as densities over columns, stretches [from, to, value]. */
function spuriousOf(product: ThresholdProduct, row: number, state: 0 | 1, sample: DwellSample) {
  const { table, group } = product
  const { edges } = table.grid
  const expected = expectedSpurious(table, group, row, state, {
    falseOnPerBin: product.falseOnPerBin[row],
    falseOffPerBin: product.falseOffPerBin[row],
  })
  let total = 0
  for (let i = 0; i < sample.completeWeights.length; i++) total += sample.completeWeights[i]
  const stretches = (counts: ArrayLike<number>): number[] => {
    const out: number[] = []
    if (total === 0) return out
    for (let column = 0; column + 1 < edges.length && column < counts.length; column++) {
      const width = (edges[column + 1] - edges[column]) * table.binSeconds
      const density = counts[column] / (total * width)
      if (density > 0)
        out.push(
          (edges[column] - 0.5) * table.binSeconds,
          (edges[column + 1] - 0.5) * table.binSeconds,
          density,
        )
    }
    return out
  }
  return { spurious: stretches(expected.spurious), split: stretches(expected.split) }
}

/** n, law, convention and numbers: what must stand on a figure of dwell times. */
export function legendOf(fit: Fit | null, sample: DwellSample, binSeconds: number): string[] {
  let complete = 0
  let cut = 0
  for (let i = 0; i < sample.completeWeights.length; i++) complete += sample.completeWeights[i]
  for (let i = 0; i < sample.censoredWeights.length; i++) cut += sample.censoredWeights[i]
  const count = `n = ${complete}${cut > 0 ? `, ${cut} cut` : ''}`
  if (fit === null || fit.coordinates.length === 0) return [count]
  const law = lawNamed(fit.law)
  const lines = [
    `${count}; ${fit.complete} fitted from ${siDuration(fit.shortestBins * binSeconds)}`,
    law.formula,
  ]
  for (const parameter of law.parameters) {
    const value = fit.parameters[parameter.name]
    if (value === undefined) continue
    const { text, interval } = formatEstimate(value)
    const shown = text.startsWith('>') || text.startsWith('<') ? text : `= ${text}`
    lines.push(`${parameter.symbol} ${shown} ${interval === 'bound' ? '' : interval}`.trim())
  }
  if (fit.weight !== null) lines.push(`AICc weight ${fit.weight < 0.005 ? '< 0.01' : fit.weight.toFixed(2)}`)
  return lines
}
