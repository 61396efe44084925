import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  type DragEffect,
  type DragEvent,
  type DragState,
  IDLE,
  stepDrag,
} from '../../../src/ui/bridge/drag-machine.ts'

/** Ten pixels a count, clipped to 0..100. */
const valueAt = (start: number, displacement: number): number =>
  Math.min(100, Math.max(0, Math.round(start + displacement / 10)))

function play(events: readonly DragEvent[]): { effects: DragEffect[]; state: DragState } {
  const effects: DragEffect[] = []
  let state: DragState = IDLE
  for (const event of events) {
    const next = stepDrag(state, event, valueAt)
    state = next.state
    if (next.effect.kind !== 'none') effects.push(next.effect)
  }
  return { effects, state }
}

const press = (position: number, value: number): DragEvent => ({ kind: 'press', position, value })
const move = (position: number): DragEvent => ({ kind: 'move', position })
const RELEASE: DragEvent = { kind: 'release' }
const CANCEL: DragEvent = { kind: 'cancel' }

const position = fc.integer({ min: -2000, max: 2000 })
const anyEvent: fc.Arbitrary<DragEvent> = fc.oneof(
  fc.record({ kind: fc.constant('press' as const), position, value: fc.nat(100) }),
  { weight: 5, arbitrary: fc.record({ kind: fc.constant('move' as const), position }) },
  fc.constant(RELEASE),
  fc.constant(CANCEL),
)

describe('stepDrag', () => {
  it('previews each new value once and commits the last', () => {
    const { effects, state } = play([press(100, 20), move(104), move(111), move(112), move(150), RELEASE])
    expect(effects).toEqual([
      { kind: 'preview', value: 21 },
      { kind: 'preview', value: 25 },
      { kind: 'commit', value: 25 },
    ])
    expect(state).toBe(IDLE)
  })

  it('a click without movement commits nothing', () => {
    expect(play([press(100, 20), RELEASE]).effects).toEqual([])
    expect(play([press(100, 20), move(101), RELEASE]).effects).toEqual([])
  })

  it('Escape restores the value at the press and ends the drag', () => {
    const { effects, state } = play([press(100, 20), move(150), CANCEL, move(300), RELEASE])
    expect(effects).toEqual([
      { kind: 'preview', value: 25 },
      { kind: 'restore', value: 20 },
    ])
    expect(state).toBe(IDLE)
  })

  it('a drag back to where it began leaves the first value on screen and no step of undo', () => {
    expect(play([press(100, 20), move(150), move(100), RELEASE]).effects).toEqual([
      { kind: 'preview', value: 25 },
      { kind: 'preview', value: 20 },
    ])
  })

  it('does not take up errors of rounding: the value follows from the total displacement', () => {
    fc.assert(
      fc.property(
        fc.array(position, { minLength: 1, maxLength: 200, size: 'max' }),
        fc.nat(100),
        (moves, start) => {
          const { effects } = play([press(0, start), ...moves.map(move), RELEASE])
          const end = valueAt(start, moves[moves.length - 1])
          expect(effects.filter(({ kind }) => kind === 'commit')).toEqual(
            end === start ? [] : [{ kind: 'commit', value: end }],
          )
        },
      ),
      { seed: 121 },
    )
  })

  it('after any events: what is on screen when idle is what was last committed or restored', () => {
    fc.assert(
      fc.property(fc.array(anyEvent, { maxLength: 150, size: 'max' }), (events) => {
        let state: DragState = IDLE
        let saved = 50
        let screen = saved
        for (const event of events) {
          // The value at the press is the one on screen.
          const sent = event.kind === 'press' ? { ...event, value: screen } : event
          const { state: next, effect } = stepDrag(state, sent, valueAt)
          if (state.phase === 'idle' && event.kind !== 'press') expect(effect.kind).toBe('none')
          if (state.phase === 'dragging' && event.kind === 'press') expect(next).toBe(state)
          if (effect.kind !== 'none') screen = effect.value
          if (effect.kind === 'commit') {
            expect(effect.value).not.toBe(saved)
            saved = effect.value
          }
          if (next.phase === 'idle') expect(screen).toBe(saved)
          else expect(next.value).toBe(screen)
          state = next
        }
      }),
      { seed: 122, numRuns: 300 },
    )
  })
})
