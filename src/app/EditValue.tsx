import { createSignal, createUniqueId, For, Match, Show, Switch } from 'solid-js'
import { unwrap } from 'solid-js/store'
import type { Issue } from '../pk/issue'
import type { EditMark } from '../report/page/prose'
import { type Choice, type Place, placeIn, valueIn } from '../study/edit/place'
import { type Offer, readTyped, typedText } from '../study/edit/readTyped'
import { renameRegimen } from '../study/edit/regimens'
import { setChoice, setValue, valueAt } from '../study/edit/setValue'
import type { StudyFile } from '../study/file/studySchema'
import { ChoiceField } from './ChoiceField'
import { useDesk } from './deskContext'
import { TypedField } from './TypedField'

/** A field that is open over a value; it belongs to one place in the file and is gone with it. */
interface OpenField {
  readonly at: string
  readonly text: string
  /** Why what was typed was not taken. */
  readonly message?: string
  readonly offer?: Offer
  /** The text that was refused. */
  readonly refused?: string
}

/**
 * A value of the study file, as a button in the sentence that becomes a field when it is pressed. What is refused stays in
 * the field with its message; what is implausible is taken and questioned beside the number.
 */
export function EditValue(props: { text: string; edit: EditMark }) {
  const desk = useDesk()
  const id = createUniqueId()
  const [field, setField] = createSignal<OpenField>()
  let button: HTMLButtonElement | undefined
  const open = () => (field()?.at === props.edit.at ? field() : undefined)
  /** The place with what stands in the study as edited, which may be ahead of the page. */
  const place = (): Place => {
    const draft = desk.present()
    return draft === undefined
      ? props.edit.place
      : placeIn(props.edit.place, valueAt(draft.file, props.edit.place.path))
  }
  const isAhead = () => desk.present() !== desk.good() && !same(valueIn(place()), valueIn(props.edit.place))
  const text = () => (isAhead() ? typedText(place()) || '–' : props.text)
  const issues = () => desk.issuesAt(props.edit.at)

  const begin = () => {
    if (!desk.restructuring()) setField({ at: props.edit.at, text: typedText(place()) })
  }
  const close = (focus: boolean) => {
    setField(undefined)
    if (focus) queueMicrotask(() => button?.focus())
  }
  const put = async (value: unknown, typed: string, focus: boolean, change = changeAt(props.edit.place, value)) => {
    const { at } = props.edit
    const before = desk.present()
    if (before !== undefined && same(change(before.file), before.file) && issues().length === 0) return close(focus)
    const found = await desk.edit(change, at)
    if (found === undefined || found.length === 0 || props.edit.place.kind === 'choice') return close(focus)
    setField({ at, text: typed, refused: typed, message: messageFor(found, at) })
  }
  const commit = (typed: string, focus: boolean) => {
    const answer = readTyped(place(), typed)
    if (answer.ok) return void put(answer.value, typed, focus)
    const { message, offer } = answer
    setField({ at: props.edit.at, text: typed, refused: typed, message, ...(offer !== undefined && { offer }) })
  }
  const choose = (choice: Choice, focus: boolean) => {
    const path = [...props.edit.place.path]
    const { value, text, beside } = choice
    const chosen = { value, text, ...(beside !== undefined && { beside: plainOf(beside) }) }
    void put(value, text, focus, (file) => setChoice(file, path, chosen))
  }
  const leave = (focus: boolean) => {
    // What the worker refused is taken back with the field that it came from.
    if (desk.refusal()?.edited === true && desk.lastEdited() === props.edit.at) desk.undo()
    close(focus)
  }
  const describedBy = () => {
    const ids = [
      ...(issues().length > 0 ? [`${id}-issues`] : []),
      ...(props.edit.question === undefined ? [] : [`${id}-question`])
    ]
    return ids.length === 0 ? undefined : ids.join(' ')
  }

  const echoed = () =>
    props.edit.echo !== undefined && (props.edit.quietEcho !== true || desk.lastEdited() === props.edit.at)
  return (
    <>
      <Switch
        fallback={
          <button
            ref={button}
            type="button"
            class="value edit"
            classList={{ bad: issues().length > 0, asked: props.edit.question !== undefined }}
            aria-label={`${props.edit.place.label}: ${text()}`}
            aria-describedby={describedBy()}
            onClick={begin}
          >
            {text()}
          </button>
        }
      >
        <Match when={open() !== undefined && props.edit.place.kind === 'choice'}>
          <ChoiceField place={place()} onChoose={choose} onLeave={leave} />
        </Match>
        <Match when={open()}>
          {(opened) => (
            <TypedField
              id={id}
              label={props.edit.place.label}
              text={opened().text}
              steps={props.edit.place.kind !== 'text'}
              message={opened().message}
              offer={opened().offer}
              refused={opened().refused}
              onCommit={commit}
              onLeave={() => leave(true)}
            />
          )}
        </Match>
      </Switch>
      <Show when={open() === undefined && issues().length > 0}>
        <span class="aside bad" id={`${id}-issues`}>
          <For each={issues()}>{(issue) => <> {issue.message}</>}</For>
        </span>
      </Show>
      <Show when={open() === undefined && echoed()}>
        <span class="aside" role={desk.lastEdited() === props.edit.at ? 'status' : undefined}>
          {' '}
          = {props.edit.echo}
        </span>
      </Show>
      <Show when={open() === undefined && props.edit.question}>
        {(question) => (
          <span class="aside asked" id={`${id}-question`}>
            {' '}
            {question().text}
            <Show when={question().offer}>
              {(offer) => (
                <>
                  {' '}
                  <button
                    type="button"
                    class="offer"
                    onClick={() => void put({ ...offer().quantity }, props.text, true)}
                  >
                    {offer().text}
                  </button>
                </>
              )}
            </Show>
          </span>
        )}
      </Show>
    </>
  )
}

/** A regimen's name takes with it what refers to it. */
function changeAt(place: Place, value: unknown): (file: StudyFile) => StudyFile {
  const path = [...place.path]
  const [list, index, key] = path
  if (list === 'regimens' && typeof index === 'number' && key === 'name' && typeof value === 'string') {
    return (file) => renameRegimen(file, index, value)
  }
  return (file) => setValue(file, path, value)
}

/** The issue of the value itself, else the first. */
function messageFor(issues: readonly Issue[], at: string): string {
  const issue = issues.find(({ path }) => path === at) ?? issues[0]
  return issue?.message ?? ''
}

/** The data behind what the page holds, as it may be put into a file. */
function plainOf<T>(held: T): T {
  return structuredClone(unwrap(held))
}

function same(a: unknown, b: unknown): boolean {
  return JSON.stringify(a) === JSON.stringify(b)
}
