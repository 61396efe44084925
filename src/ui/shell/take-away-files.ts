import { sceneToSvg } from '../../figures/paint/svg.ts'
import { benchFigure } from '../../figures/scene/bench-figure.ts'
import type { FigureMetadata } from '../../figures/scene/figure-metadata.ts'
import { LIGHT } from '../../figures/scene/palette.ts'
import { recipeHash } from '../../core/recipe/recipe-hash.ts'
import { resultDocument } from '../../core/pipeline/result-document.ts'
import { writeBundle } from '../../session/schema/session-file.ts'
import { currentEmitter, recipeOf } from '../../state/choices/session-changes.ts'
import { VERSION } from '../bridge/version.ts'
import type { AppModel } from '../bridge/app-model.ts'
import { benchNow } from '../bench/bench-state.ts'

export type TakeAwayKind = 'figure-85' | 'figure-178' | 'dwells' | 'results' | 'recipe' | 'session'

/** Makes a file and hands it to the browser's download; a sentence when it cannot. */
export async function takeAway(app: AppModel, kind: TakeAwayKind): Promise<string | null> {
  const { session } = app.choices.store.getState()
  const emitter = currentEmitter(session)
  if (kind === 'session') return saveSession(app)
  const recipe = recipeOf(session, emitter)
  if (kind === 'recipe') {
    download('recipe.json', `${JSON.stringify(recipe, null, 2)}\n`, 'application/json')
    return null
  }
  const request = await app.conductor.request()
  const threshold = app.conductor.threshold()
  if (emitter === null || request === null || threshold === null)
    return 'There is no analysed emitter on the bench yet.'
  const stem = fileStem(emitter.name)
  if (kind === 'dwells') {
    const outcome = await app.client.run('csv', (service, job) => service.dwellsCsv(job, request, threshold))
    if (!outcome.ok) return outcome.sentence
    download(`${stem} dwells.csv`, outcome.value, 'text/csv')
    return null
  }
  const outcome = await app.client.run('document', (service, job) =>
    service.resultDocument(job, request, threshold),
  )
  if (!outcome.ok) return outcome.sentence
  if (kind === 'results') {
    const document_ = resultDocument(VERSION, recipe, [outcome.value])
    download(`${stem} results.json`, `${JSON.stringify(document_, null, 2)}\n`, 'application/json')
    return null
  }
  const settled = await app.client.run('figure', (service, job) => service.settle(job, request, threshold))
  if (!settled.ok) return settled.sentence
  const now = benchNow(app)
  if (now?.product == null) return 'There is no analysed emitter on the bench yet.'
  const metadata: FigureMetadata = {
    version: VERSION,
    recipe,
    recipeHash: recipeHash(recipe),
    emitter: { name: emitter.name, origin: emitter.origin },
    threshold,
    window: [now.window[0], now.window[1]],
    numbers: outcome.value,
  }
  const scene = benchFigure({
    millimetres: kind === 'figure-85' ? 85 : 178,
    trace: now.trace,
    product: now.product,
    numbers: settled.value,
    window: now.window,
    plot: session.view.dwellPlot === 'scan' ? 'density' : session.view.dwellPlot,
    name: emitter.name,
    excluded: recipe.baseline.excludedSeconds,
    confidence: recipe.fit.confidence,
  })
  download(
    `${stem} ${kind === 'figure-85' ? 85 : 178} mm.svg`,
    sceneToSvg(scene, LIGHT, emitter.name, metadata),
    'image/svg+xml',
  )
  return null
}

async function saveSession(app: AppModel): Promise<string | null> {
  const { session } = app.choices.store.getState()
  const raw = new Map<string, Uint8Array>()
  for (const { origin } of session.emitters) {
    if (origin.kind !== 'file' || raw.has(origin.sha256)) continue
    const file = app.filesInHand.get(origin.sha256) ?? (await app.store.getRaw(origin.sha256))
    if (file === null)
      return `The data of “${origin.fileName}” are not in this browser any more; open the file first.`
    raw.set(origin.sha256, new Uint8Array(await file.arrayBuffer()))
  }
  const bytes = writeBundle({ session, raw })
  download(`${fileStem(session.name)}.heliograph.zip`, new Blob([bytes as BlobPart]), 'application/zip')
  return null
}

/** A name without characters that file systems refuse. */
export function fileStem(name: string): string {
  const stem = name
    .replace(/[\p{Cc}<>:"/\\|?*]/gu, '_')
    .trim()
    .slice(0, 80)
  return stem === '' ? 'emitter' : stem
}

function download(name: string, content: string | Blob, type: string): void {
  const url = URL.createObjectURL(content instanceof Blob ? content : new Blob([content], { type }))
  const link = document.createElement('a')
  link.href = url
  link.download = name
  link.click()
  setTimeout(() => URL.revokeObjectURL(url), 60_000)
}
