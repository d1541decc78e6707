import { proxy, type Remote, wrap } from 'comlink'
import type { PageWorker } from './protocol'

/** The worker as the page knows it, and the way to end what it is doing. */
export interface WorkerClient {
  readonly worker: PageWorker
  /** End the worker in the middle of whatever it does and start another, which has seen no study yet. */
  restart(): void
}

/**
 * The worker that validates and computes, started at once so that it is warm when the first file arrives. `failed` is
 * told when it cannot be started or ends on an error of its own: no answer would come any more.
 */
export function startWorker(failed: (message: string) => void): WorkerClient {
  let running = started(failed)
  return {
    worker: {
      open: (file, doing) => running.remote.open(file, doing && proxy(doing)),
      takeUp: (name) => running.remote.takeUp(name),
      rows: (asked) => running.remote.rows(asked),
      saturation: () => running.remote.saturation(),
      confirm: () => running.remote.confirm(),
      download: (what) => running.remote.download(what)
    },
    restart: () => {
      running.worker.terminate()
      running = started(failed)
    }
  }
}

function started(failed: (message: string) => void): { readonly worker: Worker; readonly remote: Remote<PageWorker> } {
  const worker = new Worker(new URL('./pageWorker.ts', import.meta.url), { type: 'module' })
  worker.addEventListener('error', (event) => failed(event.message || 'its part that computes could not be loaded'))
  return { worker, remote: wrap<PageWorker>(worker) }
}
