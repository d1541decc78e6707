import { For, Show } from 'solid-js'
import type { Refusal } from './studyDesk'

/** Everything that is wrong with a file, each with its place, over the last good result. */
export function IssueList(props: { refusal: Refusal; kept: string | undefined }) {
  const count = () => props.refusal.issues.length
  return (
    <section class="issues" role="alert" aria-labelledby="issues-title">
      <h2 id="issues-title">
        {props.refusal.edited ? 'The study as it is now cannot be computed' : `${props.refusal.name} was not used`}:{' '}
        {count() === 1 ? '1 problem' : `${count()} problems`}
      </h2>
      <ol>
        <For each={props.refusal.issues}>
          {(issue) => (
            <li>
              <Show when={issue.path !== ''}>
                <code>{issue.path}</code>{' '}
              </Show>
              {issue.message}
            </li>
          )}
        </For>
      </ol>
      <Show when={props.kept}>
        {(title) => (
          <p class="quiet">
            What stands below, in grey, is not of {props.refusal.edited ? 'the study as it is now' : 'this file'} but of
            the last study that could be computed: <b>{title()}</b>
          </p>
        )}
      </Show>
    </section>
  )
}
