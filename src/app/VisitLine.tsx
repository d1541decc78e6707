import { Match, Show, Switch } from 'solid-js'
import { saveFile } from './saveFile'
import { demonstration } from './shippedStudies'
import type { StudyDesk } from './studyDesk'
import type { Beginning, Visit } from './visit'

/** The line at the top: what a visit began with, what can be changed, and whether work is kept. */
export function VisitLine(props: { desk: StudyDesk; visit: Visit }) {
  const kind = () => props.visit.beginning()?.kind
  const startAfresh = () => {
    demonstration().then(props.desk.open, (failure: Error) => props.desk.refuse('The demonstration', failure.message))
    props.visit.dismiss()
  }
  return (
    <>
      <Show when={props.visit.trouble()}>
        <p class="visit warn" role="alert">
          {props.visit.trouble()}
        </p>
      </Show>
      <Show when={kind() !== undefined}>
        <p class="visit" classList={{ warn: kind() === 'unreadable' }} role="status">
          <Switch>
            <Match when={kind() === 'first'}>
              This is a worked example. Every underlined value can be changed: press it, type a number, a unit or both,
              then Enter. Undo takes anything back.
            </Match>
            <Match when={kind() === 'restored'}>
              Your last study is open again;{' '}
              <button type="button" class="link" onClick={startAfresh}>
                start from the demonstration
              </button>
            </Match>
            <Match when={unreadable(props.visit.beginning())}>
              {(found) => (
                <>
                  Your last study could not be opened again ({found().why}). It is put aside in this browser.{' '}
                  <Show when={found().study}>
                    {(study) => (
                      <button
                        type="button"
                        class="link"
                        onClick={() => saveFile(study().name, new Blob([study().bytes], { type: 'application/json' }))}
                      >
                        save it as a file
                      </button>
                    )}
                  </Show>
                </>
              )}
            </Match>
          </Switch>{' '}
          <button type="button" class="link" onClick={props.visit.dismiss}>
            close this line
          </button>
        </p>
      </Show>
    </>
  )
}

function unreadable(beginning: Beginning | undefined): (Beginning & { kind: 'unreadable' }) | undefined {
  return beginning?.kind === 'unreadable' ? beginning : undefined
}
