import { createSignal, For, Index, Show } from 'solid-js'
import type { RegimenNote, ScheduledDose } from '../report/page/page'
import { addDose, markDose, removeDose } from '../study/edit/doses'
import { copyRegimen, moveRegimen, removeRegimen } from '../study/edit/regimens'
import type { StudyFile } from '../study/file/studySchema'
import { RegimenTag } from './RegimenTag'
import type { StudyDesk } from './studyDesk'
import { Words } from './Words'

/** As many as have a colour and a dash of their own. */
export const MOST_REGIMENS = 6

interface RegimenProps {
  readonly desk: StudyDesk
  readonly regimen: RegimenNote
  /** Its position. */
  readonly index: number
  readonly count: number
}

/** A regimen in words, with what can be done with the whole of it, and its doses one by one. */
export function RegimenBlock(props: RegimenProps) {
  const letter = () => props.regimen.label.letter
  const kept = () => (props.count === 1 ? 'a study has at least one regimen' : props.regimen.keptBecause)
  let block!: HTMLDivElement
  /** Change the list of regimens; the focus follows the regimen to its new position. */
  const act = async (change: (file: StudyFile) => StudyFile, to: number) => {
    const list = block.parentElement
    const used = document.activeElement?.getAttribute('data-tool')
    await props.desk.restructure(change)
    const tools = list?.querySelectorAll('.regimen')[to]?.querySelectorAll<HTMLButtonElement>('.tools button')
    const able = [...(tools ?? [])].filter((tool) => !tool.disabled)
    const follow = able.find((tool) => tool.getAttribute('data-tool') === used) ?? able[0]
    follow?.focus()
  }
  const move = (by: number) => {
    const from = props.index
    void act((file) => moveRegimen(file, from, from + by), from + by)
  }
  return (
    <div ref={block} class={`regimen s${props.regimen.label.style}`}>
      <div class="row">
        <h3>
          <RegimenTag label={props.regimen.label} /> <Words prose={props.regimen.name} />
        </h3>
        <div class="tools">
          <button
            type="button"
            aria-label={`Copy regimen ${letter()}`}
            disabled={props.count >= MOST_REGIMENS}
            data-tool="copy"
            onClick={() => void act((file) => copyRegimen(file, props.index), props.index + 1)}
          >
            Copy
          </button>
          <button
            type="button"
            aria-label={`Move regimen ${letter()} up`}
            disabled={props.index === 0}
            data-tool="up"
            onClick={() => move(-1)}
          >
            Up
          </button>
          <button
            type="button"
            aria-label={`Move regimen ${letter()} down`}
            disabled={props.index === props.count - 1}
            data-tool="down"
            onClick={() => move(1)}
          >
            Down
          </button>
          <button
            type="button"
            aria-label={`Remove regimen ${letter()}`}
            title={kept()}
            disabled={kept() !== ''}
            data-tool="remove"
            onClick={() => void act((file) => removeRegimen(file, props.index), Math.max(0, props.index - 1))}
          >
            Remove
          </button>
        </div>
      </div>
      <p>
        <Words prose={props.regimen.sentence} />
      </p>
      <For each={props.regimen.notes}>{(remark) => <p class="quiet">{remark}</p>}</For>
      <DoseList {...props} />
    </div>
  )
}

/** Every scheduled dose with a button that says whether it was missed, and the lines that they are of. */
function DoseList(props: RegimenProps) {
  const [open, setOpen] = createSignal(false)
  const lines = () => Array.from({ length: props.regimen.lines }, (_, k) => k)
  const mark = (dose: ScheduledDose) => {
    const { line, number } = dose
    const fate = dose.missed ? 'given' : 'missed'
    void props.desk.restructure((file) => markDose(file, props.index, line, number, fate))
  }
  return (
    <details class="doses" onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary>
        Doses one by one<span class="unseen"> of regimen {props.regimen.label.letter}</span>
      </summary>
      <Show when={open()}>
        <p class="quiet">Press a dose that was missed; press it again if it was given after all.</p>
        <For each={lines()}>
          {(line) => (
            <div>
              <div class="row">
                <h4>Line {line + 1}</h4>
                <button
                  type="button"
                  aria-label={`Remove this line: line ${line + 1} of regimen ${props.regimen.label.letter}`}
                  disabled={props.regimen.lines === 1}
                  onClick={() => void props.desk.restructure((file) => removeDose(file, props.index, line))}
                >
                  Remove this line
                </button>
              </div>
              <div class="scheduled">
                <Index each={props.regimen.doses.filter((dose) => dose.line === line)}>
                  {(dose) => (
                    <button type="button" aria-pressed={dose().missed} onClick={() => mark(dose())}>
                      {dose().text}
                      {dose().missed ? ', missed' : ''}
                    </button>
                  )}
                </Index>
              </div>
            </div>
          )}
        </For>
        <button
          type="button"
          class="take"
          onClick={() => void props.desk.restructure((file) => addDose(file, props.index))}
        >
          Add a dose line
        </button>
      </Show>
    </details>
  )
}
