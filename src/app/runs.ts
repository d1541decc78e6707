import type { Outcome, PageWorker } from './worker/protocol'

interface Run {
  readonly content: Blob
  readonly done: (outcome: Outcome | undefined) => void
}

/**
 * The runs of the worker, one at a time. Of those that wait only the last is begun; one that is overtaken, waiting or
 * running, comes to undefined.
 */
export class Runs {
  readonly #worker: PageWorker
  readonly #onBusy: (busy: boolean) => void
  #waiting: Run | undefined
  #running = false

  constructor(worker: PageWorker, onBusy: (busy: boolean) => void) {
    this.#worker = worker
    this.#onBusy = onBusy
  }

  run(content: Blob): Promise<Outcome | undefined> {
    this.#waiting?.done(undefined)
    return new Promise((done) => {
      this.#waiting = { content, done }
      if (!this.#running) void this.#work()
    })
  }

  async #work(): Promise<void> {
    this.#running = true
    this.#onBusy(true)
    while (this.#waiting !== undefined) {
      const { content, done } = this.#waiting
      this.#waiting = undefined
      const outcome = await this.#worker.open(content).catch(failed)
      done(this.#waiting === undefined ? outcome : undefined)
    }
    this.#running = false
    this.#onBusy(false)
  }
}

function failed(failure: unknown): Outcome {
  const message = failure instanceof Error ? failure.message : String(failure)
  return {
    ok: false,
    issues: [{ path: '', message: `the program failed on this study, which is a fault of ours: ${message}` }]
  }
}
