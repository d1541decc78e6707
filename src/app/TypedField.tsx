import { createSignal, onCleanup, onMount, Show } from 'solid-js'
import type { Offer } from '../study/edit/readTyped'
import { stepOf, stepped } from '../study/edit/step'

/**
 * A field over a typed value. Enter or going on takes what is typed, Escape leaves it; arrow keys step the number, with
 * Shift tenfold. What was refused stays, with its message; an offer is accepted by its button, and one that only spells
 * the unit otherwise by Enter once more.
 */
export function TypedField(props: {
  id: string
  label: string
  text: string
  /** Whether the arrow keys step a number in it. */
  steps: boolean
  message: string | undefined
  offer: Offer | undefined
  refused: string | undefined
  onCommit: (text: string, focus: boolean) => void
  onLeave: () => void
}) {
  let input!: HTMLInputElement
  let frame!: HTMLSpanElement
  const [size, setSize] = createSignal(props.text.length)
  let power: number | undefined
  let left = false
  // A field that is taken off the page loses the focus too, which is no going on.
  onCleanup(() => {
    left = true
  })
  onMount(() => {
    input.focus()
    input.select()
  })
  const typed = () => {
    power = undefined
    setSize(input.value.length)
  }
  const step = (count: number, tenfold: boolean) => {
    power ??= stepOf(input.value)
    if (power === undefined) return
    const moved = stepped(input.value, tenfold ? power + 1 : power, count)
    if (!tenfold) power = moved.power
    input.value = moved.text
    setSize(moved.text.length)
  }
  const take = (text: string) => {
    input.value = text
    props.onCommit(text, true)
  }
  const press = (event: KeyboardEvent) => {
    const { offer } = props
    if (event.key.startsWith('Arrow') && !props.steps) return
    switch (event.key) {
      case 'Enter':
        if (event.repeat) break
        if (offer?.spelling === true && input.value === props.refused) take(offer.text)
        else props.onCommit(input.value, true)
        break
      case 'Escape':
        left = true
        props.onLeave()
        break
      case 'ArrowUp':
        step(1, event.shiftKey)
        break
      case 'ArrowDown':
        step(-1, event.shiftKey)
        break
      default:
        return
    }
    event.preventDefault()
  }
  const blurred = (event: FocusEvent) => {
    // Going to the offer is not going on.
    if (left || (event.relatedTarget instanceof Node && frame.contains(event.relatedTarget))) return
    if (input.value !== props.refused) props.onCommit(input.value, false)
  }
  return (
    <span ref={frame} class="editing">
      <input
        ref={input}
        class="field"
        type="text"
        autocomplete="off"
        spellcheck={false}
        aria-label={props.label}
        aria-invalid={props.message !== undefined}
        aria-describedby={props.message === undefined ? undefined : `${props.id}-message`}
        size={Math.max(4, size() + 1)}
        value={props.text}
        onInput={typed}
        onKeyDown={press}
        onBlur={blurred}
      />
      <Show when={props.message}>
        <span class="aside bad" id={`${props.id}-message`} role="alert">
          {props.offer?.spelling === true ? 'not a unit here; did you mean' : props.message}
          <Show when={props.offer}>
            {(offer) => (
              <>
                {' '}
                <button type="button" class="offer" onClick={() => take(offer().text)}>
                  {offer().spelling ? props.message : offer().text}
                </button>
              </>
            )}
          </Show>
        </span>
      </Show>
    </span>
  )
}
