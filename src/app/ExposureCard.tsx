import { For } from 'solid-js'
import type { GridView } from '../report/page/page'
import { DownloadButton } from './DownloadButton'
import { Grid } from './Grid'
import type { StudyDesk } from './studyDesk'

/** Exposure of each regimen against the targets, at steady state, over the study, by day and by interval. */
export function ExposureCard(props: { desk: StudyDesk; grids: readonly GridView[] }) {
  return (
    <section class="exposure card" aria-labelledby="exposure-title">
      <div class="row">
        <h2 id="exposure-title">Exposure</h2>
        <DownloadButton desk={props.desk} what="exposure" />
      </div>
      <For each={props.grids}>{(grid) => <Grid grid={grid} />}</For>
    </section>
  )
}
