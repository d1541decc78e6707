import { proxy, type Remote, wrap } from 'comlink'
import type { PageWorker } from './protocol'

/** The worker as the page knows it, and the way to end what it is doing. */
export interface WorkerClient {
  readonly worker: PageWorker
  /**
   * End the worker in the middle of whatever it does and start another. `restore` gives it what it must know before it
   * answers anything else.
   */
  restart(restore: (worker: Pick<PageWorker, 'open' | 'takeUp'>) => Promise<void>): void
}

/**
 * The worker that validates and computes, started at once so that it is warm when the first file arrives. `failed` is
 * told when it cannot be started or ends on an error of its own: no answer would come any more.
 */
export function startWorker(failed: (message: string) => void): WorkerClient {
  let running = started(failed)
  let ready: Promise<unknown> = Promise.resolve()
  const { open, takeUp, rows, saturation, confirm, download } = callsTo(() => running.remote)
  return {
    worker: {
      open: (file, doing) => ready.then(() => open(file, doing)),
      takeUp: (name) => ready.then(() => takeUp(name)),
      rows: (asked) => ready.then(() => rows(asked)),
      saturation: () => ready.then(() => saturation()),
      confirm: () => ready.then(() => confirm()),
      download: (what) => ready.then(() => download(what))
    },
    restart: (restore) => {
      running.worker.terminate()
      running = started(failed)
      // What cannot be restored shows when it is asked for.
      ready = restore({ open, takeUp }).catch(() => undefined)
    }
  }
}

function callsTo(remote: () => Remote<PageWorker>): PageWorker {
  return {
    open: (file, doing) => remote().open(file, doing && proxy(doing)),
    takeUp: (name) => remote().takeUp(name),
    rows: (asked) => remote().rows(asked),
    saturation: () => remote().saturation(),
    confirm: () => remote().confirm(),
    download: (what) => remote().download(what)
  }
}

function started(failed: (message: string) => void): { readonly worker: Worker; readonly remote: Remote<PageWorker> } {
  const worker = new Worker(new URL('./pageWorker.ts', import.meta.url), { type: 'module' })
  worker.addEventListener('error', (event) => failed(event.message || 'its part that computes could not be loaded'))
  return { worker, remote: wrap<PageWorker>(worker) }
}
