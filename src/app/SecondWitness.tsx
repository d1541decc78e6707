import { createResource, createSignal, Show } from 'solid-js'
import type { StudyDesk } from './studyDesk'

/** On demand: every regimen computed a second time and compared, with what that does not prove always beside it. */
export function SecondWitness(props: { desk: StudyDesk }) {
  const [asked, setAsked] = createSignal<number>()
  // An answer is shown only for the very page that it was asked for.
  const [said] = createResource(
    () => (asked() === props.desk.edition() ? asked() : undefined),
    () => props.desk.worker.confirm()
  )
  const current = () => asked() === props.desk.edition() && said.state === 'ready'
  return (
    <p class="witness" aria-live="polite">
      <Show
        when={current() ? said() : undefined}
        fallback={
          <button type="button" disabled={said.loading} onClick={() => setAsked(props.desk.edition())}>
            {said.loading ? 'Computing a second time …' : 'Check by a second method'}
          </button>
        }
      >
        {(text) => text()}
      </Show>
    </p>
  )
}
