import { For } from 'solid-js'
import { saveFile } from './saveFile'
import { SHIPPED_STUDIES, shippedStudy } from './shippedStudies'
import type { StudyDesk } from './studyDesk'

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
    const file = desk.file()
    if (file !== undefined) saveFile(file.name, file.content)
  }
  return (
    <header>
      <span class="brand">Phasewise</span>
      <h1>{desk.page()?.title ?? ''}</h1>
      <span class="busy" role="status">
        {desk.busy() ? 'Computing …' : ''}
      </span>
      <div class="actions">
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
        <button type="button" disabled={desk.file() === undefined} onClick={save}>
          Save
        </button>
        <button type="button" class="main" disabled={desk.page() === undefined} onClick={() => window.print()}>
          Print
        </button>
      </div>
    </header>
  )
}
