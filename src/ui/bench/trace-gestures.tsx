import { type PointerEvent as ReactPointerEvent, useEffect, useMemo, useRef } from 'react'
import type { Frame } from '../../figures/scene/scene.ts'
import type { AppModel } from '../bridge/app-model.ts'
import { useApp } from '../bridge/app-context.tsx'
import { dragPace } from '../bridge/drag-pace.ts'
import { benchNow } from './bench-state.ts'
import { clipWindow, panWindow, type TimeWindow, zoomWindow } from './time-window.ts'
import { pointAtTrace } from './trace-hover.ts'

/** Sets the visible window of the emitter on the bench and repaints in this frame. */
export function showWindow(app: AppModel, window: TimeWindow): void {
  const now = benchNow(app)
  if (now === null) return
  const clipped = clipWindow(
    window,
    { from: now.record[0], to: now.record[1] },
    now.trace.levelled.binSeconds,
  )
  app.choices.look((session) => ({
    ...session,
    view: {
      ...session.view,
      windows: { ...session.view.windows, [now.emitter.id]: [clipped.from, clipped.to] },
    },
  }))
  app.loop.request('upper', 'upper-live', 'strip')
}

/** Zoom by wheel, pan by drag and by keys, over the trace. */
export function TraceGestures({ frame }: { frame: Frame }) {
  const app = useApp()
  const ref = useRef<HTMLDivElement>(null)
  const pace = useMemo(
    () =>
      dragPace<TimeWindow>('trace-pan', (window) => {
        showWindow(app, window)
        app.loop.flush()
      }),
    [app],
  )

  const nowWindow = (): { window: TimeWindow; record: TimeWindow } | null => {
    const now = benchNow(app)
    return now === null
      ? null
      : {
          window: { from: now.window[0], to: now.window[1] },
          record: { from: now.record[0], to: now.record[1] },
        }
  }

  useEffect(() => {
    const element = ref.current
    if (element === null) return
    // React's wheel listeners are passive; zooming must keep the page still.
    const wheel = (event: WheelEvent): void => {
      const here = nowWindow()
      if (here === null) return
      event.preventDefault()
      const share = Math.min(
        1,
        Math.max(0, (event.clientX - element.getBoundingClientRect().left) / frame.width),
      )
      // A step that still waits for its frame counts as made.
      const from = pace.waiting() ?? here.window
      if (event.shiftKey || Math.abs(event.deltaX) > Math.abs(event.deltaY)) {
        pace.step(panWindow(from, (event.deltaX || event.deltaY) / frame.width, here.record), event.timeStamp)
      } else {
        const factor = Math.exp(Math.max(-1, Math.min(1, event.deltaY * 0.0025)))
        pace.step(zoomWindow(from, factor, share), event.timeStamp)
      }
    }
    element.addEventListener('wheel', wheel, { passive: false })
    return () => element.removeEventListener('wheel', wheel)
  })

  const pan = (press: ReactPointerEvent<HTMLDivElement>): void => {
    const here = nowWindow()
    if (here === null || press.button !== 0) return
    const element: HTMLElement = press.currentTarget
    element.setPointerCapture(press.pointerId)
    const listeners = new AbortController()
    const { signal } = listeners
    const moves = 'onpointerrawupdate' in element ? 'pointerrawupdate' : 'pointermove'
    element.addEventListener(
      moves as 'pointermove',
      (event) => {
        const share = (press.clientX - event.clientX) / frame.width
        pace.step(panWindow(here.window, share, here.record), event.timeStamp)
      },
      { signal },
    )
    for (const end of ['pointerup', 'pointercancel', 'lostpointercapture'] as const) {
      element.addEventListener(end, () => listeners.abort(), { signal })
    }
  }

  return (
    <div
      ref={ref}
      className="trace-gestures"
      // A region that takes keys: arrows move, plus and minus zoom, Home and End go to the ends, 0 shows all.
      role="application"
      tabIndex={0}
      aria-label="Trace: arrow keys move, plus and minus zoom, 0 shows the whole record"
      style={{ left: frame.x, top: frame.y, width: frame.width, height: frame.height }}
      onPointerDown={pan}
      onPointerMove={(event) => {
        if (event.buttons !== 0) return
        pointAtTrace(app, (event.clientX - event.currentTarget.getBoundingClientRect().left) / frame.width)
      }}
      onPointerLeave={() => pointAtTrace(app, null)}
      onDoubleClick={() => {
        const here = nowWindow()
        if (here !== null) showWindow(app, here.record)
      }}
      onKeyDown={(event) => {
        const here = nowWindow()
        if (here === null) return
        const step = event.shiftKey ? 0.5 : 0.1
        const moves: Record<string, () => TimeWindow> = {
          ArrowLeft: () => panWindow(here.window, -step, here.record),
          ArrowRight: () => panWindow(here.window, step, here.record),
          '+': () => zoomWindow(here.window, 0.7, 0.5),
          '=': () => zoomWindow(here.window, 0.7, 0.5),
          '-': () => zoomWindow(here.window, 1 / 0.7, 0.5),
          Home: () => panWindow(here.window, -1e9, here.record),
          End: () => panWindow(here.window, 1e9, here.record),
          '0': () => here.record,
        }
        const move = moves[event.key]
        if (move === undefined || event.ctrlKey || event.metaKey) return
        event.preventDefault()
        showWindow(app, move())
      }}
    />
  )
}
