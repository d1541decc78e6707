import { For, Match, Show, Switch } from 'solid-js'
import type { Marked, Prose } from '../report/page/prose'
import { EditValue } from './EditValue'

/** A sentence with its numbers and symbols set apart; what was typed can be typed anew. */
export function Words(props: { prose: Prose }) {
  return <For each={props.prose}>{(part) => (typeof part === 'string' ? part : <Part part={part} />)}</For>
}

function Part(props: { part: Marked }) {
  return (
    <Show when={props.part.edit} fallback={<Plain part={props.part} />}>
      {(edit) => <EditValue text={props.part.text} edit={edit()} />}
    </Show>
  )
}

function Plain(props: { part: Marked }) {
  const kind = () => props.part.kind
  return (
    <Switch fallback={<span class="value">{props.part.text}</span>}>
      <Match when={kind() === 'strong'}>
        <strong>{props.part.text}</strong>
      </Match>
      <Match when={kind() === 'symbol'}>
        <var>{props.part.text}</var>
      </Match>
      <Match when={kind() === 'raised'}>
        <sup>{props.part.text}</sup>
      </Match>
      <Match when={kind() === 'lowered'}>
        <sub>{props.part.text}</sub>
      </Match>
    </Switch>
  )
}
