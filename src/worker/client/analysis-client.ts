import { proxy, type Remote, wrap } from 'comlink'
import type { AnalysisService, Outcome } from '../protocol/service.ts'

/** What the client needs of a worker; a MessagePort fits too, for tests. */
export interface WorkerLike {
  postMessage(message: unknown, transfer: Transferable[]): void
  addEventListener(type: string, listener: (event: Event) => void): void
  removeEventListener(type: string, listener: (event: Event) => void): void
  terminate?(): void
}

export interface ClientOptions {
  readonly spawn: () => WorkerLike
  /** Workers for work that can be split, besides the one that holds the record. */
  readonly poolSize: number
  /** Web Locks of the page; null where there are none: a worker's death is then seen by its error event only. */
  readonly locks: Pick<LockManager, 'request'> | null
  readonly onDeath?: (sentence: string) => void
}

export type Work<T> = (service: Remote<AnalysisService>, job: number) => Promise<Outcome<T>>

/**
 * Calls into workers. Invariants: 1. every call settles, also when its worker dies; 2. in one lane only the latest call
 * matters: an earlier one is stopped and settles as stopped; 3. a call that was under way when its worker died is sent
 * once more to the new worker, then fails in words.
 */
export interface AnalysisClient {
  run<T>(lane: string, work: Work<T>, signal?: AbortSignal): Promise<Outcome<T>>
  /** Runs `slices` of work over the pool, a few at a time; stops handing out when the signal aborts. */
  spread<T>(
    slices: readonly ((service: Remote<AnalysisService>) => Promise<T>)[],
    onDone: (done: number) => void,
    signal: AbortSignal,
  ): Promise<T[]>
  /** Callbacks cross the boundary as proxies. */
  callback<F extends (...values: never[]) => void>(callback: F): F
  close(): void
}

const STOPPED = { ok: false, sentence: 'Stopped.', stopped: true } as const
const DIED =
  'The analysis stopped unexpectedly (its worker died), probably for want of memory. Try a wider bin, or reload.'

const DEFECT =
  'The analysis failed for a reason it does not know; reload, and keep the record if it happens again'

interface Hand {
  readonly service: Remote<AnalysisService>
  readonly dead: Promise<void>
  close(): void
}

let handNumber = 0

function hire({ spawn, locks }: ClientOptions): Hand {
  const worker = spawn()
  const service = wrap<AnalysisService>(worker)
  let die = (): void => {}
  const dead = new Promise<void>((resolve) => {
    die = resolve
  })
  const fail = (): void => die()
  worker.addEventListener('error', fail)
  worker.addEventListener('messageerror', fail)
  handNumber++
  // The lock is free again only when the worker is gone, however that happened.
  const name = `heliograph worker ${handNumber} ${String(globalThis.performance?.timeOrigin ?? 0)}`
  if (locks !== null) {
    void service
      .holdLock(name)
      .then((held) => (held ? locks.request(name, () => die()) : undefined))
      .catch(fail)
  }
  return {
    service,
    dead,
    close() {
      worker.removeEventListener('error', fail)
      worker.removeEventListener('messageerror', fail)
      worker.terminate?.()
      die()
    },
  }
}

export function analysisClient(options: ClientOptions): AnalysisClient {
  let bench: Hand | null = null
  const pool: (Hand | null)[] = Array.from({ length: options.poolSize }, () => null)
  const lanes = new Map<string, { job: number; stop(): void }>()
  let jobs = 0
  let closed = false

  const benchHand = (): Hand => {
    if (bench === null) {
      const hired = hire(options)
      bench = hired
      void hired.dead.then(() => {
        if (bench === hired) bench = null
        hired.close()
        if (!closed) options.onDeath?.(DIED)
      })
    }
    return bench
  }
  const poolHand = (index: number): Hand => {
    let hand = pool[index]
    if (hand === null) {
      const hired = hire(options)
      hand = hired
      pool[index] = hired
      void hired.dead.then(() => {
        if (pool[index] === hired) pool[index] = null
        hired.close()
      })
    }
    return hand
  }

  return {
    async run(lane, work, signal) {
      lanes.get(lane)?.stop()
      const job = ++jobs
      let stop = (): void => {}
      const stopped = new Promise<typeof STOPPED>((resolve) => {
        stop = () => resolve(STOPPED)
      })
      const entry = {
        job,
        stop() {
          stop()
          void bench?.service.stop(job)
        },
      }
      lanes.set(lane, entry)
      const abort = (): void => entry.stop()
      signal?.addEventListener('abort', abort)
      try {
        if (signal?.aborted === true) return STOPPED
        for (let attempt = 0; attempt < 2; attempt++) {
          if (closed) return STOPPED
          const hand = benchHand()
          const outcome = await Promise.race([work(hand.service, job), stopped, hand.dead.then(() => null)])
          if (outcome !== null) return outcome
        }
        return closed ? STOPPED : { ok: false, sentence: DIED }
      } catch (error) {
        return {
          ok: false,
          sentence: `${DEFECT} (${error instanceof Error ? error.message : String(error)}).`,
        }
      } finally {
        signal?.removeEventListener('abort', abort)
        if (lanes.get(lane) === entry) lanes.delete(lane)
      }
    },

    async spread<T>(
      slices: readonly ((service: Remote<AnalysisService>) => Promise<T>)[],
      onDone: (done: number) => void,
      signal: AbortSignal,
    ): Promise<T[]> {
      const results: T[] = []
      let next = 0
      let done = 0
      const serve = async (index: number): Promise<void> => {
        while (next < slices.length && !signal.aborted) {
          const at = next++
          for (let attempt = 0; attempt < 2; attempt++) {
            if (closed) throw new Error(STOPPED.sentence)
            const hand = poolHand(index)
            const value = await Promise.race([
              slices[at](hand.service).then((result) => ({ result })),
              hand.dead.then(() => null),
            ])
            if (value !== null) {
              results[at] = value.result
              break
            }
            if (attempt === 1) throw new Error(DIED)
          }
          done++
          onDone(done)
        }
      }
      await Promise.all(pool.map((_, index) => serve(index)))
      return results.filter((value) => value !== undefined)
    },

    callback: (callback) => proxy(callback),

    close() {
      closed = true
      bench?.close()
      for (const hand of pool) hand?.close()
    },
  }
}
