import { createResource, createSignal, Show } from 'solid-js'
import type { StudyDesk } from './studyDesk'

/** On demand: every regimen computed a second time and compared, with what that does not prove always beside it. */
export function SecondWitness(props: { desk: StudyDesk }) {
  const [asked, setAsked] = createSignal<number>()
  // An answer is shown only for the very page that it was asked for.
  const [said, { refetch }] = createResource(
    () => (asked() === props.desk.edition() ? asked() : undefined),
    () => props.desk.worker.confirm()
  )
  const current = () => asked() === props.desk.edition() && said.state === 'ready'
  // Asked again for the same page only where no answer came.
  const ask = () => (asked() === props.desk.edition() ? void refetch() : setAsked(props.desk.edition()))
  return (
    <p class="witness" aria-live="polite">
      <Show
        when={current() ? said() : undefined}
        fallback={
          <button type="button" disabled={said.loading} onClick={ask}>
            {said.loading ? 'Computing a second time …' : 'Check by a second method'}
          </button>
        }
      >
        {(text) => text()}
      </Show>
    </p>
  )
}
