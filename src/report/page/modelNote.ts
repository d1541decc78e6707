import { equation } from '../../patient/equation'
import type { ParameterValue } from '../../patient/parameterValues'
import type { IndividualStretch, StudyResult } from '../../study/result'
import { brief, withUnit } from './number'
import type { ModelView } from './page'
import { type Marked, type Prose, raised, symbol, value } from './prose'
import { listed, polished, type Showing, sentence } from './showing'

/** The model, its numbers for this patient, its relations as equations and where it is from. */
export function modelNote(result: StudyResult, showing: Showing): ModelView {
  const { drugModel } = result.study
  const [first, ...later] = result.stretches
  if (first === undefined) throw new RangeError('a result has a stretch from time 0 on')
  const prose: (string | Marked)[] = [`${drugModel.title}. For this patient `, ...parameters(all(first))]
  let before = first
  for (const stretch of later) {
    const changed = all(stretch).filter(
      (parameter) => before.individual.parameters.get(parameter.name)?.value !== parameter.value
    )
    if (changed.length > 0) prose.push('; from ', value(showing.typedTime(stretch.from)), ' ', ...parameters(changed))
    before = stretch
  }
  prose.push('.')
  return { title: drugModel.title, sentence: prose, equations: equations(result, first), source: source(result) }
}

function all(stretch: IndividualStretch): readonly ParameterValue[] {
  return [...stretch.individual.parameters.values()]
}

function parameters(values: readonly ParameterValue[]): (string | Marked)[] {
  return values.flatMap((parameter, k) => [
    ...(k === 0 ? [] : [k === values.length - 1 ? ' and ' : ', ']),
    symbol(parameter.label),
    '\u00a0',
    value(withUnit(brief(parameter.stated), parameter.unit))
  ])
}

/** Relations with a covariate one by one; what is the same in everyone in one line. */
function equations(result: StudyResult, first: IndividualStretch): readonly Prose[] {
  const { parameters } = result.study.drugModel
  const label = (name: string) => first.individual.parameters.get(name)?.label ?? name
  const related = parameters.filter(({ typical }) => typical.some((term) => term.factors.length > 0))
  const same = parameters.filter((parameter) => !related.includes(parameter)).map(({ name }) => label(name))
  const lines: Prose[] = related.map((parameter) => [
    ...formula(equation(parameter, label(parameter.name))),
    ...(parameter.unit === '1' ? [] : [` ${withUnit('', parameter.unit).trim()}`])
  ])
  if (same.length > 0) lines.push([`${listed(same)}: the same in everyone`])
  return lines
}

/** `CL = 0.35 + 3.9 x (CLcr / 100 mL/min)^0.75` with its symbol set apart and its power raised. */
export function formula(line: string): Prose {
  const [left = '', right = ''] = splitOnce(line, ' = ')
  const pieces = polished(right.replaceAll(' x ', ' × ').replace(/(?<=[ (])-(?=[ \d])/g, '−')).split(/\^(-?[\d.]+)/)
  return [
    symbol(left),
    ' = ',
    ...pieces.map((piece, k) => (k % 2 === 1 ? raised(piece.replace('-', '−')) : piece)).filter((piece) => piece !== '')
  ]
}

function splitOnce(text: string, mark: string): [string, string] {
  const at = text.indexOf(mark)
  return at < 0 ? [text, ''] : [text.slice(0, at), text.slice(at + mark.length)]
}

function source(result: StudyResult): Prose {
  const { source, studied } = result.study.drugModel
  const kind = { invented: 'Invented', published: 'Published', user: 'Your own model' }[source.kind]
  const read = source.read === undefined ? '' : ` Read: ${source.read}.`
  const doi = source.doi === undefined ? '' : ` doi ${source.doi}.`
  const people =
    studied === undefined
      ? ''
      : ` Studied: ${studied.description}${studied.subjects === undefined ? '' : ` (${studied.subjects})`}.`
  return [`${kind}: ${sentence(source.citation)}${doi}${read}${people}`]
}
