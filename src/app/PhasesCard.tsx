import { For, Show } from 'solid-js'
import { phasesFigure } from '../report/figurePhases'
import type { PhasesBlock, PhasesView } from '../report/page/page'
import { DownloadButton } from './DownloadButton'
import { Grid } from './Grid'
import { SizedFigure } from './SizedFigure'
import type { StudyDesk } from './studyDesk'
import { Words } from './Words'

/** The phases of the model, when distribution is over and when steady state is near. */
export function PhasesCard(props: { desk: StudyDesk; phases: PhasesView }) {
  return (
    <section class="phases card" aria-labelledby="phases-title">
      <div class="row">
        <h2 id="phases-title">Phases</h2>
        <DownloadButton desk={props.desk} what="phases" />
      </div>
      <Show when={props.phases.why}>{(why) => <p class="quiet">{why()}</p>}</Show>
      <For each={props.phases.blocks}>{(block) => <Block block={block} />}</For>
      <Grid grid={props.phases.sampling} />
    </section>
  )
}

function Block(props: { block: PhasesBlock }) {
  return (
    <div class="phase-block">
      <Show when={props.block.figure}>
        {(curves) => <SizedFigure draw={(width) => phasesFigure(curves(), width)} expected={520} />}
      </Show>
      <div>
        <Grid grid={props.block.table} />
        <For each={props.block.sentences}>
          {(sentence) => (
            <p class="quiet">
              <Words prose={sentence} />
            </p>
          )}
        </For>
      </div>
    </div>
  )
}
