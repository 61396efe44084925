import type { LawName } from '../../core/laws/law.ts'
import { LAWS } from '../../core/laws/all-laws.ts'
import { roundTo, siDuration } from '../../core/numeric/units.ts'
import type { Recipe } from '../../core/recipe/recipe.ts'
import type { RecipeDifference } from '../../core/recipe/resolve-recipe.ts'
import {
  currentEmitter,
  recipeOf,
  withBin,
  withDifference,
  withoutDifference,
  withRecipe,
} from '../../state/choices/session-changes.ts'
import { shown } from '../../state/results/results-store.ts'
import { useApp, useChoices, useResults } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { ChoiceField } from '../controls/choice-field.tsx'
import { NumberField } from '../controls/number-field.tsx'
import { PlantEvent } from './plant-event.tsx'
import { commitThreshold } from './threshold-actions.ts'

const RULES: readonly { value: Recipe['threshold']['rule']; label: string }[] = [
  { value: 'half', label: 'half way, if noise allows' },
  { value: 'crossing', label: 'equal likelihood' },
  { value: 'sigma', label: 'off level + k σ' },
  { value: 'least-variance', label: 'least variance' },
  { value: 'hand', label: 'by hand' },
]

const GATES: readonly { value: Recipe['dwells']['gate']; label: string; group: string }[] = [
  { value: 'all', label: 'all, edges ignored', group: 'all' },
  { value: 'reference', label: 'gate off, cut at edges', group: 'reference' },
  { value: 'driven', label: 'gate on, cut at edges', group: 'driven' },
  { value: 'sham', label: 'sham, cut at edges', group: 'sham' },
]

/** Every choice of the analysis, from bin to law, in the order in which they act. */
export function ChoicesRail() {
  const app = useApp()
  const session = useChoices((choices) => choices.session)
  const trace = useResults((results) => shown(results.trace))
  const product = useResults((results) => shown(results.thresholds))
  const emitter = currentEmitter(session)
  const recipe = recipeOf(session, emitter)
  const threshold = product === null ? null : app.conductor.threshold()

  const all = (label: string, difference: RecipeDifference): void =>
    app.choices.change({ label }, (before) => withRecipe(before, difference))
  const own = (label: string, difference: RecipeDifference): void => {
    if (emitter === null) return
    app.choices.change({ label }, (before) => withDifference(before, emitter.id, difference))
  }
  const window = emitter === null ? undefined : session.view.windows[emitter.id]
  const excluded = recipe.baseline.excludedSeconds
  const differs = emitter !== null && Object.keys(emitter.difference).length > 0

  return (
    <>
      <section aria-label="Bins">
        <h2>Bins</h2>
        <NumberField
          label="Bin width"
          unit="ms"
          value={1000 * recipe.bin.seconds}
          low={0.001}
          high={10_000}
          step={1}
          onChange={(value) =>
            app.choices.change({ label: `bin ${value} ms` }, (before) => withBin(before, value / 1000))
          }
        />
        {trace === null ? null : (
          <p className="aside">
            Suggested: {siDuration(trace.suggestedBin.seconds)}. {trace.suggestedBin.reason}
          </p>
        )}
      </section>

      <section aria-label="Baseline">
        <h2>Baseline</h2>
        <ChoiceField
          label="Method"
          value={recipe.baseline.method}
          choices={[
            { value: 'automatic', label: 'automatic' },
            { value: 'constant', label: 'constant' },
            { value: 'drifting', label: 'drifting' },
          ]}
          onChange={(method) => all(`baseline ${method}`, { baseline: { method } })}
        />
        <NumberField
          label="May bend over"
          unit="s"
          value={recipe.baseline.stiffnessSeconds}
          low={0.1}
          high={1000}
          step={1}
          onChange={(value) => all(`stiffness ${value} s`, { baseline: { stiffnessSeconds: value } })}
        />
        {trace === null ? null : (
          <p className="aside">
            {trace.baseline.reason}
            {trace.baseline.method === 'drifting'
              ? ` Off bins support ${roundTo(100 * trace.baseline.supportedShare, null, 2)} %; longest gap ${siDuration(trace.baseline.longestUnsupportedSeconds)}.`
              : ''}
          </p>
        )}
        <div className="row">
          <Button
            disabled={window === undefined || emitter === null}
            title={
              window === undefined ? 'Zoom to the span first' : 'Leave the visible span out of everything'
            }
            onClick={() => {
              if (window !== undefined)
                own('exclude visible span', {
                  baseline: { excludedSeconds: mergeSpans([...excluded, window]) },
                })
            }}
          >
            Exclude visible span
          </Button>
        </div>
        <ul className="spans">
          {excluded.map(([from, to]) => (
            <li key={`${from}-${to}`}>
              {roundTo(from, null, 4)} – {roundTo(to, null, 4)} s
              <Button
                look="quiet"
                aria-label={`Use ${roundTo(from, null, 4)} to ${roundTo(to, null, 4)} s again`}
                onClick={() =>
                  own('use span again', {
                    baseline: {
                      excludedSeconds: excluded.filter((span) => span[0] !== from || span[1] !== to),
                    },
                  })
                }
              >
                ✕
              </Button>
            </li>
          ))}
        </ul>
        <PlantEvent />
      </section>

      <section aria-label="Threshold">
        <h2>Threshold</h2>
        <ChoiceField
          label="Rule"
          value={recipe.threshold.rule}
          choices={RULES}
          onChange={(rule) => {
            if (rule === 'hand') {
              if (threshold !== null) commitThreshold(app, threshold, 'field')
            } else {
              app.choices.change({ label: `threshold rule ${rule}` }, (before) => {
                const cleared =
                  emitter === null
                    ? before
                    : withDifference(before, emitter.id, { threshold: { rule, handCounts: null } })
                return withRecipe(cleared, { threshold: { rule } })
              })
            }
          }}
        />
        <NumberField
          label="Counts"
          unit=""
          value={threshold}
          low={product === null ? 0 : product.table.firstThreshold}
          high={
            product === null
              ? 1
              : product.table.firstThreshold + (product.table.rows - 1) * product.table.step
          }
          step={product?.table.step ?? 1}
          onChange={(value) => commitThreshold(app, Math.round(value), 'field')}
        />
        {recipe.threshold.rule === 'sigma' ? (
          <NumberField
            label="k"
            unit="σ"
            value={recipe.threshold.sigmas}
            low={0.5}
            high={20}
            step={0.5}
            onChange={(value) => all(`threshold ${value} σ`, { threshold: { sigmas: value } })}
          />
        ) : null}
        {product === null ? null : (
          <p className="aside">
            {recipe.threshold.rule === 'hand' ? 'Set by hand for this emitter.' : product.byRule.message}
          </p>
        )}
      </section>

      <section aria-label="Dwells and fits">
        <h2>Dwells and fits</h2>
        {trace?.gate == null ? null : (
          <ChoiceField
            label="Dwells"
            value={recipe.dwells.gate}
            choices={GATES.filter(
              ({ group }) => product === null || (product.table.groups as readonly string[]).includes(group),
            )}
            onChange={(gate) => all(`dwells ${gate}`, { dwells: { gate } })}
          />
        )}
        <NumberField
          label="Sub-bin-safe"
          unit="bins"
          value={recipe.fit.shortest.subBinSafeBins}
          low={1}
          high={1000}
          step={1}
          note="No dwell below is fitted. 10 is safe against blinking inside a bin."
          onChange={(value) =>
            app.choices.change({ label: `sub-bin-safe ${value} bins` }, (before) => {
              const cleared =
                emitter === null
                  ? before
                  : withDifference(before, emitter.id, {
                      fit: { shortest: { rule: 'largest', handBins: { on: null, off: null } } },
                    })
              return withRecipe(cleared, { fit: { shortest: { subBinSafeBins: Math.round(value) } } })
            })
          }
        />
        {(['on', 'off'] as const).map((state) => (
          <ChoiceField
            key={state}
            label={`${state === 'on' ? 'On' : 'Off'} law`}
            value={recipe.fit.shown[state]}
            choices={[
              { value: 'best' as const, label: 'greatest weight' },
              ...(Object.keys(LAWS) as LawName[]).map((name) => ({ value: name, label: LAWS[name].label })),
            ]}
            onChange={(law) => all(`${state} law shown`, { fit: { shown: { [state]: law } } })}
          />
        ))}
        {differs && emitter !== null ? (
          <div className="row">
            <Button
              title="Drop what was chosen for this emitter alone"
              onClick={() =>
                app.choices.change({ label: 'back to the session’s recipe' }, (before) =>
                  withoutDifference(before, emitter.id),
                )
              }
            >
              Back to the session’s recipe
            </Button>
          </div>
        ) : null}
      </section>
    </>
  )
}

/** Spans in order, overlapping ones joined. */
export function mergeSpans(spans: readonly (readonly [number, number])[]): [number, number][] {
  const sorted = [...spans].sort((a, b) => a[0] - b[0])
  const out: [number, number][] = []
  for (const [from, to] of sorted) {
    const last = out.at(-1)
    if (last !== undefined && from <= last[1]) last[1] = Math.max(last[1], to)
    else out.push([from, to])
  }
  return out
}
