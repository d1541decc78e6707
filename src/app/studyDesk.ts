import { batch, createSignal } from 'solid-js'
import { createStore, reconcile } from 'solid-js/store'
import type { Issue } from '../pk/issue'
import type { PageView } from '../report/page/page'
import type { PageWorker } from './worker/protocol'

/** A file as it was opened; saving it gives the same bytes back. */
export interface StudyFile {
  readonly name: string
  readonly content: Blob
}

/** A file that could not be used, and everything that is wrong with it. */
export interface Refusal {
  readonly name: string
  readonly issues: readonly Issue[]
}

/**
 * The study on the desk. A result is shown only with the study that it came from: a file that is refused leaves the
 * last good page in place, marked as such, and an answer to an older file than the last one opened is dropped.
 */
export function createStudyDesk(worker: PageWorker) {
  const [shown, setShown] = createStore<{ page?: PageView }>({})
  const [file, setFile] = createSignal<StudyFile>()
  const [refusal, setRefusal] = createSignal<Refusal>()
  const [busy, setBusy] = createSignal(false)
  const [edition, setEdition] = createSignal(0)
  let latest = 0

  async function open(next: StudyFile): Promise<void> {
    const turn = ++latest
    setBusy(true)
    const outcome = await worker.open(next.content, next.name).catch((failure: unknown) => ({
      ok: false as const,
      issues: [
        { path: '', message: `the program failed on this file, which is a fault of ours: ${messageOf(failure)}` }
      ]
    }))
    if (turn !== latest) return
    batch(() => {
      setBusy(false)
      if (outcome.ok) {
        setRefusal(undefined)
        setFile(next)
        setShown('page', reconcile(outcome.page, { merge: true }))
        setEdition((count) => count + 1)
      } else setRefusal({ name: next.name, issues: outcome.issues })
    })
  }

  return {
    /** The page of the last study that could be computed; fine-grained, so that an edit redraws what it changed. */
    page: () => shown.page,
    /** Counts the pages shown, for what is fetched beside the page. */
    edition,
    file,
    refusal,
    busy,
    open,
    refuse: (name: string, message: string) => setRefusal({ name, issues: [{ path: '', message }] }),
    worker
  }
}

export type StudyDesk = ReturnType<typeof createStudyDesk>

function messageOf(failure: unknown): string {
  return failure instanceof Error ? failure.message : String(failure)
}
