import { For, Show } from 'solid-js'
import type { PageView } from '../report/page/page'
import { addRegimen } from '../study/edit/regimens'
import { MOST_REGIMENS, RegimenBlock } from './RegimenBlock'
import type { StudyDesk } from './studyDesk'
import { Words } from './Words'

/** The consult note: patient, model, regimens and targets in words, then what was found. */
export function Note(props: { desk: StudyDesk; page: PageView }) {
  const note = () => props.page.note
  return (
    <article class="note" aria-label="Note">
      <section class="finding" aria-labelledby="found">
        <h2 id="found">Findings</h2>
        <For each={note().findings}>
          {(sentence) => (
            <p>
              <Words prose={sentence} />
            </p>
          )}
        </For>
        <Show when={props.page.cautions.length > 0}>
          <ul class="cautions" id="cautions" tabindex="-1" aria-label="Cautions that apply to this study">
            <For each={props.page.cautions}>{(caution) => <li>{caution}</li>}</For>
          </ul>
        </Show>
      </section>
      <section aria-labelledby="patient">
        <h2 id="patient">Patient</h2>
        <For each={note().patient}>
          {(sentence) => (
            <p>
              <Words prose={sentence} />
            </p>
          )}
        </For>
        <ul class="population">
          <For each={note().population}>
            {(line) => (
              <li class={line.standing}>
                <span class="chip">{STANDING[line.standing]}</span>
                <span>{line.text}</span>
              </li>
            )}
          </For>
        </ul>
      </section>
      <section aria-labelledby="model">
        <h2 id="model">Model</h2>
        <p>
          <Words prose={note().model.sentence} />
        </p>
        <ul class="equations">
          <For each={note().model.equations}>
            {(equation) => (
              <li>
                <Words prose={equation} />
              </li>
            )}
          </For>
        </ul>
        <p class="quiet">
          <Words prose={note().model.source} />
        </p>
      </section>
      <section aria-labelledby="regimens">
        <h2 id="regimens">Regimens</h2>
        <For each={note().regimens}>
          {(regimen, k) => (
            <RegimenBlock desk={props.desk} regimen={regimen} index={k()} count={note().regimens.length} />
          )}
        </For>
        <button
          type="button"
          class="take"
          disabled={note().regimens.length >= MOST_REGIMENS}
          onClick={() => void props.desk.restructure(addRegimen)}
        >
          Add a regimen
        </button>
      </section>
      <section aria-labelledby="targets">
        <h2 id="targets">Targets</h2>
        <ul class="targets">
          <For each={note().targets} fallback={<li class="quiet">No target is stated.</li>}>
            {(target) => (
              <li>
                <Words prose={target} />
              </li>
            )}
          </For>
        </ul>
        <p class="quiet">
          <Words prose={note().course} />
        </p>
      </section>
    </article>
  )
}

const STANDING = { inside: 'inside', outside: 'outside', unknown: 'not known', note: 'note' } as const
