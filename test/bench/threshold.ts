import { execFileSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { buildThresholdTable, thresholdRange } from '../../src/core/states/build-threshold-table.ts'
import { durationGrid } from '../../src/core/states/duration-grid.ts'
import type { LevelledTrace } from '../../src/core/states/levels.ts'
import { singlePassTally } from '../../src/core/states/single-pass.ts'
import { statesAt } from '../../src/core/states/states-at.ts'
import type { BenchRow } from './bench-row.ts'

const REPEATS = 9
const BETWEEN_LEVELS = 40
const IN_THE_NOISE = 10

/** The record of threshold.c: levels 10 and 100, dwells with survival m^-1/2, from the same generator. */
function recordOf(bins: number): LevelledTrace {
  const values = new Uint16Array(bins)
  let x = 2463534242
  let left = 0
  let on = 0
  let highest = 0
  const draw = (): void => {
    x ^= x << 13
    x ^= x >>> 17
    x ^= x << 5
  }
  for (let i = 0; i < bins; i++) {
    if (left === 0) {
      draw()
      const u = ((x >>> 8) + 1) / 16777216
      left = u * u * 65536 < 1 ? 65536 : Math.floor(1 / (u * u))
      on ^= 1
    }
    left--
    draw()
    const noise = (x & 255) + ((x >>> 8) & 255) + ((x >>> 16) & 255) + (x >>> 24)
    values[i] = on === 1 ? 66 + Math.floor(noise / 15) : Math.floor(noise / 51)
    if (values[i] > highest) highest = values[i]
  }
  return {
    values,
    offset: 0,
    highest,
    gaps: null,
    binSeconds: 0.01,
    startSeconds: 0,
    offCounts: 10,
    onCounts: 100,
  }
}

/** Checksum of threshold.c from our tallies. */
function checksum(levelled: LevelledTrace, threshold: number): number {
  let sum = 0
  const grid = durationGrid(levelled.values.length)
  const { starts, states, bins } = statesAt(levelled, threshold)
  singlePassTally(levelled, threshold, grid).forEach((tally, state) => {
    const count = Array.from(tally.completeCount.subarray(0, 64))
    let all = 0
    // C counts the first and the last run like the others.
    for (let r = 0; r < starts.length; r++) {
      if (states[r] !== state) continue
      all++
      const m = (r + 1 < starts.length ? starts[r + 1] : bins) - starts[r]
      if ((r === 0 || r === starts.length - 1) && m <= 64) count[m - 1]++
    }
    const short = count.reduce((a, b) => a + b, 0)
    for (const n of [...count, all - short, tally.stateBins, tally.longestBins])
      sum = (sum * 31 + n) % 1000000007
  })
  return sum
}

function compiled(folder: string): string | null {
  const program = join(folder, 'threshold')
  for (const compiler of ['cc', 'gcc', 'clang']) {
    try {
      const source = join(import.meta.dirname, 'threshold.c')
      execFileSync(compiler, ['-O3', '-o', program, source], { stdio: 'ignore' })
      return program
    } catch {
      // Not installed: try the next name.
    }
  }
  return null
}

/** Least time of several runs, ms. */
function best(work: () => unknown, repeats: number): number {
  let least = Number.POSITIVE_INFINITY
  for (let r = 0; r < repeats; r++) {
    const start = performance.now()
    work()
    least = Math.min(least, performance.now() - start)
  }
  return least
}

function onePassRows(program: string | null): BenchRow[] {
  const bins = 1e7
  const levelled = recordOf(bins)
  const grid = durationGrid(bins)
  const rows: BenchRow[] = []
  for (const threshold of [BETWEEN_LEVELS, IN_THE_NOISE]) {
    const where = threshold === BETWEEN_LEVELS ? 'between the levels' : 'inside the off level'
    const what = `one threshold ${where}, 10^7 bins`
    const ms = best(() => singlePassTally(levelled, threshold, grid), REPEATS)
    if (program === null) {
      rows.push({
        what,
        value: ms,
        unit: 'ms',
        rival: 'no C compiler found',
        ratio: null,
        budget: '2',
        ok: null,
      })
      continue
    }
    const text = execFileSync(program, [bins, threshold, REPEATS].map(String), { encoding: 'utf8' })
    const [loop, words, theirs] = text.trim().split(' ').map(Number)
    const ours = checksum(levelled, threshold)
    if (ours !== theirs) throw new Error(`Runs differ from C: checksum ${ours} here, ${theirs} in C.`)
    rows.push(
      {
        what,
        value: ms,
        unit: 'ms',
        rival: `C -O3, one loop (${loop.toFixed(2)} ms)`,
        ratio: ms / loop,
        budget: 'at most 2',
        ok: ms / loop <= 2,
      },
      {
        what,
        value: ms,
        unit: 'ms',
        rival: `C -O3, words of 64 comparisons (${words.toFixed(2)} ms)`,
        ratio: ms / words,
        budget: 'for information',
        ok: null,
      },
    )
  }
  return rows
}

function tableRows(): BenchRow[] {
  const levelled = recordOf(1e6)
  const range = thresholdRange(levelled)
  const { grid } = buildThresholdTable(levelled, null, range)
  const codes = Uint8Array.from(levelled.values, (_, i) => (i % 2000 === 0 ? 3 : Math.floor(i / 2000) % 2))
  const ms = best(() => buildThresholdTable(levelled, null, range), REPEATS)
  const gated = best(() => buildThresholdTable(levelled, codes, range), REPEATS)
  const repeated = best(() => {
    for (let row = 0; row < range.rows; row++)
      singlePassTally(levelled, range.firstThreshold + row * range.step, grid)
  }, 5)
  const rival = `the single pass for each of ${range.rows} thresholds (${repeated.toFixed(0)} ms)`
  const long = recordOf(1e7)
  const longRange = thresholdRange(long)
  return [
    {
      what: 'all thresholds, 10^6 bins',
      value: ms,
      unit: 'ms',
      rival,
      ratio: ms / repeated,
      budget: 'at most 0.33',
      ok: ms / repeated <= 1 / 3,
    },
    {
      what: 'all thresholds and two gate classes, 1000 windows, 10^6 bins',
      value: gated,
      unit: 'ms',
      rival: 'the single pass cannot do gates',
      ratio: null,
      budget: 'for information',
      ok: null,
    },
    {
      what: 'all thresholds, 10^7 bins',
      value: best(() => buildThresholdTable(long, null, longRange), 3),
      unit: 'ms',
      rival: 'none run',
      ratio: null,
      budget: 'for information',
      ok: null,
    },
  ]
}

/** One threshold against C -O3 and all thresholds against one threshold repeated, on the same simulated record. */
export async function run(): Promise<BenchRow[]> {
  const folder = mkdtempSync(join(tmpdir(), 'threshold-'))
  try {
    return [...onePassRows(compiled(folder)), ...tableRows()]
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}
