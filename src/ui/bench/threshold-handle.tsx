import { countsDomain } from '../../figures/scene/trace-of-record.ts'
import { rowOf, thresholdOf } from '../../core/pipeline/study-thresholds.ts'
import { useApp, useChoices, useResults, useView } from '../bridge/app-context.tsx'
import { useMemo } from 'react'
import { dragPace } from '../bridge/drag-pace.ts'
import { useDrag } from '../bridge/use-drag.ts'
import { benchNow } from './bench-state.ts'
import { commitThreshold, previewThreshold } from './threshold-actions.ts'
import type { UpperLayout } from './upper-layout.ts'

/** The threshold as a slider across trace, histogram and stability columns; mouse, pen, touch and keyboard. */
export function ThresholdHandle({ layout }: { layout: UpperLayout }) {
  const app = useApp()
  // These selections only make the handle follow; values are read from the stores when they are needed.
  useChoices((choices) => choices.session)
  useResults((results) => results.thresholds)
  useView((view) => view.liveThreshold)
  const now = benchNow(app)
  const product = now?.product ?? null
  const counts = now === null ? ([0, 1] as [number, number]) : countsDomain(now.trace)
  const perPixel = (counts[1] - counts[0]) / layout.trace.height

  const clip = (value: number): number =>
    product === null ? value : thresholdOf(product.table, rowOf(product.table, value))
  const pace = useMemo(
    () => dragPace<number>('threshold-drag', (value) => previewThreshold(app, value)),
    [app],
  )
  const keyPace = useMemo(
    () => dragPace<number>('threshold-drag', (value) => commitThreshold(app, value, 'key')),
    [app],
  )
  const startDrag = useDrag({
    positionOf: (event) => event.clientY,
    valueNow: () => benchNow(app)?.threshold ?? 0,
    valueAt: (start, displacement) => clip(Math.round(start - displacement * perPixel)),
    onPreview: (value, at) => pace.step(value, at),
    onCommit: (value) => {
      pace.end()
      commitThreshold(app, value, 'drag')
    },
    onRestore: () => {
      pace.end()
      previewThreshold(app, null)
    },
  })
  if (now === null || product === null || now.threshold === null) return null
  const { threshold } = now
  const y = layout.trace.y + layout.trace.height * (1 - (threshold - counts[0]) / (counts[1] - counts[0]))
  const last = layout.stability[2]
  const low = thresholdOf(product.table, 0)
  const high = thresholdOf(product.table, product.table.rows - 1)

  return (
    <div
      className="threshold-handle"
      role="slider"
      tabIndex={0}
      aria-label="Threshold, counts per bin"
      aria-orientation="vertical"
      aria-valuemin={low}
      aria-valuemax={high}
      aria-valuenow={threshold}
      aria-valuetext={`${threshold} counts`}
      style={{ top: y, left: layout.trace.x, width: last.x + last.width - layout.trace.x }}
      onPointerDown={startDrag}
      onKeyDown={(event) => {
        const step = product.table.step * (event.shiftKey ? 10 : 1)
        const next =
          event.key === 'ArrowUp' || event.key === 'ArrowRight'
            ? threshold + step
            : event.key === 'ArrowDown' || event.key === 'ArrowLeft'
              ? threshold - step
              : event.key === 'PageUp'
                ? threshold + 10 * product.table.step
                : event.key === 'PageDown'
                  ? threshold - 10 * product.table.step
                  : event.key === 'Home'
                    ? low
                    : event.key === 'End'
                      ? high
                      : null
        if (next === null) return
        event.preventDefault()
        event.stopPropagation()
        keyPace.step(clip(next), event.timeStamp)
      }}
    >
      <span className="threshold-tag" aria-hidden="true">
        {threshold}
      </span>
    </div>
  )
}
