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
 * last good page in place, marked as such.
 */
export function createStudyDesk(worker: PageWorker) {
  const [shown, setShown] = createStore<{ page?: PageView }>({})
  const [file, setFile] = createSignal<StudyFile>()
  const [refusal, setRefusal] = createSignal<Refusal>()
  const [busy, setBusy] = createSignal(false)
  const [edition, setEdition] = createSignal(0)
  let latest = 0
  let last: Promise<void> = Promise.resolve()

  /** Files are opened one after another, so that the worker always holds the study that the page shows; one that another overtook is left out. */
  function open(next: StudyFile): Promise<void> {
    const turn = ++latest
    setBusy(true)
    last = last.then(async () => {
      if (turn !== latest) return
      const outcome = await worker.open(next.content, next.name).catch(faultOfOurs)
      batch(() => {
        setBusy(turn !== latest)
        if (outcome.ok) {
          setRefusal(undefined)
          setFile(next)
          setShown('page', reconcile(outcome.page, { merge: true }))
          setEdition((count) => count + 1)
        } else setRefusal({ name: next.name, issues: outcome.issues })
      })
    })
    return last
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

function faultOfOurs(failure: unknown): { ok: false; issues: readonly Issue[] } {
  const said = failure instanceof Error ? failure.message : String(failure)
  return {
    ok: false,
    issues: [{ path: '', message: `the program failed on this file, which is a fault of ours: ${said}` }]
  }
}
