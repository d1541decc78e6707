import { createMemo, createSignal, For } from 'solid-js'
import { curvesFigure } from '../report/figureCurves'
import type { ChartView } from '../report/page/chart'
import { FigureView } from './FigureView'
import { RegimenTag } from './RegimenTag'
import { createWidth } from './width'

/** The curve of every regimen over the window, with the dose lines under it. */
export function CurveCard(props: { chart: ChartView }) {
  const [axis, setAxis] = createSignal<'linear' | 'log'>('linear')
  let frame!: HTMLDivElement
  const width = createWidth(() => frame, 800)
  const figure = createMemo(() => curvesFigure(props.chart, { width: width(), axis: axis() }))
  const choice = (kind: 'linear' | 'log', name: string) => (
    <button type="button" aria-pressed={axis() === kind} onClick={() => setAxis(kind)}>
      {name}
    </button>
  )
  return (
    <section class="curve-card card" aria-labelledby="curve-title">
      <div class="row">
        <h2 id="curve-title">{props.chart.title}</h2>
        <fieldset class="choice">
          <legend class="unseen">Level axis</legend>
          {choice('linear', 'Linear')}
          {choice('log', 'Log')}
        </fieldset>
      </div>
      <div ref={frame}>
        <FigureView figure={figure()} />
      </div>
      <ul class="key">
        <For each={props.chart.curves}>
          {(curve) => (
            <li>
              <RegimenTag label={curve.regimen} /> {curve.regimen.name}
            </li>
          )}
        </For>
      </ul>
    </section>
  )
}
