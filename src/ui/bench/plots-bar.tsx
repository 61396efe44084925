import { useRef } from 'react'
import type { DwellPlot } from '../../session/schema/session.ts'
import { roundTo } from '../../core/numeric/units.ts'
import { useApp, useChoices, useResults } from '../bridge/app-context.tsx'
import { Button } from '../controls/button.tsx'
import { Segments } from '../controls/segments.tsx'

const PLOTS: readonly { value: DwellPlot; label: string; hint: string }[] = [
  { value: 'density', label: 'Density', hint: 'Counts per width, exact Poisson bars' },
  {
    value: 'neighbour',
    label: 'Neighbour',
    hint: 'Density with neighbour spacing (Kuno et al. 2001); a picture, not for fitting',
  },
  { value: 'survival', label: 'Survival', hint: 'Product-limit estimate with censored dwells' },
  { value: 'hazard', label: 't × hazard', hint: 'Flat for a power law, rises at a cutoff' },
  {
    value: 'scan',
    label: 'α by shortest',
    hint: 'The shown law’s first parameter against the shortest fitted dwell',
  },
]

/** Which form of the dwell plots is shown, and the goodness-of-fit tests. */
export function PlotsBar() {
  const app = useApp()
  const plot = useChoices((choices) => choices.session.view.dwellPlot)
  const done = useResults((results) => results.rows.size)
  const rows = useResults((results) =>
    results.thresholds.status === 'arrived' ? results.thresholds.value.table.rows : 0,
  )
  return (
    <div className="plots-bar">
      <Segments
        label="Form of the dwell plots"
        value={plot}
        choices={PLOTS}
        onChange={(dwellPlot) => {
          app.choices.look((session) => ({ ...session, view: { ...session.view, dwellPlot } }))
          app.loop.request('dwells')
        }}
      />
      <Goodness state={0} />
      <Goodness state={1} />
      <span className="spring" />
      <Key />
      <span className={done < rows ? 'aside progress-note' : 'visually-hidden'} aria-live="off">
        {rows > 0 && done < rows
          ? `Fits for ${done} of ${rows} thresholds`
          : rows > 0
            ? `All ${rows} thresholds fitted`
            : ''}
      </span>
    </div>
  )
}

/** What the tints mean. */
function Key() {
  const gated = useResults((results) =>
    results.trace.status === 'arrived' ? results.trace.value.gate !== null : false,
  )
  return (
    <span className="key">
      {gated ? (
        <span>
          <i className="swatch driven" /> gate on
        </span>
      ) : null}
      <span title="Dwells that shot noise alone is expected to make, from the error rates at this threshold">
        <i className="swatch spurious" /> spurious
      </span>
      <span title="Pieces of true dwells that miscalled bins are expected to leave">
        <i className="swatch split" /> split
      </span>
    </span>
  )
}

/** Starts, shows and stops one parametric bootstrap. */
function Goodness({ state }: { state: 0 | 1 }) {
  const app = useApp()
  const arrival = useResults((results) => results.goodness[String(state)])
  const progress = useResults((results) => results.goodnessProgress)
  const settled = useResults((results) => results.settled.status === 'arrived')
  const running = useRef<{ stop(): void } | null>(null)
  const name = state === 1 ? 'on' : 'off'
  if (arrival?.status === 'running') {
    return (
      <span className="goodness">
        <progress value={progress} aria-label={`Goodness of fit, ${name}-times`} />
        <Button onClick={() => running.current?.stop()}>Stop</Button>
      </span>
    )
  }
  const verdict =
    arrival?.status === 'arrived' && arrival.value.p !== null
      ? `${name}: p = ${roundTo(arrival.value.p, arrival.value.pError, 2)} ± ${roundTo(arrival.value.pError ?? 0, null, 1)}${arrival.value.state === 'stopped' ? ` (${arrival.value.samples} samples)` : ''}`
      : arrival?.status === 'failed'
        ? arrival.sentence
        : null
  return (
    <span className="goodness">
      <Button
        disabled={!settled}
        title="Parametric bootstrap of the Kolmogorov–Smirnov distance"
        onClick={() => {
          running.current = app.startGoodness(state)
        }}
      >
        {verdict === null ? `Goodness of fit, ${name}` : 'Again'}
      </Button>
      {verdict === null ? null : <strong aria-live="polite">{verdict}</strong>}
    </span>
  )
}
