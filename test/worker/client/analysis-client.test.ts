import { afterEach, describe, expect, it } from 'vitest'
import { DEFAULT_RECIPE } from '../../../src/core/recipe/default-recipe.ts'
import {
  type AnalysisClient,
  analysisClient,
  type ClientOptions,
} from '../../../src/worker/client/analysis-client.ts'
import type { AnalysisRequest, AnalysisService, Outcome } from '../../../src/worker/protocol/service.ts'
import { type FakeWorker, fakeWorker } from './fake-worker.ts'

const request: AnalysisRequest = {
  origin: { kind: 'demonstration', name: 'x' },
  name: 'x',
  recipe: DEFAULT_RECIPE,
  file: null,
}

/** A call the worker was given, answered when the test says so. */
interface Call {
  readonly worker: number
  readonly job: number
  answer(value: Outcome<string>): void
  fail(error: Error): void
}

interface Scene {
  readonly client: AnalysisClient
  readonly workers: FakeWorker[]
  readonly calls: Call[]
  readonly stopped: number[]
  readonly deaths: string[]
  run(lane: string, signal?: AbortSignal): Promise<Outcome<string>>
  /** Resolves when the workers have been given `count` calls in all. */
  given(count: number): Promise<void>
}

const scenes: Scene[] = []
afterEach(() => {
  for (const { client, workers } of scenes.splice(0)) {
    client.close()
    for (const worker of workers) worker.terminate?.()
  }
})

async function until(met: () => boolean): Promise<void> {
  while (!met()) await new Promise((resolve) => setTimeout(resolve, 1))
}

function scene(options: Partial<ClientOptions> = {}): Scene {
  const workers: FakeWorker[] = []
  const calls: Call[] = []
  const stopped: number[] = []
  const deaths: string[] = []
  const client = analysisClient({
    spawn() {
      const number = workers.length
      const service: Partial<AnalysisService> = {
        dwellsCsv: (job) =>
          new Promise((resolve, reject) => {
            calls.push({ worker: number, job, answer: resolve, fail: reject })
          }),
        stop: (job) => {
          stopped.push(job)
        },
        holdLock: () => Promise.resolve(true),
      }
      workers.push(fakeWorker(service))
      return workers[number]
    },
    poolSize: 2,
    locks: null,
    onDeath: (sentence) => deaths.push(sentence),
    ...options,
  })
  const here: Scene = {
    client,
    workers,
    calls,
    stopped,
    deaths,
    run: (lane, signal) => client.run(lane, (service, job) => service.dwellsCsv(job, request, 1), signal),
    given: (count) => until(() => calls.length >= count),
  }
  scenes.push(here)
  return here
}

const STOPPED = { ok: false, sentence: 'Stopped.', stopped: true }
const done = (value: string): Outcome<string> => ({ ok: true, value })

describe('analysisClient.run', () => {
  it('brings answers back, from one worker hired at the first call', async () => {
    const here = scene()
    expect(here.workers).toHaveLength(0)
    const one = here.run('a')
    const two = here.run('b')
    await here.given(2)
    here.calls[1].answer(done('two'))
    here.calls[0].answer({ ok: false, sentence: 'No dwells.' })
    expect(await Promise.all([one, two])).toEqual([{ ok: false, sentence: 'No dwells.' }, done('two')])
    expect(here.workers).toHaveLength(1)
  })

  it('in one lane lets only the latest call matter, and stops the others in the worker', async () => {
    const here = scene()
    const outcomes = Array.from({ length: 20 }, () => here.run('a'))
    const aside = here.run('b')
    await here.given(21)
    // The earlier ones settle without an answer.
    expect(await Promise.all(outcomes.slice(0, -1))).toEqual(Array.from({ length: 19 }, () => STOPPED))
    for (const [index, call] of here.calls.entries()) call.answer(done(`${index}`))
    expect(await outcomes[19]).toEqual(done('19'))
    expect(await aside).toEqual(done('20'))
    await until(() => here.stopped.length === 19)
    expect(here.stopped).toEqual(here.calls.slice(0, 19).map(({ job }) => job))
  })

  it('a lane is free again after its call', async () => {
    const here = scene()
    for (let round = 0; round < 3; round++) {
      const outcome = here.run('a')
      await here.given(round + 1)
      here.calls[round].answer(done(`${round}`))
      expect(await outcome).toEqual(done(`${round}`))
    }
    expect(here.stopped).toEqual([])
  })

  it('settles as stopped when the signal aborts, before or during the call', async () => {
    const here = scene()
    const aborter = new AbortController()
    const during = here.run('a', aborter.signal)
    await here.given(1)
    aborter.abort()
    expect(await during).toEqual(STOPPED)
    await until(() => here.stopped.length === 1)
    expect(await here.run('a', aborter.signal)).toEqual(STOPPED)
    expect(here.calls).toHaveLength(1)
  })

  it.each([false, true])(
    'sends calls under way once more when the worker dies (seen by its lock: %s)',
    async (byLock) => {
      const locks = deathLocks()
      const here = scene(byLock ? { locks } : {})
      const outcomes = ['a', 'b', 'c'].map((lane) => here.run(lane))
      await here.given(3)
      if (byLock) {
        await until(() => locks.waiting.length === 1)
        here.workers[0].die(true)
        locks.waiting[0]()
      } else here.workers[0].die()
      await here.given(6)
      expect(here.calls.slice(3).map(({ worker }) => worker)).toEqual([1, 1, 1])
      expect(here.calls.slice(3).map(({ job }) => job)).toEqual(here.calls.slice(0, 3).map(({ job }) => job))
      for (const call of here.calls.slice(3)) call.answer(done('again'))
      expect(await Promise.all(outcomes)).toEqual([done('again'), done('again'), done('again')])
      expect(here.deaths).toHaveLength(1)
      expect(here.workers.map(({ terminated }) => terminated)).toEqual([true, false])
    },
  )

  it('fails in words when the second worker dies too, and works again after that', async () => {
    const here = scene()
    const outcomes = ['a', 'b'].map((lane) => here.run(lane))
    await here.given(2)
    here.workers[0].die()
    await here.given(4)
    here.workers[1].die()
    for (const outcome of await Promise.all(outcomes)) {
      expect(outcome).toMatchObject({ ok: false })
      expect(outcome.ok ? '' : outcome.sentence).toMatch(/worker died.*wider bin/)
    }
    expect(here.calls).toHaveLength(4)
    const next = here.run('a')
    await here.given(5)
    here.calls[4].answer(done('well'))
    expect(await next).toEqual(done('well'))
  })

  it('a call stopped before its worker died is not sent again', async () => {
    const here = scene()
    const aborter = new AbortController()
    const outcome = here.run('a', aborter.signal)
    await here.given(1)
    aborter.abort()
    here.workers[0].die()
    expect(await outcome).toEqual(STOPPED)
    await new Promise((resolve) => setTimeout(resolve, 20))
    expect(here.workers).toHaveLength(1)
  })

  it('a defect of the worker, or a worker that cannot be had, is an outcome in words', async () => {
    const here = scene()
    const outcome = here.run('a')
    await here.given(1)
    here.calls[0].fail(new RangeError('index 7 of 5'))
    expect(await outcome).toMatchObject({ ok: false })
    const settled = await outcome
    expect(settled.ok ? '' : settled.sentence).toContain('index 7 of 5')
    const without = scene({
      spawn: () => {
        throw new Error('no workers here')
      },
    })
    const none = await without.run('a')
    expect(none.ok ? '' : none.sentence).toContain('no workers here')
  })

  it('closing settles what is under way and hires nobody after', async () => {
    const here = scene()
    const outcome = here.run('a')
    await here.given(1)
    here.client.close()
    expect(await outcome).toEqual(STOPPED)
    expect(await here.run('a')).toEqual(STOPPED)
    expect(here.workers.map(({ terminated }) => terminated)).toEqual([true])
    expect(here.deaths).toEqual([])
  })

  it('callbacks cross the boundary', async () => {
    const heard: number[] = []
    const client = analysisClient({
      spawn: () =>
        fakeWorker({
          openFile(_job, _file, _name, _answer, onProgress) {
            for (const fraction of [0.25, 0.5, 1]) onProgress(fraction)
            return Promise.resolve({ ok: false, sentence: 'no such file' })
          },
        }),
      poolSize: 0,
      locks: null,
    })
    const outcome = await client.run('open', (service, job) =>
      service.openFile(
        job,
        new Blob(['1']),
        'x',
        {
          kind: 'npy',
          member: null,
          content: null,
          timeUnit: null,
          tickSeconds: null,
          binSeconds: null,
          emitters: 'rows',
        },
        client.callback((fraction: number) => {
          heard.push(fraction)
        }),
      ),
    )
    expect(outcome).toEqual({ ok: false, sentence: 'no such file' })
    await until(() => heard.length === 3)
    expect(heard).toEqual([0.25, 0.5, 1])
    client.close()
  })
})

describe('analysisClient.spread', () => {
  type Service = Parameters<Parameters<AnalysisClient['spread']>[0][number]>[0]
  const slicesOf = (count: number) =>
    Array.from(
      { length: count },
      (_, index) =>
        async (service: Service): Promise<Outcome<string>> =>
          service.dwellsCsv(index, request, 1),
    )

  it('keeps the order of the slices and hands out one a worker at a time', async () => {
    const here = scene()
    const progress: number[] = []
    const all = here.client.spread(slicesOf(7), (count) => progress.push(count), new AbortController().signal)
    for (let handed = 2; handed <= 7; handed++) {
      await here.given(handed)
      expect(here.calls).toHaveLength(handed)
      const call = here.calls[handed - 2]
      call.answer(done(`${call.job}`))
    }
    here.calls[6].answer(done('6'))
    expect(await all).toEqual(['0', '1', '2', '3', '4', '5', '6'].map(done))
    expect(progress).toEqual([1, 2, 3, 4, 5, 6, 7])
    expect(here.workers).toHaveLength(2)
  })

  it('sends a slice again when its worker dies, fails in words at the second death', async () => {
    const here = scene({ poolSize: 1 })
    const all = here.client.spread(slicesOf(2), () => {}, new AbortController().signal)
    await here.given(1)
    here.workers[0].die()
    await here.given(2)
    here.calls[1].answer(done('first'))
    await here.given(3)
    here.workers[1].die()
    await here.given(4)
    here.workers[2].die()
    await expect(all).rejects.toThrow('worker died')
    expect(here.calls.map(({ job }) => job)).toEqual([0, 0, 1, 1])
  })

  it('hands out nothing more after an abort and gives what is done', async () => {
    const here = scene({ poolSize: 1 })
    const aborter = new AbortController()
    const all = here.client.spread(slicesOf(5), () => {}, aborter.signal)
    await here.given(1)
    here.calls[0].answer(done('0'))
    await here.given(2)
    aborter.abort()
    here.calls[1].answer(done('1'))
    expect(await all).toEqual([done('0'), done('1')])
    expect(here.calls).toHaveLength(2)
  })

  it('a closed client hires nobody for what is left', async () => {
    const here = scene()
    const all = here.client.spread(slicesOf(5), () => {}, new AbortController().signal)
    await here.given(2)
    here.client.close()
    await expect(all).rejects.toThrow('Stopped')
    expect(here.workers).toHaveLength(2)
  })
})

/** Locks that workers hold: a request waits until the test says that the holder is gone. */
function deathLocks(): Pick<LockManager, 'request'> & { readonly waiting: (() => void)[] } {
  const waiting: (() => void)[] = []
  const request = (_name: string, callback: () => void): Promise<void> =>
    new Promise((resolve) => {
      waiting.push(() => {
        callback()
        resolve()
      })
    })
  return { request: request as LockManager['request'], waiting }
}
