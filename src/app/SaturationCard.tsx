import { createResource, For, Show } from 'solid-js'
import { saturationFigure } from '../report/figureSaturation'
import { Grid } from './Grid'
import { SizedFigure } from './SizedFigure'
import type { StudyDesk } from './studyDesk'
import { Words } from './Words'

/** What saturation makes of the dose; absent for a linear model. Asked for after the page stands, so that it waits for nothing. */
export function SaturationCard(props: { desk: StudyDesk }) {
  const [view] = createResource(props.desk.edition, () => props.desk.worker.saturation())
  return (
    // While the next study is computed, the last one's answer is not shown beside it.
    <Show when={view.state === 'ready' ? view() : undefined}>
      {(shown) => (
        <section class="saturation card" aria-labelledby="saturation-title">
          <h2 id="saturation-title">Saturation</h2>
          <div class="phase-block">
            <div>
              <p class="quiet">Steady-state average, {shown().figure.levelUnit}</p>
              <SizedFigure draw={(width) => saturationFigure(shown().figure, width)} expected={520} />
            </div>
            <div>
              <Grid grid={shown().grid} />
              <For each={shown().sentences}>
                {(sentence) => (
                  <p class="quiet">
                    <Words prose={sentence} />
                  </p>
                )}
              </For>
            </div>
          </div>
        </section>
      )}
    </Show>
  )
}
