import { For, Show } from 'solid-js'
import type { GridView } from '../report/page/page'
import { RegimenTag } from './RegimenTag'

/** A table of quantities by regimen; what is not defined shows a dash and says why. */
export function Grid(props: { grid: GridView }) {
  return (
    <Show when={props.grid.folded} fallback={<GridTable grid={props.grid} titled />}>
      <details class="fold">
        <summary>{props.grid.title}</summary>
        <GridTable grid={props.grid} titled={false} />
      </details>
    </Show>
  )
}

function GridTable(props: { grid: GridView; titled: boolean }) {
  return (
    <section class="scroll" tabindex="0" aria-label={`${props.grid.title}: table`}>
      <Show
        when={props.grid.rows.length > 0}
        fallback={
          <p>
            <b>{props.titled ? props.grid.title : ''}</b>
          </p>
        }
      >
        <table>
          <caption>
            <Show when={props.titled}>
              <b>{props.grid.title}</b>{' '}
            </Show>
            <span class="quiet">{props.grid.explanation}</span>
          </caption>
          <thead>
            <tr>
              <td />
              <For each={props.grid.columns}>
                {(column) => (
                  <th scope="col">
                    <Show when={column.regimen} fallback={column.title}>
                      {(label) => <RegimenTag label={label()} />}
                    </Show>
                  </th>
                )}
              </For>
            </tr>
          </thead>
          <tbody>
            <For each={props.grid.rows}>
              {(row) => (
                <tr>
                  <th scope="row">{row.head}</th>
                  <For each={row.cells}>
                    {(cell) => (
                      <td>
                        {cell.text}
                        <Show when={cell.mark}>
                          <sup>{cell.mark}</sup>
                        </Show>
                        <Show when={cell.met !== undefined}>
                          <span class={cell.met ? 'met' : 'unmet'}>{cell.met ? ' met' : ' not met'}</span>
                        </Show>
                      </td>
                    )}
                  </For>
                </tr>
              )}
            </For>
          </tbody>
        </table>
      </Show>
      <For each={props.grid.notes}>
        {(note) => (
          <p class="footnote">
            <Show when={note.mark !== ''}>
              <sup>{note.mark}</sup>{' '}
            </Show>
            {note.text}
          </p>
        )}
      </For>
    </section>
  )
}
