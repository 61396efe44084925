import { execFileSync } from 'node:child_process'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { pathToFileURL } from 'node:url'
import { binPhotons } from '../../src/core/photons/bin-photons.ts'
import type { PhotonChunk, PhotonStream } from '../../src/core/photons/photon-stream.ts'
import type { BenchRow } from './bench-row.ts'

const CHUNK = 2 ** 20
const TICK_SECONDS = 1e-7
const REPEATS = 7

/** The arrival times of binning.c: gaps from the same 32-bit xorshift generator (Marsaglia 2003). */
function arrivals(photons: number, gap: number): PhotonStream {
  const chunks: PhotonChunk[] = []
  let x = 2463534242
  let tick = 0
  for (let from = 0; from < photons; from += CHUNK) {
    const count = Math.min(CHUNK, photons - from)
    const offsets = new Uint32Array(count)
    let baseTick = 0
    for (let i = 0; i < count; i++) {
      x ^= x << 13
      x ^= x >>> 17
      x ^= x << 5
      tick += (x >>> 0) % (2 * gap)
      if (i === 0) baseTick = tick
      offsets[i] = tick - baseTick
    }
    chunks.push({ baseTick, offsets, count, channels: null })
  }
  return {
    kind: 'photons',
    tickSeconds: TICK_SECONDS,
    photons,
    chunks,
    startTick: 0,
    endTick: tick + 1,
    dropped: {},
  }
}

/** Best of several times, ms, and the checksum of binning.c over the whole bins and the partial one. */
function ours(stream: PhotonStream, binTicks: number): { ms: number; sum: number } {
  // The last bin is made whole, so that the same photons are binned as in C.
  const whole = { ...stream, endTick: Math.ceil(stream.endTick / binTicks) * binTicks }
  let ms = Number.POSITIVE_INFINITY
  let sum = 0
  for (let r = 0; r < REPEATS; r++) {
    const start = performance.now()
    const { counts } = binPhotons(whole, binTicks * TICK_SECONDS)
    ms = Math.min(ms, performance.now() - start)
    if (r > 0) continue
    for (let k = 0; k < counts.length; k++) sum = (sum + counts[k] * (k % 1009)) % 1000000007
  }
  return { ms, sum }
}

interface Rival {
  readonly division: number
  readonly product: number
  readonly edges: number
  readonly sum: number
}

function compiled(folder: string): string | null {
  const program = join(folder, 'binning')
  for (const compiler of ['cc', 'gcc', 'clang']) {
    try {
      execFileSync(compiler, ['-O3', '-o', program, join(import.meta.dirname, 'binning.c')], {
        stdio: 'ignore',
      })
      return program
    } catch {
      // Not installed: try the next name.
    }
  }
  return null
}

function inC(program: string, photons: number, gap: number, binTicks: number): Rival {
  const text = execFileSync(program, [photons, gap, binTicks, REPEATS].map(String), { encoding: 'utf8' })
  const [division, product, edges, sum] = text.trim().split(' ').map(Number)
  return { division, product, edges, sum }
}

function inNumpy(photons: number, gap: number, binTicks: number): number | null {
  try {
    const script = join(import.meta.dirname, 'binning.py')
    const args = [script, ...[photons, gap, binTicks].map(String)]
    const ms = Number(
      execFileSync('python3', args, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] }),
    )
    return Number.isFinite(ms) ? ms : null
  } catch {
    return null
  }
}

/** Binning 10^8 arrival times (10 kcps, 10 ms bins) and 10^7 sparse ones (1 a bin) against C -O3 and NumPy. */
export async function run(): Promise<BenchRow[]> {
  const rows: BenchRow[] = []
  const folder = mkdtempSync(join(tmpdir(), 'binning-'))
  try {
    const program = compiled(folder)
    const cases = [
      { what: '10^8 arrival times, 100 a bin', photons: 1e8, gap: 1000, binTicks: 100000, numpy: true },
      { what: '10^7 arrival times, 1 a bin', photons: 1e7, gap: 1000, binTicks: 1000, numpy: false },
    ]
    for (const { what, photons, gap, binTicks, numpy } of cases) {
      const rival = program === null ? null : inC(program, photons, gap, binTicks)
      const { ms, sum } = ours(arrivals(photons, gap), binTicks)
      if (rival === null) {
        rows.push({
          what,
          value: ms,
          unit: 'ms',
          rival: 'no C compiler found',
          ratio: null,
          budget: '1.5',
          ok: null,
        })
      } else {
        if (rival.sum !== sum)
          throw new Error(`Counts differ from C: checksum ${sum} here, ${rival.sum} in C.`)
        const loops = [
          ['C -O3, one division a photon', rival.division],
          ['C -O3, one multiplication a photon', rival.product],
          ['C -O3, striding to bin edges', rival.edges],
        ] as const
        const same = numpy ? 2 : 1
        loops.forEach(([name, theirs], i) => {
          const ratio = ms / theirs
          const judged = i === 0 || i === same
          rows.push({
            what: `bin ${what}`,
            value: ms,
            unit: 'ms',
            rival: `${name}${i === same ? ' (the fastest loop in C)' : ''}: ${theirs.toFixed(1)} ms`,
            ratio,
            budget: judged ? 'at most 1.5' : 'for comparison',
            ok: judged ? ratio <= 1.5 : null,
          })
        })
      }
      const theirs = numpy ? inNumpy(photons, gap, binTicks) : null
      if (numpy)
        rows.push({
          what: `bin ${what}`,
          value: ms,
          unit: 'ms',
          rival: theirs === null ? 'python3 with numpy not found' : `NumPy bincount: ${theirs.toFixed(0)} ms`,
          ratio: theirs === null ? null : ms / theirs,
          budget: 'below 1',
          ok: theirs === null ? null : ms < theirs,
        })
    }
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
  return rows
}

if (process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href)
  console.table(await run())
