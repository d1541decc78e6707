import { For, Show } from 'solid-js'
import type { EstimatesView } from '../report/page/page'

/** Weight descriptors and renal estimates side by side, the one that the model uses marked in words. */
export function EstimatesTable(props: { estimates: EstimatesView }) {
  return (
    <For each={props.estimates.groups}>
      {(group) => (
        <>
          <table class="estimates">
            <thead>
              <tr>
                <th scope="col">{group.title}</th>
                <For each={props.estimates.columns} fallback={<th scope="col">at 0 h</th>}>
                  {(column) => <th scope="col">{column}</th>}
                </For>
              </tr>
            </thead>
            <tbody>
              <For each={group.rows}>
                {(row) => (
                  <tr classList={{ used: row.usedBy !== '' }}>
                    <th scope="row">
                      {row.label}
                      <Show when={row.usedBy !== ''}>
                        {' '}
                        <span class="chip">used for {row.usedBy}</span>
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
          <Show when={group.missing !== ''}>
            <p class="quiet">{group.missing}</p>
          </Show>
        </>
      )}
    </For>
  )
}
