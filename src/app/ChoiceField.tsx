import { For, onCleanup, onMount } from 'solid-js'
import { type Place, valueIn } from '../study/edit/place'

/**
 * One of a few words, chosen from a list. A click on a word, Enter or going on takes it; arrow keys only move on the list;
 * Escape leaves it as it was.
 */
export function ChoiceField(props: {
  place: Place
  onChoose: (value: string, focus: boolean) => void
  onLeave: () => void
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
  const press = (event: KeyboardEvent) => {
    byKey = true
    if (event.key === 'Enter') props.onChoose(list.value, true)
    else if (event.key === 'Escape') {
      left = true
      props.onLeave()
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
        if (!byKey) props.onChoose(list.value, true)
      }}
      onKeyDown={press}
      onBlur={() => {
        if (!left) props.onChoose(list.value, false)
      }}
    >
      <For each={choices()}>
        {({ value, text }) => (
          <option value={value} selected={value === valueIn(props.place)}>
            {text}
          </option>
        )}
      </For>
    </select>
  )
}
