import type { StudyResult } from '../../study/result'
import type { Quantity } from '../../units/quantity'
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

/**
 * The page of one study: everything that is shown, as plain data. Pure; the same result gives the same page.
 * `file` is the study as it was typed: values in other units than the core's are echoed from it.
 */
export function pageOf(result: StudyResult, file?: TypedStudy): PageView {
  const { study } = result
  const showing = showingOf(study)
  const labels = regimenLabels(result.regimens.map(({ name }) => name))
  return {
    title: study.title,
    provenance: `Phasewise ${PROGRAM_VERSION}, study ${study.hash}`,
    cautions: result.cautions.map((caution) => sentence(polished(caution))),
    regimens: labels,
    note: {
      patient: patientNote(study, showing, (path, name) => typedValue(file, path, name)),
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

/** Of a study file what the page echoes: the patient's values and what they change to. */
export interface TypedStudy {
  readonly patient: object
}

function typedValue(file: TypedStudy | undefined, path: string, name: string): Quantity | undefined {
  if (file === undefined) return undefined
  const changes = (file.patient as { readonly changes?: readonly object[] }).changes ?? []
  const position = /^patient\.changes\[(\d+)\]$/.exec(path)?.[1]
  const place = position === undefined ? file.patient : changes[Number(position)]
  const found = (place as Readonly<Record<string, unknown>> | undefined)?.[name]
  return isQuantity(found) ? found : undefined
}

function isQuantity(found: unknown): found is Quantity {
  return typeof found === 'object' && found !== null && 'value' in found && 'unit' in found
}
