import { createEffect, createMemo, createSignal, For, on, Show } from 'solid-js'
import { curvesFigure } from '../report/figureCurves'
import type { ChartView } from '../report/page/chart'
import { FigureView } from './FigureView'
import { createFigureWidth } from './figureWidth'
import { RegimenTag } from './RegimenTag'

/** The curve of every regimen over the window, with the dose lines under it. */
export function CurveCard(props: { chart: ChartView }) {
  const [axis, setAxis] = createSignal<'linear' | 'log'>('linear')
  const [chosen, setChosen] = createSignal(0)
  createEffect(
    on(
      () => props.chart.firstSite,
      (first) => setChosen(first)
    )
  )
  const site = () => props.chart.sites[chosen()] ?? props.chart.sites[0]!
  let frame!: HTMLDivElement
  const width = createFigureWidth(() => frame, 800)
  const figure = createMemo(() => curvesFigure(props.chart, site(), { width: width(), axis: axis() }))
  return (
    <section class="curve-card card" aria-labelledby="curve-title">
      <div class="row">
        <h2 id="curve-title">{site().title}</h2>
        <Show when={props.chart.sites.length > 1}>
          <fieldset class="choice">
            <legend class="unseen">Where</legend>
            <For each={props.chart.sites}>
              {(each, k) => (
                <button type="button" aria-pressed={chosen() === k()} onClick={() => setChosen(k())}>
                  {each.name}
                </button>
              )}
            </For>
          </fieldset>
        </Show>
        <fieldset class="choice">
          <legend class="unseen">Level axis</legend>
          <button type="button" aria-pressed={axis() === 'linear'} onClick={() => setAxis('linear')}>
            Linear
          </button>
          <button type="button" aria-pressed={axis() === 'log'} onClick={() => setAxis('log')}>
            Log
          </button>
        </fieldset>
      </div>
      <div ref={frame}>
        <FigureView figure={figure()} />
      </div>
      <ul class="key">
        <For each={site().curves}>
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
