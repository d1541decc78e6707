import { wrap } from 'comlink'
import type { PageWorker } from './protocol'

/**
 * The worker that validates and computes, started at once so that it is warm when the first file arrives. `failed` is
 * told when it cannot be started or ends on an error of its own: no answer would come any more.
 */
export function startWorker(failed: (message: string) => void): PageWorker {
  const worker = new Worker(new URL('./pageWorker.ts', import.meta.url), { type: 'module' })
  worker.addEventListener('error', (event) => failed(event.message || 'its part that computes could not be loaded'))
  return wrap<PageWorker>(worker)
}
