import { useCallback, useEffect, useRef, useState } from 'react'
import { paintScene } from '../../figures/paint/canvas.ts'
import type { Palette } from '../../figures/scene/palette.ts'
import type { Panel, Scene } from '../../figures/scene/scene.ts'
import { recordHistogram } from '../../figures/scene/histogram-of-record.ts'
import { stabilityPanels } from '../../figures/scene/stability-of-rows.ts'
import {
  countsDomain,
  fillColumns,
  recordPanel,
  recordThresholdMarks,
  type TraceColumns,
  traceColumns,
} from '../../figures/scene/trace-of-record.ts'
import { recipeOf } from '../../state/choices/session-changes.ts'
import { useApp } from '../bridge/app-context.tsx'
import type { AppModel } from '../bridge/app-model.ts'
import { CanvasLayer, type CanvasSize } from '../bridge/canvas-layer.tsx'
import { leaveMeasure } from '../bridge/leave-measure.ts'
import { benchNow } from './bench-state.ts'
import { ThresholdHandle } from './threshold-handle.tsx'
import { TraceGestures } from './trace-gestures.tsx'
import { hoveredSpans } from './trace-hover.ts'
import { FONT_SIZE, upperLayout } from './upper-layout.ts'

const STATE_STRIP = 5

function sceneOf(size: CanvasSize, panels: readonly Panel[]): Scene {
  return {
    width: size.width,
    height: size.height,
    unit: 'px',
    fontSize: FONT_SIZE,
    hairline: 1,
    panels,
    notes: [],
  }
}

/** Columns of the trace for the present width, refilled when the window or the record changes. */
function useColumns(): (app: AppModel, count: number) => TraceColumns | null {
  const kept = useRef<{ columns: TraceColumns; key: unknown[] } | null>(null)
  return useCallback((app, count) => {
    const now = benchNow(app)
    if (now === null || count < 1) return null
    const key = [now.trace, now.window[0], now.window[1], count]
    if (kept.current === null || kept.current.key.some((part, i) => part !== key[i])) {
      const columns = kept.current?.columns.columns === count ? kept.current.columns : traceColumns(count)
      fillColumns(columns, now.trace, now.window)
      kept.current = { columns, key }
    }
    return kept.current.columns
  }, [])
}

/** Trace, histogram and stability columns: a still layer and, over it, what follows the threshold. */
export function UpperView({ palette }: { palette: Palette }) {
  const app = useApp()
  const columnsFor = useColumns()
  const [size, setSize] = useState<CanvasSize | null>(null)
  const ink = useRef(palette)
  ink.current = palette

  const paintStill = (context: CanvasRenderingContext2D, canvas: CanvasSize): void => {
    setSize((before) => (before?.width === canvas.width && before.height === canvas.height ? before : canvas))
    const now = benchNow(app)
    const layout = upperLayout(canvas.width, canvas.height)
    const columns = columnsFor(app, Math.round(layout.trace.width * canvas.pixelRatio))
    if (now === null || columns === null) return
    const recipe = recipeOf(app.choices.store.getState().session, now.emitter)
    const panels: Panel[] = [
      recordPanel(now.trace, {
        frame: layout.trace,
        window: now.window,
        columns,
        excluded: recipe.baseline.excludedSeconds,
        letter: '',
        spacing: 6 * FONT_SIZE,
      }),
      recordHistogram(now.trace, layout.histogram, ''),
    ]
    if (now.product !== null) {
      panels.push(
        ...stabilityPanels(
          now.product,
          app.results.getState().rows,
          countsDomain(now.trace),
          now.record[1] - now.record[0],
          layout.stability,
        ),
      )
    }
    paintScene(sceneOf(canvas, panels), ink.current, context)
  }

  const paintLive = (context: CanvasRenderingContext2D, canvas: CanvasSize): void => {
    const now = benchNow(app)
    const layout = upperLayout(canvas.width, canvas.height)
    const columns = columnsFor(app, Math.round(layout.trace.width * canvas.pixelRatio))
    if (now === null || columns === null || now.threshold === null) return
    const counts = countsDomain(now.trace)
    const bare = { label: '', side: 'none', ticks: 0 } as const
    const y = { kind: 'linear', domain: counts, ...bare } as const
    const { hover } = app.view.getState()
    const marks = recordThresholdMarks(now.trace, columns, now.window, now.threshold, STATE_STRIP)
    for (const [from, to] of hoveredSpans(now, hover))
      marks.unshift({ kind: 'span', from, to, fill: 'hover' })
    const panel = (
      frame: typeof layout.trace,
      own: Panel['marks'],
      domain: readonly [number, number],
    ): Panel => ({
      frame,
      x: { kind: 'linear', domain, ...bare },
      y,
      marks: own,
      letter: '',
      description: '',
    })
    const rule: Panel['marks'] = [
      {
        kind: 'rule',
        across: 'y',
        at: now.threshold,
        stroke: { role: 'threshold', weight: 1.4, dash: [5, 3] },
      },
    ]
    paintScene(
      sceneOf(canvas, [
        panel(layout.trace, marks, now.window),
        ...[layout.histogram, ...layout.stability].map((frame) => panel(frame, rule, [0, 1])),
      ]),
      ink.current,
      context,
    )
  }

  // What the painter itself takes is left as a measure, so that it can be compared in benchmarks.
  const timedStill = (context: CanvasRenderingContext2D, canvas: CanvasSize): void => {
    const start = performance.now()
    paintStill(context, canvas)
    leaveMeasure('upper-paint', start)
  }

  const stillReady = useRegistered('upper')
  const liveReady = useRegistered('upper-live')
  useEffect(() => {
    app.loop.request('upper', 'upper-live')
  }, [palette, app])

  return (
    <div className="plot upper" role="group" aria-label="Trace, histogram and stability over thresholds">
      <CanvasLayer paint={timedStill} onReady={stillReady} />
      <CanvasLayer paint={paintLive} onReady={liveReady} />
      {size === null ? null : (
        <>
          <TraceGestures frame={upperLayout(size.width, size.height).trace} />
          <ThresholdHandle layout={upperLayout(size.width, size.height)} />
        </>
      )}
    </div>
  )
}

/** Registers a canvas's repaint with the frame loop under a key. */
export function useRegistered(key: string): (repaint: (() => void) | null) => void {
  const app = useApp()
  const remove = useRef<(() => void) | null>(null)
  return useCallback(
    (repaint) => {
      remove.current?.()
      remove.current = repaint === null ? null : app.loop.add(key, repaint)
    },
    [app, key],
  )
}
