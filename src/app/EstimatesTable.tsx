import { For, Show } from 'solid-js'
import type { EstimatesView } from '../report/page/page'

/** Weight descriptors and renal estimates side by side, the one that the model uses marked in words. */
export function EstimatesTable(props: { estimates: EstimatesView }) {
  return (
    <details class="estimates" open>
      <summary>Size and renal estimates</summary>
      <For each={props.estimates.groups}>
        {(group) => (
          <table>
            <thead>
              <tr>
                <th scope="col">{group.title}</th>
                <For each={props.estimates.columns} fallback={<th scope="col">value</th>}>
                  {(column) => <th scope="col">{column}</th>}
                </For>
              </tr>
            </thead>
            <tbody>
              <For each={group.rows}>
                {(row) => (
                  <tr classList={{ used: row.used }}>
                    <th scope="row">
                      {row.label}
                      <Show when={row.used}>
                        {' '}
                        <span class="chip">used by the model</span>
                      </Show>
                      <Show when={row.note}>
                        <span class="quiet"> {row.note}</span>
                      </Show>
                    </th>
                    <For each={row.values}>
                      {(cell) => <td classList={{ missing: !cell.computed }}>{cell.text}</td>}
                    </For>
                  </tr>
                )}
              </For>
            </tbody>
          </table>
        )}
      </For>
    </details>
  )
}
