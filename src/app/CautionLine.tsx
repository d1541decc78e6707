import { Show } from 'solid-js'
import { CAUTION } from '../report/caution'

/** The caution that never scrolls away; it stands before the first study is there, too. */
export function CautionLine(props: { count: number }) {
  return (
    <aside class="caution" aria-label="Caution">
      <p>
        {CAUTION}
        <Show when={props.count > 0}>
          {' '}
          <a href="#cautions">
            {props.count === 1 ? '1 caution applies' : `${props.count} cautions apply`} to this study.
          </a>
        </Show>
      </p>
    </aside>
  )
}
