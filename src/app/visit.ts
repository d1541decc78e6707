import { createEffect, createSignal, on } from 'solid-js'
import { type KeptStudy, keepStudy, keptStudy, setKeptAside } from './autosave'
import { demonstration, openedStudy } from './shippedStudies'
import { contentOf, type StudyDesk } from './studyDesk'

/** What a visit begins with, in the line at the top. */
export type Beginning =
  | { readonly kind: 'first' }
  | { readonly kind: 'restored'; readonly name: string }
  | { readonly kind: 'unreadable'; readonly why: string; readonly study?: KeptStudy }

/**
 * One visit: begin with the study that was worked on last, else with the demonstration, and keep the
 * study after every edit that can be computed. What is kept and cannot be opened is put aside and never written over.
 */
export function createVisit(desk: StudyDesk) {
  const [beginning, setBeginning] = createSignal<Beginning>()
  const [trouble, setTrouble] = createSignal('')
  async function begin(): Promise<void> {
    const opened = openedStudy()
    const kept = opened === undefined ? await keptStudy().catch(noStorage) : undefined
    if (kept?.kind === 'study') {
      const { name, bytes } = kept.study
      if (await desk.open({ name, content: new Blob([bytes], { type: 'application/json' }) })) {
        setBeginning({ kind: 'restored', name })
        return
      }
      const [issue] = desk.refusal()?.issues ?? []
      setBeginning({ kind: 'unreadable', why: issue?.message ?? 'it was not read', study: kept.study })
    } else if (kept?.kind === 'unreadable') setBeginning({ kind: 'unreadable', why: 'it is no study' })
    if (kept !== undefined && kept.kind !== 'nothing') await setKeptAside().catch(noStorage)
    await (opened ?? demonstration()).then(desk.open, (failure: Error) =>
      desk.refuse('The first study', failure.message)
    )
    if (beginning() === undefined && opened === undefined) setBeginning({ kind: 'first' })
  }

  function noStorage(failure: unknown): undefined {
    const why = failure instanceof Error ? failure.message : String(failure)
    setTrouble(`This browser does not keep your work (${why}). Save the study as a file before you leave.`)
  }

  createEffect(
    on(
      desk.edition,
      () => {
        const good = desk.good()
        // A file that was only opened is where it came from, unless an edit of it was taken back.
        if (good === undefined || (good.content !== undefined && !desk.canRedo())) return
        keepStudy(good.name, contentOf(good)).then(() => setTrouble(''), noStorage)
      },
      { defer: true }
    )
  )
  return { begin, beginning, dismiss: () => setBeginning(undefined), trouble }
}

export type Visit = ReturnType<typeof createVisit>
