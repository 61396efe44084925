import { type PointerEvent, useRef, useState } from 'react'
import { paintScene } from '../../figures/paint/canvas.ts'
import { valueAt } from '../../figures/scene/coordinates.ts'
import { dwellsAtThreshold } from '../../figures/scene/dwells-at-threshold.ts'
import { scanPanel } from '../../figures/scene/scan-panel.ts'
import type { Palette } from '../../figures/scene/palette.ts'
import { rowOf } from '../../core/pipeline/study-thresholds.ts'
import { recipeOf } from '../../state/choices/session-changes.ts'
import { useApp } from '../bridge/app-context.tsx'
import { CanvasLayer, type CanvasSize } from '../bridge/canvas-layer.tsx'
import { benchNow } from './bench-state.ts'
import { domainsOf } from './dwell-domains.ts'
import { ShortestHandle } from './shortest-handle.tsx'
import { dwellFrame, FONT_SIZE } from './upper-layout.ts'
import { useRegistered } from './upper-view.tsx'

/** One state's dwell times: density, survival or t x hazard, with fit, errors and handles. */
export function DwellView({ state, palette }: { state: 0 | 1; palette: Palette }) {
  const app = useApp()
  const [size, setSize] = useState<CanvasSize | null>(null)
  const ink = useRef(palette)
  ink.current = palette

  const paint = (context: CanvasRenderingContext2D, canvas: CanvasSize): void => {
    setSize((before) => (before?.width === canvas.width && before.height === canvas.height ? before : canvas))
    const now = benchNow(app)
    if (now?.product == null || now.threshold === null) return
    const { session } = app.choices.store.getState()
    const plot = session.view.dwellPlot
    const domains = domainsOf(app, plot)
    if (domains === null) return
    const view = app.view.getState()
    const row = rowOf(now.product.table, now.threshold)
    const exact = now.settled?.threshold === now.threshold ? now.settled : null
    const hover = view.hover?.state === state ? view.hover : null
    const bin = now.trace.levelled.binSeconds
    const liveShortest = view.liveShortest?.state === state ? view.liveShortest.bins : null
    if (plot === 'scan') {
      const bins = liveShortest ?? exact?.states[state].fits.shortest.bins ?? null
      const scan = scanPanel({
        frame: dwellFrame(canvas.width, canvas.height),
        state: state === 1 ? 'on' : 'off',
        rows: exact?.states[state].scan ?? [],
        shortestSeconds: bins === null ? null : bins * bin,
        xDomain: domains.x,
        letter: '',
      })
      paintScene(
        {
          width: canvas.width,
          height: canvas.height,
          unit: 'px',
          fontSize: FONT_SIZE,
          hairline: 1,
          panels: [scan],
          notes: [],
        },
        ink.current,
        context,
      )
      return
    }
    const panel = dwellsAtThreshold(now.product, now.trace.levelled, {
      frame: dwellFrame(canvas.width, canvas.height),
      state,
      plot,
      threshold: now.threshold,
      fits: exact?.states[state].fits ?? app.results.getState().rows.get(row)?.states[state] ?? null,
      liveShortestBins: liveShortest,
      hover: hover === null ? null : [(hover.lowBins - 0.5) * bin, (hover.highBins - 0.5) * bin],
      domains,
      letter: '',
      fontSize: FONT_SIZE,
      confidence: recipeOf(session, now.emitter).fit.confidence,
    })
    paintScene(
      {
        width: canvas.width,
        height: canvas.height,
        unit: 'px',
        fontSize: FONT_SIZE,
        hairline: 1,
        panels: [panel],
        notes: [],
      },
      ink.current,
      context,
    )
  }

  const point = (event: PointerEvent<HTMLDivElement>): void => {
    const now = benchNow(app)
    const domains = domainsOf(app, app.choices.store.getState().session.view.dwellPlot)
    if (now === null || domains === null || size === null) return
    const frame = dwellFrame(size.width, size.height)
    const x = event.clientX - event.currentTarget.getBoundingClientRect().left
    const share = (x - frame.x) / frame.width
    if (share < 0 || share > 1) {
      app.view.setState({ hover: null })
    } else {
      const seconds = valueAt({ kind: 'log', domain: domains.x, label: '', side: 'none', ticks: 0 }, share)
      const bins = seconds / now.trace.levelled.binSeconds
      const low = Math.max(1, Math.floor(bins / 1.18))
      app.view.setState({
        hover: {
          state,
          lowBins: low,
          highBins: Math.max(low + 1, Math.ceil(bins * 1.18)),
          startSeconds: null,
          endSeconds: null,
        },
      })
    }
    app.loop.request('dwells', 'upper-live')
  }

  const name = state === 1 ? 'On-times' : 'Off-times'
  return (
    <div
      className="plot"
      role="group"
      aria-label={`${name}, plot`}
      onPointerMove={point}
      onPointerLeave={() => {
        app.view.setState({ hover: null })
        app.loop.request('dwells', 'upper-live')
      }}
    >
      <CanvasLayer paint={paint} onReady={useRegistered('dwells')} />
      {size === null ? null : <ShortestHandle state={state} frame={dwellFrame(size.width, size.height)} />}
    </div>
  )
}
