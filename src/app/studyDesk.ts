import { batch, createMemo, createSignal } from 'solid-js'
import { createStore, reconcile } from 'solid-js/store'
import type { Issue } from '../pk/issue'
import type { PageView } from '../report/page/page'
import type { StudyFile } from '../study/file/studySchema'
import { serialiseStudy } from '../study/serialise'
import { advanced, type History, NO_HISTORY, redone, undone } from './history'
import { Runs } from './runs'
import type { WorkerClient } from './worker/client'

/** A file as it came. */
export interface GivenFile {
  readonly name: string
  readonly content: Blob
}

/** A study as it stands after an edit, whether or not it can be computed. */
export interface Draft {
  readonly name: string
  readonly file: StudyFile
  /** Of a study that was not edited: saving it gives the same bytes back. */
  readonly content?: Blob
}

/** What could not be used, and everything that is wrong with it. */
export interface Refusal {
  readonly name: string
  readonly issues: readonly Issue[]
  /** It is the study as edited here, not a file that was opened. */
  readonly edited: boolean
}

/**
 * The study on the desk. A result is shown only with the study that it came from: what is refused leaves the last good
 * page in place, marked as such, and the answer to a study that has been overtaken is dropped.
 */
export function createStudyDesk(client: WorkerClient) {
  const { worker } = client
  const [shown, setShown] = createStore<{ page?: PageView }>({})
  const [history, setHistory] = createSignal<History<Draft>>(NO_HISTORY)
  const [refusal, setRefusal] = createSignal<Refusal>()
  const [busy, setBusy] = createSignal(false)
  const [edition, setEdition] = createSignal(0)
  const [good, setGood] = createSignal<Draft>()
  const [lastEdited, setLastEdited] = createSignal('')
  const [restructuring, setRestructuring] = createSignal(false)
  const [doing, setDoing] = createSignal('')
  const [slow, setSlow] = createSignal(false)
  const runs = new Runs(client, { busy: setBusy, doing: setDoing, slow: setSlow })
  const present = createMemo(() => history().present)

  function show(page: PageView, draft: Draft): void {
    void worker.takeUp(draft.name)
    setRefusal(undefined)
    setGood(draft)
    setShown('page', reconcile(page, { merge: true }))
    setEdition((count) => count + 1)
  }

  /** Compute the present draft. The issues that refused it; undefined where it was overtaken. */
  async function compute(draft: Draft): Promise<readonly Issue[] | undefined> {
    const outcome = await runs.run(contentOf(draft))
    if (outcome === undefined) return undefined
    batch(() => {
      setRestructuring(false)
      if (outcome.ok) show(outcome.page, draft)
      else setRefusal({ name: draft.name, issues: outcome.issues, edited: true })
    })
    return outcome.ok ? [] : outcome.issues
  }

  /** Open a file; what is refused is not taken onto the desk. Whether it was opened; undefined where it was overtaken. */
  async function open(next: GivenFile): Promise<boolean | undefined> {
    const outcome = await runs.run(next.content)
    if (outcome === undefined) return undefined
    batch(() => {
      setRestructuring(false)
      if (!outcome.ok) {
        setRefusal({ name: next.name, issues: outcome.issues, edited: false })
        return
      }
      const draft = { ...next, file: outcome.file }
      setLastEdited('')
      setHistory((before) => advanced(before, draft))
      show(outcome.page, draft)
    })
    return outcome.ok
  }

  /** Put a value anew; `at` is its path. What is refused stays on the desk until it is mended or undone. */
  function edit(change: (file: StudyFile) => StudyFile, at: string): Promise<readonly Issue[] | undefined> {
    const draft = put(change)
    setLastEdited(at)
    return compute(draft)
  }

  /** Change how the study is made up; until it is computed no value on the page can be taken for another's. */
  async function restructure(change: (file: StudyFile) => StudyFile): Promise<void> {
    const draft = put(change)
    setRestructuring(true)
    const issues = await compute(draft)
    if (issues === undefined || issues.length === 0 || present() !== draft) return
    // The page still shows the make-up before, to which its places belong.
    setHistory(undone)
    setRefusal({ name: 'The change', issues, edited: false })
  }

  function put(change: (file: StudyFile) => StudyFile): Draft {
    const before = present()
    if (before === undefined) throw new RangeError('no study is on the desk')
    const draft = { name: before.name, file: change(before.file) }
    setHistory((all) => advanced(all, draft))
    return draft
  }

  /** Stop the run that goes on. The worker that takes over is given the study that the page shows. */
  function stop(): void {
    const shows = good()
    runs.stop(async (next) => {
      if (shows === undefined) return
      const outcome = await next.open(contentOf(shows))
      if (outcome.ok) await next.takeUp(shows.name)
    })
  }

  function travel(step: (all: History<Draft>) => History<Draft>): void {
    const next = step(history())
    if (next === history() || next.present === undefined) return
    setHistory(next)
    setLastEdited('')
    setRestructuring(true)
    void compute(next.present)
  }

  return {
    /** The page of the last study that could be computed; fine-grained, so that an edit redraws what it changed. */
    page: () => shown.page,
    /** Counts the pages shown, for what is fetched beside the page. */
    edition,
    present,
    /** The study that the page shows. */
    good,
    refusal,
    busy,
    /** What the run that goes on is doing. */
    doing,
    /** It takes long enough to be stopped. */
    slow,
    stop,
    restructuring,
    /** Path of the value that was edited last. */
    lastEdited,
    open,
    edit,
    restructure,
    undo: () => travel(undone),
    redo: () => travel(redone),
    canUndo: () => history().past.length > 0,
    canRedo: () => history().future.length > 0,
    /** What is wrong with the value at a path, where the study as edited was refused. */
    issuesAt: (at: string): readonly Issue[] =>
      refusal()?.edited === true ? (refusal()?.issues.filter(({ path }) => path === at) ?? []) : [],
    refuse: (name: string, message: string) => setRefusal({ name, issues: [{ path: '', message }], edited: false }),
    worker
  }
}

export type StudyDesk = ReturnType<typeof createStudyDesk>

/** The bytes of a study: as they came where it was not edited. */
export function contentOf(draft: Draft): Blob {
  return draft.content ?? new Blob([serialiseStudy(draft.file)], { type: 'application/json' })
}
