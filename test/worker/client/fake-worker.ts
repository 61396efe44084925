import { expose } from 'comlink'
import type { WorkerLike } from '../../../src/worker/client/analysis-client.ts'
import type { AnalysisService } from '../../../src/worker/protocol/service.ts'

export interface FakeWorker extends WorkerLike {
  terminated: boolean
  /** Ends at once: nothing more is answered. `silently`: without an error event, as when memory runs out. */
  die(silently?: boolean): void
}

/** A worker in this thread, behind a real message channel. What the service lacks must not be called. */
export function fakeWorker(service: Partial<AnalysisService>): FakeWorker {
  const { port1, port2 } = new MessageChannel()
  expose(service, port2)
  const failures = new EventTarget()
  const close = (): void => {
    port1.close()
    port2.close()
  }
  port1.start()
  const worker: FakeWorker = {
    terminated: false,
    postMessage: (message, transfer) => port1.postMessage(message, transfer),
    addEventListener(type, listener) {
      if (type === 'message') port1.addEventListener('message', listener)
      else failures.addEventListener(type, listener)
    },
    removeEventListener(type, listener) {
      if (type === 'message') port1.removeEventListener('message', listener)
      else failures.removeEventListener(type, listener)
    },
    terminate() {
      worker.terminated = true
      close()
    },
    die(silently = false) {
      close()
      if (!silently) failures.dispatchEvent(new Event('error'))
    },
  }
  return worker
}
