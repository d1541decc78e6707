import { For, onCleanup, onMount, Show } from 'solid-js'
import { type Choice, type Place, valueIn } from '../study/edit/place'

/**
 * One of a few words, chosen from a list. A click on a word, Enter or going on takes it; arrow keys only move on the list;
 * Escape leaves it as it was.
 */
export function ChoiceField(props: {
  place: Place
  onChoose: (choice: Choice, focus: boolean) => void
  onLeave: (focus: boolean) => void
}) {
  let list!: HTMLSelectElement
  let byKey = false
  let left = false
  // A field that is taken off the page loses the focus too, which is no going on.
  onCleanup(() => {
    left = true
  })
  onMount(() => list.focus())
  const choices = () => (props.place.kind === 'choice' ? props.place.choices : [])
  /** The first of the words for what stands there. */
  const now = () => choices().findIndex(({ value }) => value === valueIn(props.place))
  const choose = (focus: boolean) => {
    const choice = choices()[list.selectedIndex - (now() < 0 ? 1 : 0)]
    if (choice === undefined) props.onLeave(focus)
    else props.onChoose(choice, focus)
  }
  const press = (event: KeyboardEvent) => {
    byKey = true
    if (event.key === 'Enter') choose(true)
    else if (event.key === 'Escape') {
      left = true
      props.onLeave(true)
    } else return
    event.preventDefault()
  }
  return (
    <select
      ref={list}
      class="field"
      aria-label={props.place.label}
      onPointerDown={() => {
        byKey = false
      }}
      onChange={() => {
        if (!byKey) choose(true)
      }}
      onKeyDown={press}
      onBlur={() => {
        if (!left) choose(false)
      }}
    >
      <Show when={now() < 0}>
        <option selected disabled>
          choose
        </option>
      </Show>
      <For each={choices()}>{({ text }, k) => <option selected={k() === now()}>{text}</option>}</For>
    </select>
  )
}
