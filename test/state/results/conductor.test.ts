import { describe, expect, it } from 'vitest'
import type { RowFits, ThresholdProduct, TraceProduct } from '../../../src/core/pipeline/analysis-products.ts'
import type { BenchNumbers } from '../../../src/core/pipeline/emitter-numbers.ts'
import type { RecipeDifference } from '../../../src/core/recipe/resolve-recipe.ts'
import { newSession } from '../../../src/session/schema/session.ts'
import { choicesStore } from '../../../src/state/choices/choices-store.ts'
import { withDifference, withRecipe } from '../../../src/state/choices/session-changes.ts'
import { conductor } from '../../../src/state/results/conductor.ts'
import { resultsStore } from '../../../src/state/results/results-store.ts'
import { viewStore } from '../../../src/state/view/view-store.ts'
import type { AnalysisRequest, Outcome } from '../../../src/worker/protocol/service.ts'

const FIRST = 5
const ROWS = 60
const BY_RULE = 30

/** Products that carry the name of what they were made of; the conductor looks at the table's axis only. */
function traceOf(name: string): TraceProduct {
  return { made: name } as unknown as TraceProduct
}
function thresholdsOf(name: string): ThresholdProduct {
  return {
    made: name,
    table: { firstThreshold: FIRST, step: 1, rows: ROWS },
    byRule: { counts: BY_RULE },
  } as unknown as ThresholdProduct
}
function rowOf(row: number, name: string): RowFits {
  return { row, made: name } as unknown as RowFits
}

type Stage = 'trace' | 'thresholds' | 'rows' | 'settle'

function stage() {
  let now = 0
  const choices = choicesStore(
    newSession(
      's',
      'one',
      'then',
      ['a', 'b'].map((id) => ({
        id,
        name: id,
        origin: { kind: 'demonstration', name: id },
        difference: {},
      })),
    ),
    { milliseconds: () => now, iso: () => 'then' },
  )
  const view = viewStore('system')
  const results = resultsStore()
  const timers: (() => void)[] = []
  const asked: { stage: Stage; name: string; recipe: AnalysisRequest['recipe']; at: unknown }[] = []
  /** Stages whose answers wait for the test. */
  const held = new Map<Stage, (() => void)[]>()
  const failing = new Map<Stage, Outcome<never>>()

  const answer = async <T>(
    which: Stage,
    request: AnalysisRequest,
    at: unknown,
    value: T,
  ): Promise<Outcome<T>> => {
    asked.push({ stage: which, name: request.name, recipe: request.recipe, at })
    const failure = failing.get(which)
    const waiting = held.get(which)
    if (waiting !== undefined) await new Promise<void>((resolve) => waiting.push(resolve))
    return failure ?? { ok: true, value }
  }
  const here = conductor(
    choices.store,
    view,
    results,
    {
      trace: (request) =>
        answer('trace', request, null, traceOf(`${request.name} ${request.recipe.bin.seconds}`)),
      thresholds: (request) =>
        answer('thresholds', request, null, thresholdsOf(request.recipe.threshold.rule)),
      rowFits: (request, rows) =>
        answer(
          'rows',
          request,
          rows,
          rows.map((row) => rowOf(row, `${request.recipe.fit.confidence}`)),
        ),
      settle: (request, at) => answer('settle', request, at, { threshold: at } as unknown as BenchNumbers),
      rawFile: () => Promise.resolve(null),
    },
    {
      milliseconds: () => (now += 5),
      after(_, callback) {
        timers.push(callback)
        return () => {
          timers.splice(timers.indexOf(callback), 1)
        }
      },
    },
  )
  choices.store.subscribe((state, before) => {
    if (state.session !== before.session) here.refresh()
  })
  const quiet = async (): Promise<void> => {
    for (let round = 0; round < 20; round++) await new Promise((resolve) => setImmediate(resolve))
  }
  return {
    choices,
    view,
    results,
    here,
    asked,
    held,
    failing,
    timers,
    quiet,
    change: (difference: RecipeDifference) =>
      choices.change({ label: 'x' }, (session) => withRecipe(session, difference)),
    show: (id: string) => choices.look((session) => ({ ...session, currentEmitterId: id })),
    async settle() {
      await quiet()
      for (const callback of timers.splice(0)) callback()
      await quiet()
    },
    /** Stages asked for since the last time, without repeats in a row. */
    stages(): Stage[] {
      const list = asked.splice(0).map((one) => one.stage)
      return list.filter((one, index) => one !== list[index - 1])
    },
  }
}

async function settledStage() {
  const one = stage()
  one.here.refresh()
  await one.settle()
  one.stages()
  return one
}

describe('conductor', () => {
  it('goes from the trace to settled numbers, rows nearest to the threshold first', async () => {
    const one = stage()
    one.here.refresh()
    await one.settle()
    const state = one.results.getState()
    expect(state).toMatchObject({
      emitterId: 'a',
      trace: { status: 'arrived', value: traceOf('a 0.01') },
      thresholds: { status: 'arrived' },
      settled: { status: 'arrived', value: { threshold: BY_RULE } },
      rowsWithIntervals: ROWS,
    })
    expect([...state.rows.keys()].sort((x, y) => x - y)).toEqual(
      Array.from({ length: ROWS }, (_, row) => row),
    )
    const rows = one.asked.filter((ask) => ask.stage === 'rows').flatMap((ask) => ask.at as number[])
    expect(rows.length).toBe(ROWS)
    const away = rows.map((row) => Math.abs(row - (BY_RULE - FIRST)))
    expect(away).toEqual([...away].sort((x, y) => x - y))
    expect(one.stages()).toEqual(['trace', 'thresholds', 'rows', 'settle'])
    expect(one.here.threshold()).toBe(BY_RULE)
  })

  it('asks again only for what a choice touches', async () => {
    const one = await settledStage()
    const cases: readonly (readonly [RecipeDifference, readonly Stage[]])[] = [
      [{ bin: { seconds: 0.05 } }, ['trace', 'thresholds', 'rows', 'settle']],
      [{ baseline: { method: 'constant' } }, ['trace', 'thresholds', 'rows', 'settle']],
      [{ dwells: { gate: 'driven' } }, ['thresholds', 'rows', 'settle']],
      [{ fit: { confidence: 0.9 } }, ['rows', 'settle']],
      [{ threshold: { sigmas: 6 } }, ['thresholds']],
      [{ threshold: { rule: 'hand', handCounts: 12 } }, ['thresholds', 'settle']],
      [{ goodness: { samples: 10 } }, []],
    ]
    for (const [difference, expected] of cases) {
      one.change(difference)
      await one.settle()
      expect(one.stages(), JSON.stringify(difference)).toEqual(expected)
    }
    expect(one.results.getState().settled).toMatchObject({ status: 'arrived', value: { threshold: 12 } })
    one.choices.change({ label: 'x' }, (session) => withDifference(session, 'b', { bin: { seconds: 1 } }))
    await one.settle()
    expect(one.stages()).toEqual([])
  })

  it('drops what arrives for choices that have changed', async () => {
    const one = await settledStage()
    one.held.set('trace', [])
    one.change({ bin: { seconds: 0.05 } })
    await one.quiet()
    one.change({ bin: { seconds: 0.1 } })
    await one.quiet()
    const [first, second] = one.held.get('trace') ?? []
    one.held.delete('trace')
    second()
    await one.settle()
    expect(one.results.getState().trace).toEqual({ status: 'arrived', value: traceOf('a 0.1') })
    first()
    await one.settle()
    expect(one.results.getState().trace).toEqual({ status: 'arrived', value: traceOf('a 0.1') })
  })

  it('shows nothing of one emitter under the name of another', async () => {
    const one = await settledStage()
    one.held.set('trace', [])
    one.show('b')
    expect(one.results.getState()).toMatchObject({
      emitterId: 'b',
      trace: { status: 'running', last: null },
      thresholds: { status: 'none' },
      settled: { status: 'none' },
    })
    expect(one.results.getState().rows.size).toBe(0)
    expect(one.here.threshold()).toBeNull()
  })

  it('keeps the last trace on screen while the bin changes', async () => {
    const one = await settledStage()
    one.held.set('trace', [])
    one.change({ bin: { seconds: 0.05 } })
    expect(one.results.getState().trace).toEqual({ status: 'running', last: traceOf('a 0.01') })
  })

  it('drops rows fitted under other laws', async () => {
    const one = await settledStage()
    one.held.set('rows', [])
    one.change({ fit: { confidence: 0.9 } })
    await one.quiet()
    one.change({ fit: { confidence: 0.8 } })
    expect(one.results.getState().rows.size).toBe(0)
    const waiting = one.held.get('rows') ?? []
    one.held.delete('rows')
    for (const resolve of waiting) resolve()
    await one.settle()
    const made = [...one.results.getState().rows.values()].map(
      (row) => (row as unknown as { made: string }).made,
    )
    expect(made).toEqual(Array.from({ length: ROWS }, () => '0.8'))
  })

  it('fits rows around the threshold under the pointer', async () => {
    const one = stage()
    one.view.setState({ liveThreshold: FIRST + 3 })
    one.here.refresh()
    await one.quiet()
    const [first] = one.asked.filter((ask) => ask.stage === 'rows')
    expect((first.at as number[])[0]).toBe(3)
  })

  it('settles once for changes in quick succession', async () => {
    const one = await settledStage()
    for (let counts = 10; counts < 20; counts++) {
      one.change({ threshold: { rule: 'hand', handCounts: counts } })
      await one.quiet()
    }
    await one.settle()
    expect(one.asked.filter((ask) => ask.stage === 'settle').map((ask) => ask.at)).toEqual([19])
  })

  it.each(['trace', 'thresholds', 'settle'] as const)(
    'puts a failure of %s in words and recovers',
    async (which) => {
      const one = stage()
      one.failing.set(which, { ok: false, sentence: 'Too few photons.' })
      one.here.refresh()
      await one.settle()
      const key = which === 'settle' ? 'settled' : which
      expect(one.results.getState()[key]).toEqual({ status: 'failed', sentence: 'Too few photons.' })
      one.failing.clear()
      one.change({ bin: { seconds: 0.05 } })
      await one.settle()
      expect(one.results.getState()[key].status).toBe('arrived')
    },
  )

  it.each([{}, { stopped: true }])('does not ask for ever for rows that fail (%j)', async (more) => {
    const one = stage()
    one.failing.set('rows', { ok: false, sentence: 'No.', ...more })
    one.here.refresh()
    await one.settle()
    expect(one.asked.filter((ask) => ask.stage === 'rows').length).toBeLessThan(5)
    one.failing.clear()
    one.here.refresh()
    await one.settle()
    expect(one.results.getState().rows.size).toBe(ROWS)
  })

  it('has nothing to do for a session without emitters', async () => {
    const one = await settledStage()
    one.choices.change({ label: 'x' }, (session) => ({ ...session, emitters: [], currentEmitterId: null }))
    await one.settle()
    expect(one.results.getState()).toMatchObject({ emitterId: null, trace: { status: 'none' } })
    expect(one.here.threshold()).toBeNull()
    expect(await one.here.request()).toBeNull()
    expect(one.stages()).toEqual([])
  })
})
