import type { WeightDescriptor } from '../pk/subject'
import { covariateOf } from './covariates'
import { nameInWords, valueInWords } from './covariateWords'
import type { DrugModel } from './drugModel'
import type { Note } from './estimate'
import type { CovariateName, Person } from './person'
import { outsideInWords, positionIn, rangeInWords } from './ranges'
import type { Covariates } from './relation'
import { weightBy } from './weightDescriptor'

/** Something found about this person under this model. Cautions must be shown; notes are read beside the number. */
export interface Finding {
  readonly kind:
    | 'inside studied'
    | 'outside studied'
    | 'not known'
    | 'range not stated'
    /** An equation at the edge of its validity. */
    | 'edge'
    /** A floor or a ceiling of the model. */
    | 'guard'
    /** Given directly in place of a computed value. */
    | 'instead'
    | 'derived'
    | 'apparent'
    /** Numbers that were not read in the source: the model is an illustration. */
    | 'assumed'
    /** What the model's source asks to be careful about. */
    | 'source'
    | 'unstable creatinine'
    | 'growing age'
  readonly severity: 'fine' | 'note' | 'caution'
  readonly covariate?: CovariateName
  readonly text: string
}

const SEVERITY_OF_NOTE = { edge: 'caution', guard: 'note', instead: 'note', derived: 'note' } as const

/** Everything found about one person at one time. `covariates` are those that the model reads. */
export function findingsOf(drugModel: DrugModel, person: Person, covariates: Covariates): readonly Finding[] {
  return [
    ...againstStudied(drugModel, person),
    ...notStated(drugModel, covariates),
    ...validNotKnown(drugModel, person),
    ...[...covariates.values()].flatMap((covariate) => notesOf(covariate.name, covariate.notes)),
    ...modelFindings(drugModel)
  ]
}

/** Per studied covariate: inside, outside by how much, or not known; a covariate that is lacking is never "inside". */
export function againstStudied(drugModel: DrugModel, person: Person): readonly Finding[] {
  return (drugModel.studied?.ranges ?? []).map((range): Finding => {
    const name = range.covariate
    const found = covariateOf(name, person, drugModel)
    const studied = `studied: ${rangeInWords(range, drugModel)}`
    if (found.kind === 'not computed')
      return {
        kind: 'not known',
        severity: 'caution',
        covariate: name,
        text: `${nameInWords(name)} is not known (${found.reason}); ${studied}`
      }
    const position = positionIn(range, found.value)
    if (position.kind === 'inside')
      return {
        kind: 'inside studied',
        severity: 'fine',
        covariate: name,
        text: `${nameInWords(name)} ${valueInWords(name, found.value, drugModel)} is inside the studied range; ${studied}`
      }
    return {
      kind: 'outside studied',
      severity: 'caution',
      covariate: name,
      text: `${outsideInWords(range, found.value, position, drugModel)}, outside the studied range; ${studied}`
    }
  })
}

/** Covariates that the model reads and whose studied range its source does not state. */
function notStated(drugModel: DrugModel, covariates: Covariates): readonly Finding[] {
  const stated = new Set((drugModel.studied?.ranges ?? []).map((range) => range.covariate))
  return [...covariates.keys()].flatMap((name): Finding[] => {
    if (stated.has(name)) return []
    const text = `${nameInWords(name)} enters this model, which states no studied range for it`
    return [{ kind: 'range not stated', severity: 'note', covariate: name, text }]
  })
}

/** A bound of `valid` that cannot be checked because the covariate is lacking. */
function validNotKnown(drugModel: DrugModel, person: Person): readonly Finding[] {
  return drugModel.valid.flatMap((range): Finding[] => {
    const found = covariateOf(range.covariate, person, drugModel)
    if (found.kind === 'known') return []
    const text = `${nameInWords(range.covariate)} is not known, and the model's equations hold only for ${rangeInWords(range, drugModel)}`
    return [{ kind: 'not known', severity: 'caution', covariate: range.covariate, text }]
  })
}

/** Notes on an estimate as findings. */
function notesOf(name: CovariateName, notes: readonly Note[]): readonly Finding[] {
  return notes.map((note) => ({
    kind: note.kind,
    severity: SEVERITY_OF_NOTE[note.kind],
    covariate: name,
    text: note.text
  }))
}

/** What must be said of the weights by which doses are reckoned; the words are those of the dose lines. */
export function weightFindings(
  words: readonly WeightDescriptor[],
  person: Person,
  drugModel: DrugModel
): readonly Finding[] {
  return [...new Set(words)].flatMap((word) => {
    const weight = weightBy(word, person, drugModel.covariates.leanWeight?.equation ?? 'janmahasatian')
    return weight.kind === 'computed' ? notesOf('weight', weight.notes) : []
  })
}

/** What holds for everyone under this model: apparent parameters, assumed numbers, its source's cautions. */
export function modelFindings(drugModel: DrugModel): readonly Finding[] {
  const findings: Finding[] = []
  if (drugModel.apparent) {
    findings.push({
      kind: 'apparent',
      severity: 'note',
      text: 'clearances and volumes of this model contain the bioavailability: they are labelled /F, and there is no intravenous route'
    })
  }
  for (const parameter of drugModel.parameters) {
    const reasons = [parameter.assumed, ...parameter.typical.map((term) => term.assumed)]
    for (const because of new Set(reasons.flatMap((assumed) => assumed?.because ?? []))) {
      findings.push({
        kind: 'assumed',
        severity: 'caution',
        text: `${parameter.name} was not read in the source, so that this model is an illustration: ${because}`
      })
    }
  }
  if (drugModel.source.read === 'abstract')
    findings.push({ kind: 'source', severity: 'caution', text: 'of the published source only the abstract was read' })
  for (const text of drugModel.source.cautions) findings.push({ kind: 'source', severity: 'caution', text })
  return findings
}
