import { createEffect, onMount, Show } from 'solid-js'
import { CautionLine } from './CautionLine'
import { ConcentrationTable } from './ConcentrationTable'
import { CurveCard } from './CurveCard'
import { DeskContext } from './deskContext'
import { acceptDrops } from './drop'
import { EstimatesCard } from './EstimatesCard'
import { ExposureCard } from './ExposureCard'
import { Header } from './Header'
import { IssueList } from './IssueList'
import { Note } from './Note'
import { PhasesCard } from './PhasesCard'
import { SaturationCard } from './SaturationCard'
import { SecondWitness } from './SecondWitness'
import type { StudyDesk } from './studyDesk'
import { acceptUndoKeys } from './undoKeys'
import { VisitLine } from './VisitLine'
import { createVisit } from './visit'

/** The one page: the note, the curve beside it, then exposure, phases and the table, over a caution that stays. */
export function App(props: { desk: StudyDesk }) {
  const desk = props.desk
  const visit = createVisit(desk)
  onMount(() => {
    acceptDrops(desk)
    acceptUndoKeys(desk)
    void visit.begin()
  })
  createEffect(() => {
    document.title = desk.page() === undefined ? 'Phasewise' : `${desk.page()?.title} · Phasewise`
  })
  return (
    <DeskContext.Provider value={desk}>
      <Header desk={desk} />
      <main aria-busy={desk.busy()}>
        <VisitLine desk={desk} visit={visit} />
        <Show when={desk.refusal()}>{(refusal) => <IssueList refusal={refusal()} kept={desk.page()?.title} />}</Show>
        <Show when={desk.page()} fallback={<p class="waiting">{desk.refusal() ? '' : 'Computing …'}</p>}>
          {(page) => (
            <div class="desk" classList={{ old: desk.refusal() !== undefined }}>
              <Note desk={desk} page={page()} />
              <CurveCard chart={page().chart} />
              <ExposureCard desk={desk} grids={page().exposure} />
              <EstimatesCard estimates={page().note.estimates} />
              <PhasesCard desk={desk} phases={page().phases} />
              <SaturationCard desk={desk} />
              <ConcentrationTable desk={desk} table={page().table} />
              <footer class="provenance">
                <SecondWitness desk={desk} />
                <p class="witness">{page().provenance}</p>
              </footer>
            </div>
          )}
        </Show>
      </main>
      <CautionLine count={desk.page()?.cautions.length ?? 0} />
    </DeskContext.Provider>
  )
}
