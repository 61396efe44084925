import { extractMetadata } from '../../figures/scene/figure-metadata.ts'
import { figureChoices } from '../../session/schema/parse-figure.ts'
import { canonicalJson } from '../../core/recipe/recipe-hash.ts'
import { differenceOf } from '../../core/recipe/resolve-recipe.ts'
import type { AppModel } from '../bridge/app-model.ts'

const LARGEST_BYTES = 64 << 20

/**
 * Restores the choices an exported figure carries: the emitter with the same data is shown with the figure's recipe,
 * threshold and window; without its data the choices go to the emitter on the bench only if the user has that data.
 */
export async function openFigure(app: AppModel, file: File): Promise<string> {
  if (file.size > LARGEST_BYTES) return `“${file.name}” is too large to be a figure of this program.`
  const found = extractMetadata(await file.text())
  if (!found.ok) return `“${file.name}” was not opened. ${found.reason}`
  const choices = figureChoices(found.metadata)
  if (!choices.ok) return `“${file.name}” was not opened. ${choices.problem}`
  const { recipe, origin, name, threshold, window } = choices
  const { session } = app.choices.store.getState()
  const same = session.emitters.find((emitter) => canonicalJson(emitter.origin) === canonicalJson(origin))
  const hasData =
    origin.kind === 'demonstration' ||
    app.filesInHand.has(origin.sha256) ||
    (await app.store.getRaw(origin.sha256)) !== null
  if (same === undefined && !hasData) {
    return `“${file.name}” shows ${name}. Its data (${origin.fileName}) are not in this browser: open that file, then drop the figure again.`
  }
  const id = same?.id ?? crypto.randomUUID()
  const difference = differenceOf(session.recipe, {
    ...recipe,
    threshold: { ...recipe.threshold, rule: 'hand', handCounts: threshold },
  })
  app.choices.change({ label: `choices of ${file.name}` }, (before) => ({
    ...before,
    emitters:
      same === undefined
        ? [...before.emitters, { id, name, origin, difference }]
        : before.emitters.map((emitter) => (emitter.id === id ? { ...emitter, difference } : emitter)),
    currentEmitterId: id,
  }))
  if (window !== null) {
    app.choices.look((before) => ({
      ...before,
      currentEmitterId: id,
      view: { ...before.view, windows: { ...before.view.windows, [id]: window } },
    }))
  }
  return `The choices of “${file.name}” are restored for ${name}.`
}
