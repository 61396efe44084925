import type { Gate, GateClass, GateWindow } from '../photons/gate.ts'
import type { GateModel } from './emitter-model.ts'

/**
 * True edges of the wave inside a record: pairs [start, end) of driven spans in time order, flattened, s.
 * Empty without a gate or with duty 0.
 */
export function drivenSpans(gate: GateModel | null, durationSeconds: number): Float64Array {
  if (gate === null || gate.duty <= 0) return new Float64Array(0)
  const period = 2 * gate.halfPeriodSeconds
  if (gate.duty >= 1) return Float64Array.of(0, durationSeconds)
  const spans: number[] = []
  const first = Math.floor(-gate.offsetSeconds / period) - 1
  for (let cycle = first; ; cycle++) {
    const start = gate.offsetSeconds + (cycle + 1 - gate.duty) * period
    const end = gate.offsetSeconds + (cycle + 1) * period
    if (start >= durationSeconds) break
    if (end > 0) spans.push(Math.max(0, start), Math.min(end, durationSeconds))
  }
  return Float64Array.from(spans)
}

/**
 * The gate as the experimenter's clock reports it: windows that cover the record, with a guard after each edge and all
 * edges moved by the clock error.
 */
export function gateOfModel(gate: GateModel, durationSeconds: number): Gate {
  const declared = { ...gate, offsetSeconds: gate.offsetSeconds + gate.clockErrorSeconds }
  const spans = drivenSpans(declared, durationSeconds)
  const edges = Array.from(spans).filter((t) => t > 0 && t < durationSeconds)
  const drivenAt = (t: number): boolean => {
    for (let i = 0; i < spans.length; i += 2) if (t >= spans[i] && t < spans[i + 1]) return true
    return false
  }
  const windows: GateWindow[] = []
  const add = (startSeconds: number, endSeconds: number, gateClass: GateClass): void => {
    if (endSeconds > startSeconds) windows.push({ startSeconds, endSeconds, gateClass })
  }
  const starts = [0, ...edges]
  for (let i = 0; i < starts.length; i++) {
    const end = starts[i + 1] ?? durationSeconds
    const guardEnd = i === 0 ? 0 : Math.min(starts[i] + gate.guardSeconds, end)
    if (i > 0) add(starts[i], guardEnd, 'guard')
    add(guardEnd, end, drivenAt(starts[i]) ? 'driven' : 'reference')
  }
  return { windows }
}
