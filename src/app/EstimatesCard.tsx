import { For, Show } from 'solid-js'
import type { EstimatesView } from '../report/page/page'

/** Weight descriptors and renal estimates side by side, the one that the model uses marked in words. */
export function EstimatesCard(props: { estimates: EstimatesView }) {
  return (
    <section class="estimates card" aria-labelledby="estimates-title">
      <div class="row">
        <h2 id="estimates-title">Renal and size estimates</h2>
      </div>
      <div class="groups">
        <For each={props.estimates.groups}>{(group) => <Group group={group} columns={props.estimates.columns} />}</For>
      </div>
    </section>
  )
}

function Group(props: { group: EstimatesView['groups'][number]; columns: readonly string[] }) {
  return (
    <div class="group">
      <table>
        <thead>
          <tr>
            <th scope="col">{props.group.title}</th>
            <For each={props.columns} fallback={<td />}>
              {(column) => <th scope="col">{column}</th>}
            </For>
          </tr>
        </thead>
        <tbody>
          <For each={props.group.rows}>
            {(row) => (
              <tr classList={{ used: row.usedBy !== '' }}>
                <th scope="row">
                  {row.label}
                  <Show when={row.usedBy !== ''}>
                    {' '}
                    <span class="chip">used for {row.usedBy}</span>
                  </Show>
                </th>
                <For each={row.values}>{(cell) => <td classList={{ missing: !cell.computed }}>{cell.text}</td>}</For>
              </tr>
            )}
          </For>
        </tbody>
      </table>
      <Show when={props.group.missing !== ''}>
        <p class="quiet">{props.group.missing}</p>
      </Show>
    </div>
  )
}
