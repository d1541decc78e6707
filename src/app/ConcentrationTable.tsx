import { createEffect, createResource, createSignal, For, Index, on } from 'solid-js'
import type { TableView } from '../report/page/page'
import { DownloadButton } from './DownloadButton'
import { RegimenTag } from './RegimenTag'
import type { StudyDesk } from './studyDesk'

const PAGE = 24

/** The concentration table of one regimen, a page of rows at a time; the worker lays out only what is looked at. */
export function ConcentrationTable(props: { desk: StudyDesk; table: TableView }) {
  const [regimen, setRegimen] = createSignal(0)
  const [from, setFrom] = createSignal(0)
  const total = () => props.table.regimens[regimen()]?.rows ?? 0
  const lastPage = () => Math.max(0, Math.floor((total() - 1) / PAGE) * PAGE)
  createEffect(
    on(props.desk.edition, () => {
      if (regimen() >= props.table.regimens.length) setRegimen(0)
      if (from() > lastPage()) setFrom(lastPage())
    })
  )
  const [rows] = createResource(
    () => ({ edition: props.desk.edition(), regimen: regimen(), from: from() }),
    (asked) => props.desk.worker.rows({ regimen: asked.regimen, from: asked.from, count: PAGE })
  )
  const shown = () => rows.latest ?? []
  const turn = (name: string, to: () => number, off: () => boolean) => (
    <button type="button" disabled={off()} onClick={() => setFrom(to())}>
      {name}
    </button>
  )
  return (
    <section class="table card" aria-labelledby="table-title">
      <div class="row">
        <h2 id="table-title">Concentration table</h2>
        <fieldset class="choice">
          <legend class="unseen">Regimen</legend>
          <For each={props.table.regimens}>
            {(entry, k) => (
              <button
                type="button"
                aria-pressed={regimen() === k()}
                aria-label={`Regimen ${entry.label.letter}: ${entry.label.name}`}
                onClick={() => {
                  setRegimen(k())
                  setFrom(0)
                }}
              >
                <RegimenTag label={entry.label} />
              </button>
            )}
          </For>
        </fieldset>
        <DownloadButton desk={props.desk} what="table" />
      </div>
      <section class="scroll" tabindex="0" aria-label="Rows of the concentration table">
        <table class="rows">
          <thead>
            <tr>
              <For each={props.table.columns}>
                {(column) => (
                  <th scope="col" classList={{ words: !column.numeric }}>
                    {column.title} <span class="unit">{column.unit}</span>
                  </th>
                )}
              </For>
            </tr>
          </thead>
          <tbody>
            <Index each={shown()}>
              {(row) => (
                <tr>
                  <Index each={row()}>
                    {(cell, k) => <td classList={{ words: !props.table.columns[k]?.numeric }}>{cell()}</td>}
                  </Index>
                </tr>
              )}
            </Index>
          </tbody>
        </table>
      </section>
      <div class="row pager">
        {turn(
          'First',
          () => 0,
          () => from() === 0
        )}
        {turn(
          'Previous',
          () => Math.max(0, from() - PAGE),
          () => from() === 0
        )}
        <span aria-live="polite">
          rows {total() === 0 ? 0 : from() + 1} to {Math.min(total(), from() + PAGE)} of {total()}
        </span>
        {turn(
          'Next',
          () => from() + PAGE,
          () => from() >= lastPage()
        )}
        {turn('Last', lastPage, () => from() >= lastPage())}
      </div>
    </section>
  )
}
