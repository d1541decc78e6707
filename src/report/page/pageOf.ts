import type { StudyResult } from '../../study/result'
import { PROGRAM_VERSION } from '../version'
import { chartOf } from './chartOf'
import { estimatesView } from './estimates'
import { exposureGrids } from './exposureGrids'
import { foundSentences } from './found'
import { modelNote } from './modelNote'
import type { PageView } from './page'
import { patientNote } from './patientNote'
import { phasesView } from './phasesView'
import { populationLines } from './population'
import { regimenLabels } from './regimenLabel'
import { regimenNote } from './regimenNote'
import { polished, sentence, showingOf } from './showing'
import { tableView } from './tableView'
import { targetSentence } from './targetWords'

/** The page of one study: everything that is shown, as plain data. Pure; the same result gives the same page. */
export function pageOf(result: StudyResult): PageView {
  const { study } = result
  const showing = showingOf(study)
  const labels = regimenLabels(result.regimens.map(({ name }) => name))
  return {
    title: study.title,
    provenance: `Phasewise ${PROGRAM_VERSION}, study ${study.hash}`,
    cautions: result.cautions.map((caution) => sentence(polished(caution))),
    regimens: labels,
    note: {
      patient: patientNote(study, showing),
      estimates: estimatesView(result, showing),
      population: populationLines(result),
      model: modelNote(result, showing),
      regimens: result.regimens.map((regimen, k) => regimenNote(regimen, labels[k]!, result, showing)),
      targets: study.targets.map((target) => targetSentence(target, study, showing)),
      findings: foundSentences(result, labels, showing)
    },
    chart: chartOf(result, labels, showing),
    exposure: exposureGrids(result, labels, showing),
    phases: phasesView(result, labels, showing),
    table: tableView(result, labels, showing)
  }
}
