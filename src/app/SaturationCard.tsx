import { createMemo, createResource, For, Show } from 'solid-js'
import { saturationFigure } from '../report/figureSaturation'
import type { SaturationFigure } from '../report/page/saturationView'
import { FigureView } from './FigureView'
import { createFigureWidth } from './figureWidth'
import { Grid } from './Grid'
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
            <DoseFigure figure={shown().figure} />
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

function DoseFigure(props: { figure: SaturationFigure }) {
  let frame!: HTMLDivElement
  const width = createFigureWidth(() => frame, 520)
  const figure = createMemo(() => saturationFigure(props.figure, width()))
  return (
    <div ref={frame}>
      <p class="quiet">Steady-state average, {props.figure.levelUnit}</p>
      <FigureView figure={figure()} />
    </div>
  )
}
