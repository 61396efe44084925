import { useEffect, useMemo } from 'react'
import type { Palette } from '../../figures/scene/palette.ts'
import { rowOf } from '../../core/pipeline/study-thresholds.ts'
import { shown } from '../../state/results/results-store.ts'
import { useApp, useChoices, useResults, useView } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { benchNow } from './bench-state.ts'
import { DwellView } from './dwell-view.tsx'
import { liveReading } from './live-reading.ts'
import { PlotsBar } from './plots-bar.tsx'
import { ReadingColumn } from './reading-column.tsx'
import { StripView } from './strip-view.tsx'
import { UpperView } from './upper-view.tsx'

/** One emitter: trace, plots and numbers, all following one threshold. */
export function BenchScreen({ palette }: { palette: Palette }) {
  const app = useApp()
  const failure = useResults((results) =>
    results.trace.status === 'failed'
      ? results.trace.sentence
      : results.thresholds.status === 'failed'
        ? results.thresholds.sentence
        : null,
  )
  useEffect(() => {
    const repaint = (): void => app.loop.request('upper', 'upper-live', 'dwells', 'strip')
    const stopResults = app.results.subscribe((now, before) => {
      if (now.rows !== before.rows && now.trace === before.trace && now.thresholds === before.thresholds) {
        app.loop.request('upper', 'dwells')
      } else repaint()
    })
    const stopChoices = app.choices.store.subscribe(repaint)
    repaint()
    return () => {
      stopResults()
      stopChoices()
    }
  }, [app])
  useEffect(() => {
    app.loop.request('upper', 'upper-live', 'dwells', 'strip')
  }, [palette, app])

  return (
    <main className="bench" aria-label="Bench">
      {failure === null ? (
        <UpperView palette={palette} />
      ) : (
        <div className="plot">
          <p className="notice bad" role="alert">
            {failure} <Button onClick={() => app.conductor.again()}>Try again</Button>
          </p>
        </div>
      )}
      <StripView palette={palette} />
      <PlotsBar />
      <div className="lower">
        <DwellView state={0} palette={palette} />
        <DwellView state={1} palette={palette} />
      </div>
    </main>
  )
}

/** The reading column; rendered inside a drag step, so it only looks things up. */
export function BenchReading() {
  const app = useApp()
  const session = useChoices((choices) => choices.session)
  const live = useView((view) => view.liveThreshold)
  const trace = useResults((results) => results.trace)
  const thresholds = useResults((results) => results.thresholds)
  const rows = useResults((results) => results.rows)
  const settled = useResults((results) => results.settled)
  const now = benchNow(app)
  // Everything the reading depends on is in the list; `now` is made anew at each render.
  const reading = useMemo(() => {
    if (now?.product == null || now.threshold === null) return null
    const row = rowOf(now.product.table, now.threshold)
    return liveReading(now.product, now.trace.levelled, now.threshold, rows.get(row) ?? null, shown(settled))
  }, [session, live, trace, thresholds, rows, settled])
  const exact = shown(settled)
  const current = exact !== null && exact.threshold === now?.threshold ? exact : null
  return (
    <ReadingColumn
      reading={reading}
      warnings={(current?.flags ?? []).map(({ sentence }) => sentence)}
      comparisons={
        current === null
          ? [[], []]
          : [
              current.states[0].comparisons.map(({ sentence }) => sentence),
              current.states[1].comparisons.map(({ sentence }) => sentence),
            ]
      }
      onHelp={(key) => app.view.setState({ helpOpen: true, helpEntry: key })}
    />
  )
}
