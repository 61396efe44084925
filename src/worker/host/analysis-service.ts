import { plantEvent } from '../../core/baseline/plant-event.ts'
import { sampleFromDwells } from '../../core/dwells/dwell-sample-of.ts'
import { goodnessSlice } from '../../core/fits/goodness-of-fit.ts'
import { survivalDistance } from '../../core/fits/survival-distance.ts'
import { lawNamed } from '../../core/laws/all-laws.ts'
import { seededRandom } from '../../core/numeric/seeded-random.ts'
import type { RowFits } from '../../core/pipeline/analysis-products.ts'
import { benchNumbers, dwellsAt } from '../../core/pipeline/bench-numbers.ts'
import type { Corridor } from '../../core/pipeline/corridor.ts'
import { dwellsCsv } from '../../core/pipeline/dwells-csv.ts'
import { fitRow } from '../../core/pipeline/fit-row.ts'
import { emitterResult } from '../../core/pipeline/result-document.ts'
import { previewSource } from '../../core/read/import-preview.ts'
import { readSource } from '../../core/read/read-source.ts'
import { edgeShare } from '../../core/states/edge-share.ts'
import type { AnalysisRequest, AnalysisService, GoodnessTask, Outcome } from '../protocol/service.ts'
import { blobSource } from './blob-source.ts'
import { fileFingerprint } from './file-fingerprint.ts'
import { recordShelf } from './record-shelf.ts'

const STOPPED = { ok: false, sentence: 'Stopped.', stopped: true } as const

/** The computation behind the door between threads. One instance per worker. */
export function analysisService(): AnalysisService {
  const shelf = recordShelf()
  const stopped = new Set<number>()
  const hooks = (job: number, onProgress: (fraction: number) => void = () => {}) => ({
    onProgress,
    shouldStop: () => stopped.has(job),
  })

  const withCorridor = async <T>(
    job: number,
    { origin, file }: AnalysisRequest,
    work: (corridor: Corridor) => T | Promise<T>,
  ): Promise<Outcome<Awaited<T>>> => {
    if (stopped.delete(job)) return STOPPED
    const found = await shelf.corridor(origin, file, hooks(job))
    if (stopped.delete(job)) return STOPPED
    if (!found.ok) return found
    return { ok: true, value: await work(found.value) }
  }

  return {
    async previewFile(file, name) {
      return { ok: true, value: await previewSource(blobSource(file, name)) }
    },

    async openFile(job, file, name, answer, onProgress) {
      const source = blobSource(file, name)
      const read = await readSource(
        source,
        answer,
        hooks(job, (fraction) => onProgress(0.8 * fraction)),
      )
      if (stopped.delete(job)) return STOPPED
      if (!read.ok) return { ok: false, sentence: read.problem.sentence }
      const sha256 = await fileFingerprint(
        source,
        hooks(job, (fraction) => onProgress(0.8 + 0.2 * fraction)),
      )
      if (sha256 === null) return STOPPED
      shelf.keepFile(sha256, JSON.stringify(answer), read.records)
      return {
        ok: true,
        value: {
          sha256,
          sizeBytes: file.size,
          notes: read.notes,
          records: read.records.map(({ name: recordName, column, record }, index) => ({
            name: recordName,
            index,
            column,
            kind: record.kind,
            photons: record.kind === 'photons' ? record.photons : totalOf(record.counts),
            durationSeconds:
              record.kind === 'photons'
                ? (record.endTick - record.startTick) * record.tickSeconds
                : record.counts.length * record.binSeconds,
          })),
        },
      }
    },

    trace: (job, request) => withCorridor(job, request, (corridor) => corridor.traceProduct(request.recipe)),

    thresholds: (job, request) =>
      withCorridor(job, request, (corridor) => corridor.thresholds(request.recipe)),

    rowFits: (job, request, rows, intervals) =>
      withCorridor(job, request, (corridor) => {
        const product = corridor.thresholds(request.recipe)
        const { levelled } = corridor.prepared(request.recipe)
        return rows
          .filter((row) => row >= 0 && row < product.table.rows)
          .map((row): RowFits => fitRow(product, levelled, request.recipe, row, intervals ? 'shown' : 'none'))
      }),

    settle: (job, request, threshold) =>
      withCorridor(job, request, (corridor) =>
        benchNumbers(
          corridor.prepared(request.recipe),
          corridor.thresholds(request.recipe),
          request.recipe,
          threshold,
        ),
      ),

    plantEvent: (job, request, threshold, atSeconds, durationSeconds, seed) =>
      withCorridor(job, request, (corridor) => {
        const { trace, baseline, levelled } = corridor.prepared(request.recipe)
        return plantEvent(trace, baseline, request.recipe.baseline, {
          atSeconds,
          durationSeconds,
          thresholdAboveBaseline: threshold - levelled.offCounts,
          random: seededRandom(seed),
        })
      }),

    async goodnessTask(job, { analysis, threshold, state, law }) {
      const outcome = await withCorridor(job, analysis, (corridor): GoodnessTask | null => {
        const { recipe } = analysis
        const prepared = corridor.prepared(recipe)
        const product = corridor.thresholds(recipe)
        const numbers = benchNumbers(prepared, product, recipe, threshold)
        const fit = numbers.states[state].fits.fits.find((one) => one.law === law)
        if (fit === undefined || fit.coordinates.length === 0) return null
        const dwells = dwellsAt(prepared, product, recipe, numbers.threshold)
        const sample = sampleFromDwells(dwells, state, edgeShare(numbers.threshold, prepared.levelled, state))
        const distance = survivalDistance(lawNamed(fit.law), fit.coordinates, sample, fit.shortestBins)
        return { sample, fit, distance, seed: recipe.goodness.seed, samples: recipe.goodness.samples }
      })
      if (!outcome.ok) return outcome
      return outcome.value === null
        ? { ok: false, sentence: `The law “${law}” was not fitted to these dwells.` }
        : { ok: true, value: outcome.value }
    },

    goodnessSlice: ({ sample, fit, distance, seed }, from, to) =>
      Promise.resolve(goodnessSlice(sample, fit, distance, seed, from, to)),

    dwellsCsv: (job, request, threshold) =>
      withCorridor(job, request, (corridor) =>
        dwellsCsv(
          request.name,
          dwellsAt(
            corridor.prepared(request.recipe),
            corridor.thresholds(request.recipe),
            request.recipe,
            threshold,
          ),
        ),
      ),

    resultDocument: (job, request, threshold) =>
      withCorridor(job, request, (corridor) => {
        const { recipe, origin, name } = request
        const product = corridor.thresholds(recipe)
        const numbers = benchNumbers(corridor.prepared(recipe), product, recipe, threshold)
        const source =
          origin.kind === 'file'
            ? { file: origin.fileName, sha256: origin.sha256, column: origin.column }
            : { file: `demonstration: ${origin.name}`, sha256: null, column: null }
        return emitterResult(name, source, corridor.traceProduct(recipe), product, numbers)
      }),

    stop(job) {
      stopped.add(job)
    },

    holdLock: (name) =>
      new Promise((resolve) => {
        const { locks } = navigator
        if (locks === undefined) {
          resolve(false)
          return
        }
        locks
          .request(name, () => {
            resolve(true)
            return new Promise<void>(() => {})
          })
          .catch(() => resolve(false))
      }),
  }
}

function totalOf(counts: Uint16Array | Uint32Array): number {
  let total = 0
  for (let i = 0; i < counts.length; i++) total += counts[i]
  return total
}
