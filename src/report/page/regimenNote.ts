import type { DoseLine, Exception, Reckoned } from '../../pk/prescription'
import type { RegimenResult, StudyResult } from '../../study/result'
import { multipleOf } from '../../units/spacing'
import { percent, typed, withUnit } from './number'
import type { RegimenLabel, RegimenNote } from './page'
import { type Marked, value } from './prose'
import { listed, polished, type Showing, sentence } from './showing'

/** A regimen in words: each line of doses with what became of them, and what was done with the prescription. */
export function regimenNote(
  regimen: RegimenResult,
  label: RegimenLabel,
  result: StudyResult,
  showing: Showing
): RegimenNote {
  const { prescription } = regimen.course
  const prose: (string | Marked)[] = []
  if (prescription.start === 'steady-state') prose.push('In the steady state of its repeating doses at time 0: ')
  prescription.lines.forEach((line, k) => {
    const before = prescription.lines[k - 1]
    prose.push(...(k === 0 ? [] : [', then ']), ...lineInWords(line, k, before, regimen, result, showing))
  })
  prose.push('.')
  return { label, sentence: prose, notes: regimen.notes.map((note) => sentence(polished(note))) }
}

function lineInWords(
  line: DoseLine,
  index: number,
  before: DoseLine | undefined,
  regimen: RegimenResult,
  result: StudyResult,
  showing: Showing
): (string | Marked)[] {
  const prose: (string | Marked)[] = []
  const reckoned = line.rate ?? line.amount
  if (reckoned === undefined) throw new RangeError('a dose line has an amount or a rate')
  prose.push(value(reckonedInWords(reckoned, line.rate !== undefined, line, showing)))
  const given = regimen.course.administrations.find((one) => one.line === index && !one.missed)
  const aside: string[] = []
  if (given !== undefined && (reckoned.per !== 'dose' || line.rate !== undefined)) {
    aside.push(showing.typedAmount(given.productAmount))
  }
  if (line.atMost !== undefined) aside.push(`at most ${showing.typedAmount(line.atMost)}`)
  if (line.product !== undefined && given !== undefined) {
    aside.push(`${showing.typedAmount(given.amount)} of ${result.study.drugModel.drug.moiety}`)
  }
  if (aside.length > 0) prose.push(' (', value(aside.join(', ')), ')')
  if (line.product !== undefined) prose.push(` of ${line.product}`)
  if (before?.route !== line.route) prose.push(` ${routeInWords(line.route)}`)
  if (line.over !== undefined) prose.push(' over ', value(showing.typedTime(line.over)))
  else if (routeInput(result, line.route) === 'infusion') prose.push(' as a bolus')
  if (line.every === undefined) prose.push(' at ', value(showing.typedTime(line.at)))
  else {
    prose.push(' every ', value(showing.typedTime(multipleOf(line.every, 1))))
    prose.push(' from ', value(showing.typedTime(line.at)))
    if (line.count !== undefined) prose.push(', ', value(line.count === 1 ? 'once' : `${line.count} times`))
  }
  if (line.exceptions.length > 0) {
    prose.push(' (', value(listed(line.exceptions.map((exception) => departureInWords(exception, showing)))), ')')
  }
  return prose
}

function reckonedInWords(reckoned: Reckoned, rate: boolean, line: DoseLine, showing: Showing): string {
  const per = reckoned.per === 'dose' ? '' : `/${reckoned.per}`
  const unit = `${showing.amountUnit}${per}${rate ? '/h' : ''}`
  const by = line.by === undefined || reckoned.per !== 'kg' ? '' : ` by ${WEIGHTS[line.by]} weight`
  return `${withUnit(typed(showing.amount(reckoned.value)), unit)}${by}`
}

const WEIGHTS = {
  actual: 'actual',
  ideal: 'ideal',
  adjusted: 'adjusted',
  lean: 'lean',
  actualIfBelowIdeal: 'actual, if below ideal,',
  adjustedAbove120PercentIdeal: 'adjusted, above 120\u00a0% of ideal,'
} as const

function departureInWords(exception: Exception, showing: Showing): string {
  const which = `dose\u00a0${exception.number}`
  if (exception.missed === true) return `${which} missed`
  const said: string[] = []
  if (exception.lateBy !== undefined) {
    said.push(`${showing.typedTime(Math.abs(exception.lateBy))} ${exception.lateBy < 0 ? 'early' : 'late'}`)
    if (exception.shiftsLater === true) said.push('and the later ones with it')
  }
  if (exception.amount !== undefined) {
    const per = exception.amount.per === 'dose' ? '' : `/${exception.amount.per}`
    said.push(`${withUnit(typed(showing.amount(exception.amount.value)), `${showing.amountUnit}${per}`)} instead`)
  }
  if (exception.over !== undefined) said.push(`over ${showing.typedTime(exception.over)}`)
  if (exception.stoppedAfter !== undefined) said.push(`stopped after ${showing.typedTime(exception.stoppedAfter)}`)
  if (exception.fractionTaken !== undefined) said.push(`${percent(exception.fractionTaken)} taken`)
  return `${which} ${said.join(', ')}`
}

/** Trade routes as adverbs; any other by its own name. */
function routeInWords(route: string): string {
  switch (route) {
    case 'intravenous':
      return 'intravenously'
    case 'oral':
      return 'orally'
    case 'subcutaneous':
      return 'subcutaneously'
    case 'intramuscular':
      return 'intramuscularly'
    default:
      return `by the route ${route}`
  }
}

function routeInput(result: StudyResult, name: string): 'infusion' | 'bolus' | undefined {
  return result.study.drugModel.routes.find((route) => route.name === name)?.input
}
