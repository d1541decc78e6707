import { For } from 'solid-js'
import type { Marked, Prose } from '../report/page/prose'

/** A sentence with its numbers and symbols set apart. */
export function Words(props: { prose: Prose }) {
  return <For each={props.prose}>{(part) => (typeof part === 'string' ? part : marked(part))}</For>
}

function marked(part: Marked) {
  switch (part.kind) {
    case 'value':
      return <span class="value">{part.text}</span>
    case 'strong':
      return <strong>{part.text}</strong>
    case 'symbol':
      return <var>{part.text}</var>
    case 'raised':
      return <sup>{part.text}</sup>
    case 'lowered':
      return <sub>{part.text}</sub>
  }
}
