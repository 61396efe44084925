import { type PointerEvent as ReactPointerEvent, useMemo, useRef } from 'react'
import { paintScene } from '../../figures/paint/canvas.ts'
import type { Palette } from '../../figures/scene/palette.ts'
import type { Mark } from '../../figures/scene/scene.ts'
import {
  countsDomain,
  fillColumns,
  fillStates,
  type TraceColumns,
  traceColumns,
} from '../../figures/scene/trace-of-record.ts'
import { useApp } from '../bridge/app-context.tsx'
import { dragPace } from '../bridge/drag-pace.ts'
import type { TimeWindow } from './time-window.ts'
import { CanvasLayer, type CanvasSize } from '../bridge/canvas-layer.tsx'
import { benchNow } from './bench-state.ts'
import { showWindow } from './trace-gestures.tsx'
import { FONT_SIZE } from './upper-layout.ts'
import { useRegistered } from './upper-view.tsx'

const LEFT = 52

/** The whole record with the visible window in it; press or drag to move the window. */
export function StripView({ palette }: { palette: Palette }) {
  const app = useApp()
  const ink = useRef(palette)
  ink.current = palette
  const width = useRef(1)
  const pace = useMemo(
    () =>
      dragPace<TimeWindow>('trace-pan', (window) => {
        showWindow(app, window)
        app.loop.flush()
      }),
    [app],
  )
  const kept = useRef<{ columns: TraceColumns; trace: unknown } | null>(null)

  const paint = (context: CanvasRenderingContext2D, canvas: CanvasSize): void => {
    const now = benchNow(app)
    width.current = canvas.width - LEFT - 10
    if (now === null || width.current < 20) return
    const count = Math.round(width.current * canvas.pixelRatio)
    if (kept.current === null || kept.current.trace !== now.trace || kept.current.columns.columns !== count) {
      const columns = traceColumns(count)
      fillColumns(columns, now.trace, now.record)
      kept.current = { columns, trace: now.trace }
    }
    const { columns } = kept.current
    const marks: Mark[] = [
      ...(now.trace.gate?.windows ?? [])
        .filter(({ gateClass }) => gateClass === 'driven')
        .map(
          (window): Mark => ({
            kind: 'span',
            from: window.startSeconds,
            to: window.endSeconds,
            fill: 'driven',
          }),
        ),
      { kind: 'envelope', lows: columns.drawnLows, highs: columns.drawnHighs, columns: count, role: 'trace' },
    ]
    if (now.threshold !== null) {
      fillStates(columns, now.threshold)
      marks.push({ kind: 'states', states: columns.states, columns: count, thickness: 3 })
    }
    const outside: Mark[] = [
      { kind: 'span', from: now.record[0], to: now.window[0], fill: 'guard' },
      { kind: 'span', from: now.window[1], to: now.record[1], fill: 'guard' },
    ]
    const edge = { role: 'ink', weight: 1.2 } as const
    paintScene(
      {
        width: canvas.width,
        height: canvas.height,
        unit: 'px',
        fontSize: FONT_SIZE,
        hairline: 1,
        notes: [],
        panels: [
          {
            frame: { x: LEFT, y: 3, width: width.current, height: canvas.height - 6 },
            x: { kind: 'linear', domain: now.record, label: '', side: 'none', ticks: 0 },
            y: { kind: 'linear', domain: countsDomain(now.trace), label: '', side: 'none', ticks: 0 },
            marks: [
              ...marks,
              ...outside,
              { kind: 'rule', across: 'x', at: now.window[0], stroke: edge },
              { kind: 'rule', across: 'x', at: now.window[1], stroke: edge },
            ],
            letter: '',
            description: 'Whole record with the visible window.',
          },
        ],
      },
      ink.current,
      context,
    )
  }

  const moveTo = (event: { clientX: number; timeStamp: number }, left: number): void => {
    const now = benchNow(app)
    if (now === null) return
    const share = (event.clientX - left - LEFT) / width.current
    const middle = now.record[0] + share * (now.record[1] - now.record[0])
    const half = (now.window[1] - now.window[0]) / 2
    const window: TimeWindow = {
      from: Math.min(now.record[1] - 2 * half, Math.max(now.record[0], middle - half)),
      to: Math.max(now.record[0] + 2 * half, Math.min(now.record[1], middle + half)),
    }
    pace.step(window, event.timeStamp)
  }
  const press = (event: ReactPointerEvent<HTMLDivElement>): void => {
    if (event.button !== 0) return
    const element: HTMLElement = event.currentTarget
    const { left } = element.getBoundingClientRect()
    element.setPointerCapture(event.pointerId)
    moveTo(event, left)
    const listeners = new AbortController()
    element.addEventListener('pointermove', (move) => moveTo(move, left), { signal: listeners.signal })
    for (const end of ['pointerup', 'pointercancel', 'lostpointercapture'] as const) {
      element.addEventListener(end, () => listeners.abort(), { signal: listeners.signal })
    }
  }
  return (
    <div
      className="plot strip"
      onPointerDown={press}
      role="group"
      aria-label="Whole record; use the trace's keys to move"
    >
      <CanvasLayer paint={paint} onReady={useRegistered('strip')} />
    </div>
  )
}
