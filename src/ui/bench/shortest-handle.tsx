import type { Frame } from '../../figures/scene/scene.ts'
import { rowOf } from '../../core/pipeline/study-thresholds.ts'
import { recipeOf, withDifference } from '../../state/choices/session-changes.ts'
import { useApp, useChoices, useResults, useView } from '../bridge/app-context.tsx'
import { useDrag } from '../bridge/use-drag.ts'
import { siDuration } from '../../core/numeric/units.ts'
import { benchNow } from './bench-state.ts'
import { domainsOf } from './dwell-domains.ts'

const MOST_BINS = 1000

/** The mark of the shortest fitted dwell, draggable; choosing it by hand is a choice for this emitter. */
export function ShortestHandle({ state, frame }: { state: 0 | 1; frame: Frame }) {
  const app = useApp()
  const plot = useChoices((choices) => choices.session.view.dwellPlot)
  useResults((results) => results.rows)
  useResults((results) => results.settled)
  const live = useView((view) => view.liveShortest)
  useView((view) => view.liveThreshold)
  useChoices((state_) => state_.session)
  const now = benchNow(app)
  const domains = domainsOf(app, plot)
  const row = now?.product == null || now.threshold === null ? -1 : rowOf(now.product.table, now.threshold)
  const fits =
    (now?.settled?.threshold === now?.threshold ? now?.settled?.states[state].fits : undefined) ??
    app.results.getState().rows.get(row)?.states[state]
  // A number just set by hand is known before its fits are back.
  const choices =
    now === null ? null : recipeOf(app.choices.store.getState().session, now.emitter).fit.shortest
  const byHand = choices?.rule === 'hand' ? choices.handBins[state === 1 ? 'on' : 'off'] : null
  const bins = live?.state === state ? live.bins : (byHand ?? fits?.shortest.bins)
  const decade = domains === null ? 1 : Math.log(domains.x[1] / domains.x[0]) / frame.width

  const show = (value: number | null): void => {
    app.view.setState({ liveShortest: value === null ? null : { state, bins: value } })
    app.loop.request('dwells')
    app.loop.flush()
  }
  const choose = (value: number): void => {
    show(null)
    const emitter = now?.emitter
    if (emitter === undefined) return
    const key = state === 1 ? 'on' : 'off'
    app.choices.change(
      { label: `shortest ${key}-time ${value} bins`, joinWith: `shortest ${key} ${emitter.id}` },
      (session) =>
        withDifference(session, emitter.id, {
          fit: { shortest: { rule: 'hand', handBins: { [key]: value } } },
        }),
    )
  }
  const startDrag = useDrag({
    positionOf: (event) => event.clientX,
    valueNow: () => bins ?? 3,
    valueAt: (start, displacement) =>
      Math.min(MOST_BINS, Math.max(1, Math.round((start - 0.5) * Math.exp(displacement * decade) + 0.5))),
    onPreview: (value) => show(value),
    onCommit: choose,
    onRestore: () => show(null),
  })
  if (now === null || domains === null || bins === undefined) return null
  const seconds = bins * now.trace.levelled.binSeconds
  const share = Math.log((seconds * (1 - 0.5 / bins)) / domains.x[0]) / Math.log(domains.x[1] / domains.x[0])
  return (
    <div
      className="shortest-handle"
      role="slider"
      tabIndex={0}
      aria-label={`Shortest fitted ${state === 1 ? 'on' : 'off'}-time, bins`}
      aria-valuemin={1}
      aria-valuemax={MOST_BINS}
      aria-valuenow={bins}
      aria-valuetext={`${bins} bins, ${siDuration(seconds)}`}
      style={{ left: frame.x + share * frame.width, top: frame.y, height: frame.height }}
      onPointerDown={startDrag}
      onKeyDown={(event) => {
        const by =
          (event.key === 'ArrowRight' || event.key === 'ArrowUp'
            ? 1
            : event.key === 'ArrowLeft' || event.key === 'ArrowDown'
              ? -1
              : 0) * (event.shiftKey ? 10 : 1)
        if (by === 0) return
        event.preventDefault()
        choose(Math.min(MOST_BINS, Math.max(1, bins + by)))
      }}
    />
  )
}
