import type { Frame, Mark } from './scene.ts'
import { textWidth } from './text-width.ts'

/** Numbers of dwells at risk at durations (s). */
export interface RiskCounts {
  readonly seconds: ArrayLike<number>
  readonly numbers: ArrayLike<number>
}

interface RiskRoom {
  readonly frame: Frame
  readonly xDomain: readonly [number, number]
  readonly fontSize: number
}

/** Place of a value along a logarithmic axis, 0..1. */
export function shareOnLog(value: number, [from, to]: readonly [number, number]): number {
  return Math.log(value / from) / Math.log(to / from)
}

/** Numbers at risk at the decades of the axis, in the strip below the survival curve. */
export function riskMarks(
  { xDomain, frame, fontSize }: RiskRoom,
  { seconds, numbers }: RiskCounts,
  stripTop: number,
  floor: number,
): Mark[] {
  const strip = 1 - stripTop
  const marks: Mark[] = [
    { kind: 'rule', across: 'y', at: floor, stroke: { role: 'hair', weight: 1 } },
    {
      kind: 'text',
      x: 1 - (0.6 * fontSize) / frame.width,
      y: stripTop + 0.42 * strip,
      text: 'numbers at risk',
      anchor: 'end',
      role: 'soft',
    },
  ]
  for (let i = 0; i < seconds.length; i++) {
    const x = shareOnLog(seconds[i], xDomain)
    const half = textWidth(String(numbers[i]), fontSize) / (2 * frame.width)
    // Kept inside the frame at its ends.
    const place = Math.min(1 - half - 0.01, Math.max(half + 0.01, x))
    marks.push({
      kind: 'text',
      x: place,
      y: stripTop + 0.86 * strip,
      text: String(numbers[i]),
      anchor: 'middle',
      role: 'soft',
    })
  }
  return marks
}
