import type { RegimenLabel } from '../report/page/page'

/** A regimen's letter beside a sample of its line, so that it is never told by colour alone. */
export function RegimenTag(props: { label: RegimenLabel }) {
  return (
    <span class="tag" title={props.label.name}>
      <svg class="sample" viewBox="0 0 26 10" width="26" height="10" aria-hidden="true">
        <path class={`curve s${props.label.style}`} d="M1 5H25" />
      </svg>
      <b class={`letter s${props.label.style}`}>{props.label.letter}</b>
    </span>
  )
}
