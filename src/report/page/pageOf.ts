import type { StudyFile } from '../../study/file/studySchema'
import type { StudyResult } from '../../study/result'
import { PROGRAM_VERSION } from '../version'
import { chartOf } from './chartOf'
import { estimatesView } from './estimates'
import { exposureGrids } from './exposureGrids'
import { foundSentences } from './found'
import { Marks } from './marks'
import { modelNote } from './modelNote'
import type { PageView } from './page'
import { patientNote } from './patientNote'
import { phasesView } from './phasesView'
import { populationLines } from './population'
import { regimenLabels } from './regimenLabel'
import { regimenNote } from './regimenNote'
import { polished, sentence, showingOf } from './showing'
import { tableView } from './tableView'
import { courseSentence, targetSentence } from './targetNote'

/**
 * The page of one study: everything that is shown, as plain data. Pure; the same result gives the same page. With the file
 * that the study was read from, what was typed is shown as it was typed and can be edited; without it the page is to be read.
 */
export function pageOf(result: StudyResult, file?: StudyFile): PageView {
  const { study } = result
  const showing = showingOf(study)
  const marks = new Marks(file, result.questions, study.drugModel.drug.molarMass)
  const context = { result, showing, marks }
  const labels = regimenLabels(result.regimens.map(({ name }) => name))
  return {
    title: study.title,
    heading: [marks.text(['title'], study.title, 'title of the study', LONGEST_TITLE, true)],
    provenance: `Phasewise ${PROGRAM_VERSION}, study ${study.hash}`,
    cautions: result.cautions.map((caution) => sentence(polished(caution))),
    regimens: labels,
    note: {
      patient: patientNote(study, showing, marks),
      estimates: estimatesView(result, showing),
      population: populationLines(result),
      model: modelNote(result, showing),
      regimens: result.regimens.map((regimen, k) => regimenNote(regimen, k, labels[k]!, context)),
      targets: study.targets.map((target, k) => targetSentence(target, k, study, showing, marks)),
      course: courseSentence(study, showing, marks),
      findings: foundSentences(result, labels, showing)
    },
    chart: chartOf(result, labels, showing),
    exposure: exposureGrids(result, labels, showing),
    phases: phasesView(result, labels, showing),
    table: tableView(result, labels, showing)
  }
}

const LONGEST_TITLE = 500
