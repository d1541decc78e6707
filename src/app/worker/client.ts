import { wrap } from 'comlink'
import type { PageWorker } from './protocol'

/** The worker that validates and computes, started at once so that it is warm when the first file arrives. */
export function startWorker(): PageWorker {
  return wrap<PageWorker>(new Worker(new URL('./pageWorker.ts', import.meta.url), { type: 'module' }))
}
