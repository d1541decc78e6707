import { For, Show } from 'solid-js'
import { saveFile } from './saveFile'
import { SHIPPED_STUDIES, shippedStudy } from './shippedStudies'
import { contentOf, type StudyDesk } from './studyDesk'
import { Words } from './Words'

/** The name of the study and what can be done with the file. */
export function Header(props: { desk: StudyDesk }) {
  const desk = props.desk
  let chooser!: HTMLInputElement
  let shelf!: HTMLUListElement
  const openChosen = () => {
    const file = chooser.files?.[0]
    chooser.value = ''
    if (file !== undefined) void desk.open({ name: file.name, content: file })
  }
  const openShipped = (id: string) => {
    shelf.hidePopover()
    shippedStudy(id).then(desk.open, (failure: Error) => desk.refuse(`${id}.json`, failure.message))
  }
  const save = () => {
    const study = desk.present()
    if (study !== undefined) saveFile(study.name, contentOf(study))
  }
  return (
    <header>
      <span class="brand">Phasewise</span>
      <h1>
        <Words prose={desk.page()?.heading ?? []} />
      </h1>
      <span class="busy" role="status">
        {desk.slow() ? `${desk.doing()} …` : desk.busy() ? 'Computing …' : ''}
      </span>
      <Show when={desk.slow()}>
        <button type="button" onClick={desk.stop}>
          Stop
        </button>
      </Show>
      <div class="actions">
        <button type="button" disabled={!desk.canUndo()} title="Undo (Ctrl+Z)" onClick={desk.undo}>
          Undo
        </button>
        <button type="button" disabled={!desk.canRedo()} title="Redo (Ctrl+Shift+Z)" onClick={desk.redo}>
          Redo
        </button>
        <button type="button" popovertarget="worked-studies">
          Worked studies
        </button>
        <ul ref={shelf} id="worked-studies" class="shelf" popover="auto">
          <For each={SHIPPED_STUDIES}>
            {(study) => (
              <li>
                <button type="button" onClick={() => openShipped(study.id)}>
                  {study.title}
                </button>
              </li>
            )}
          </For>
        </ul>
        <input ref={chooser} type="file" accept=".json,application/json" hidden onChange={openChosen} />
        <button
          type="button"
          title="Open a study file, or drop one anywhere on the page"
          onClick={() => chooser.click()}
        >
          Open
        </button>
        <button type="button" disabled={desk.present() === undefined} onClick={save}>
          Save
        </button>
        <button type="button" class="main" disabled={desk.page() === undefined} onClick={() => window.print()}>
          Print
        </button>
      </div>
    </header>
  )
}
