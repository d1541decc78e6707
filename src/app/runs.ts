import type { WorkerClient } from './worker/client'
import type { Outcome } from './worker/protocol'

interface Run {
  readonly content: Blob
  readonly done: (outcome: Outcome | undefined) => void
}

/** What the page is told about the run that goes on. */
export interface RunNews {
  busy(busy: boolean): void
  /** What is being done, in words. */
  doing(what: string): void
  /** It goes on for longer than anyone likes to wait. */
  slow(slow: boolean): void
}

/** After so long a run can be stopped [ms]. */
const SLOW_AFTER = 2000

/**
 * The runs of the worker, one at a time. Of those that wait only the last is begun; one that is overtaken, waiting or
 * running, comes to undefined. The one that runs can be stopped, which ends the worker and starts another.
 */
export class Runs {
  readonly #client: WorkerClient
  readonly #news: RunNews
  #waiting: Run | undefined
  #running = false
  #doing = ''
  #stopped: ((outcome: Outcome) => void) | undefined

  constructor(client: WorkerClient, news: RunNews) {
    this.#client = client
    this.#news = news
  }

  run(content: Blob): Promise<Outcome | undefined> {
    this.#waiting?.done(undefined)
    return new Promise((done) => {
      this.#waiting = { content, done }
      if (!this.#running) void this.#work()
    })
  }

  /** Stop the run that goes on; it comes to an issue that says what it was doing. `restore` is for the next worker. */
  stop(restore: Parameters<WorkerClient['restart']>[0]): void {
    if (this.#stopped === undefined) return
    this.#client.restart(restore)
    this.#stopped({ ok: false, issues: [{ path: '', message: `stopped while ${this.#doing}` }] })
  }

  async #work(): Promise<void> {
    this.#running = true
    this.#news.busy(true)
    while (this.#waiting !== undefined) {
      const { content, done } = this.#waiting
      this.#waiting = undefined
      const outcome = await this.#computed(content)
      done(this.#waiting === undefined ? outcome : undefined)
    }
    this.#running = false
    this.#news.busy(false)
  }

  async #computed(content: Blob): Promise<Outcome> {
    const told = (what: string) => {
      this.#doing = what
      this.#news.doing(what)
    }
    told('starting')
    const slow = setTimeout(() => this.#news.slow(true), SLOW_AFTER)
    const stopped = new Promise<Outcome>((done) => {
      this.#stopped = done
    })
    const outcome = await Promise.race([this.#client.worker.open(content, told).catch(failed), stopped])
    clearTimeout(slow)
    this.#stopped = undefined
    this.#news.slow(false)
    return outcome
  }
}

function failed(failure: unknown): Outcome {
  const message = failure instanceof Error ? failure.message : String(failure)
  return {
    ok: false,
    issues: [{ path: '', message: `the program failed on this study, which is a fault of ours: ${message}` }]
  }
}
