import type { BenchNumbers, Flag } from './emitter-numbers.ts'

type Numbers = Omit<BenchNumbers, 'flags'>

/** Shortfalls in the order a referee would ask for them. */
export function flagsOf(numbers: Numbers, recordSeconds: number, binSeconds: number): Flag[] {
  return [
    ...levelFlags(numbers, recordSeconds, binSeconds),
    ...baselineFlags(numbers),
    ...dwellFlags(numbers, recordSeconds),
    ...cutoffFlags(numbers),
    ...fastFlags(numbers, binSeconds),
  ]
}

const STATE_NAMES = ['off', 'on'] as const

/** A dark end shorter than this share of the record is nothing special. */
const LONG_END = 0.1
const BLEACHED = 0.01

function share(value: number): string {
  return `${(100 * value).toFixed(value < 0.1 ? 1 : 0)} %`
}

function levelFlags(numbers: Numbers, recordSeconds: number, binSeconds: number): Flag[] {
  const bins = recordSeconds / binSeconds
  const flags: Flag[] = []
  if (numbers.baseline.status !== 'ok') {
    flags.push({ key: `levels-${numbers.baseline.status}`, sentence: numbers.baseline.message })
  }
  const worst = Math.max(numbers.falseOnPerBin, numbers.falseOffPerBin)
  if (worst * bins > 20) {
    flags.push({
      key: 'levels-overlap',
      sentence:
        `Levels overlap at this bin: about ${Math.round(worst * bins)} bins of the record are miscalled by shot noise. ` +
        'Widen the bin or set the emitter aside.',
    })
  }
  return flags
}

function baselineFlags({ baseline }: Numbers): Flag[] {
  if (baseline.method === 'constant' || baseline.supportedShare >= 0.5) return []
  return [
    {
      key: 'baseline-unsupported',
      sentence:
        `Only ${share(baseline.supportedShare)} of the baseline rests on off bins; the longest stretch without is ` +
        `${baseline.longestUnsupportedSeconds.toFixed(1)} s. Plant an event of that length to see whether it survives.`,
    },
  ]
}

function dwellFlags(numbers: Numbers, recordSeconds: number): Flag[] {
  const flags: Flag[] = []
  for (const state of [0, 1] as const) {
    const { dwells, fits } = numbers.states[state]
    const fitted = Math.max(0, ...fits.fits.map((fit) => fit.complete))
    if (fitted < 50) {
      flags.push({
        key: `few-${STATE_NAMES[state]}-dwells`,
        sentence:
          `${fitted} complete ${STATE_NAMES[state]}-times at or above the shortest fitted one; an exponent wants at least 50, ` +
          'a cutoff 200. Read the interval, not the estimate.',
      })
    }
    if (dwells.longestShare !== null && dwells.longestShare > 0.3) {
      flags.push({
        key: `one-${STATE_NAMES[state]}-dwell-dominates`,
        sentence: `One ${STATE_NAMES[state]}-time holds ${share(dwells.longestShare)} of the record: averages over it mean little.`,
      })
    }
  }
  const { bleach } = numbers
  if (bleach !== null && bleach.lastSeconds > LONG_END * recordSeconds) {
    const end = `The record ends with ${bleach.lastSeconds.toPrecision(3)} s dark (${share(bleach.lastSeconds / recordSeconds)} of it)`
    const chances = `p = ${bleach.chance.toPrecision(1)} under the law shown, ${bleach.chanceScaleFree.toPrecision(1)} under a plain power law`
    const worst = Math.max(bleach.chance, bleach.chanceScaleFree)
    const best = Math.min(bleach.chance, bleach.chanceScaleFree)
    flags.push(
      worst < BLEACHED
        ? {
            key: 'likely-bleached',
            sentence: `${end}, longer than the off-times before it allow (${chances}). Exclude the end of the record, or state the on fraction both ways.`,
          }
        : best < BLEACHED
          ? {
              key: 'perhaps-bleached',
              sentence: `${end}; whether the off-times before it allow that depends on their law (${chances}). State the on fraction with and without it.`,
            }
          : {
              key: 'dark-end-unproven',
              sentence: `${end}; the off-times before it allow that (${chances}), so bleaching is not proven. State the on fraction with and without it.`,
            },
    )
  }
  return flags
}

function cutoffFlags(numbers: Numbers): Flag[] {
  const flags: Flag[] = []
  for (const state of [0, 1] as const) {
    const name = STATE_NAMES[state]
    const artefact = numbers.artefactCutoffSeconds[name]
    const { fits } = numbers.states[state]
    const tau = fits.fits[fits.shown]?.parameters['tauSeconds']
    const reach = tau?.estimate ?? tau?.low ?? null
    if (artefact !== null && reach !== null && artefact < 10 * reach) {
      flags.push({
        key: `artefact-cutoff-${name}`,
        sentence:
          `Threshold errors alone would end ${name}-times after about ${artefact.toPrecision(2)} s; the fitted cutoff ` +
          `(${reach.toPrecision(2)} s) is not ten times shorter. Widen the bin or move the threshold before believing it.`,
      })
    }
  }
  return flags
}

/** Excess of bins between the levels worth a warning: ratio and chance. */
const EXCESS_RATIO = 1.5
const EXCESS_CHANCE = 1e-4

function fastFlags(numbers: Numbers, binSeconds: number): Flag[] {
  const { mixedBins } = numbers
  if (mixedBins.ratio === null || mixedBins.ratio < EXCESS_RATIO || mixedBins.upperTail > EXCESS_CHANCE)
    return []
  return [
    {
      key: 'between-levels',
      sentence:
        `${mixedBins.observed} bins lie between the levels where ${mixedBins.expected.toFixed(0)} are expected: a grey level, or ` +
        `blinking faster than the ${(1000 * binSeconds).toPrecision(2)} ms bin. Exponents read low then; compare them over the shortest fitted dwell.`,
    },
  ]
}
