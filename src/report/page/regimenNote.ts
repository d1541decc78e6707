import type { DoseLine, Exception, Reckoned } from '../../pk/prescription'
import type { Choice } from '../../study/edit/place'
import { isMeasured } from '../../study/edit/regimens'
import type { Step } from '../../study/path'
import type { RegimenResult, StudyResult } from '../../study/result'
import { multipleOf } from '../../units/spacing'
import { choicesOf, type Marks } from './marks'
import { typed, withUnit } from './number'
import type { RegimenLabel, RegimenNote } from './page'
import { type Marked, value } from './prose'
import { polished, type Showing, sentence } from './showing'

/** A regimen in words: each line of doses with what became of them, and what was done with the prescription. */
export function regimenNote(
  regimen: RegimenResult,
  index: number,
  label: RegimenLabel,
  { result, showing, marks }: NoteContext
): RegimenNote {
  const { prescription } = regimen.course
  const at = ['regimens', index]
  const prose: (string | Marked)[] = []
  if (prescription.start === 'steady-state') {
    const start = marks.choice([...at, 'start'], 'steady state', 'start', [
      { value: 'empty', text: 'start empty' },
      { value: 'steady-state', text: 'steady state' }
    ])
    prose.push('In the ', start, ' of its repeating doses at time 0: ')
  }
  prescription.lines.forEach((line, k) => {
    const before = prescription.lines[k - 1]
    const context = { line, at: [...at, 'doses', k], index: k, before, regimen, result, showing, marks }
    prose.push(...(k === 0 ? [] : [', then ']), ...lineInWords(context))
  })
  prose.push('.')
  return {
    label,
    name: [marks.text([...at, 'name'], label.name, `name of regimen ${label.letter}`, LONGEST_NAME)],
    sentence: prose,
    notes: regimen.notes.map((note) => sentence(polished(note))),
    lines: prescription.lines.length,
    doses: scheduledDoses(regimen, showing),
    keptBecause: marks.file !== undefined && isMeasured(marks.file, label.name) ? 'levels were measured under it' : ''
  }
}

const LONGEST_NAME = 200

export interface NoteContext {
  readonly result: StudyResult
  readonly showing: Showing
  readonly marks: Marks
}

interface LineContext extends NoteContext {
  readonly line: DoseLine
  /** Where the line stands in the file. */
  readonly at: readonly Step[]
  readonly index: number
  readonly before: DoseLine | undefined
  readonly regimen: RegimenResult
}

/** Scheduled doses listed one by one; a longer list is no help. */
const MOST_LISTED = 200

function scheduledDoses(regimen: RegimenResult, showing: Showing): RegimenNote['doses'] {
  return regimen.course.administrations
    .filter(({ number }) => number > 0)
    .slice(0, MOST_LISTED)
    .map(({ line, number, missed, at, productAmount }) => ({
      line,
      number,
      missed,
      text: missed ? showing.typedTime(at) : `${showing.typedTime(at)}: ${showing.typedAmount(productAmount)}`
    }))
}

function lineInWords(context: LineContext): (string | Marked)[] {
  const { line, at, before, result, showing, marks } = context
  const prose: (string | Marked)[] = [...reckonedMark(context), ...asideInWords(context)]
  if (line.product !== undefined) {
    const products = result.study.drugModel.drug.products.map(({ name }) => ({ value: name, text: name }))
    prose.push(' of ', marks.choice([...at, 'product'], line.product, 'product', products))
  }
  if (before?.route !== line.route || marks.file !== undefined) {
    prose.push(' ', marks.choice([...at, 'route'], routeInWords(line.route), 'route', routeChoices(line, result)))
  }
  if (line.over !== undefined) {
    prose.push(' over ', timeMark('over', line.over, 'length of the infusion', context))
  } else if (routeInput(result, line.route) === 'infusion') prose.push(' as a bolus')
  if (line.every === undefined) prose.push(' at ', timeMark('at', line.at, 'time of the dose', context))
  else {
    prose.push(' every ', timeMark('every', multipleOf(line.every, 1), 'interval', context))
    prose.push(' from ', timeMark('at', line.at, 'time of the first dose', context))
    const { count } = line
    if (count !== undefined || marks.file !== undefined) {
      const read = count === undefined ? 'to the end' : count === 1 ? 'once' : `${count} times`
      prose.push(', ', marks.whole([...at, 'count'], read, 'number of doses', true))
    }
  }
  if (line.exceptions.length > 0) {
    const said = line.exceptions.map((exception, k) =>
      departureInWords(exception, [...at, 'exceptions', k], showing, marks)
    )
    prose.push(' (')
    said.forEach((part, k) => {
      prose.push(...(k === 0 ? [] : [k === said.length - 1 ? ' and ' : ', ']), ...part)
    })
    prose.push(')')
  }
  return prose
}

/**
 * The routes, each with how a dose is given on it, in so many words: the first of the present route is how it is now. Off
 * the routes of infusions a dose has no length; a rate runs for its time on any route.
 */
function routeChoices(line: DoseLine, { study }: StudyResult): readonly Choice[] {
  return study.drugModel.routes.flatMap(({ name, input }): Choice[] => {
    const text = routeInWords(name)
    const asNow: Choice = { value: name, text }
    if (line.rate !== undefined) return [asNow]
    if (input !== 'infusion') {
      return name === line.route ? [asNow] : [{ ...asNow, beside: { over: undefined, bolus: undefined } }]
    }
    const bolus = { value: name, text: `${text} as a bolus`, beside: { over: undefined, bolus: true } }
    if (line.over !== undefined) return [asNow, bolus]
    const beside = { over: { value: 1, unit: 'h' }, bolus: undefined }
    const over = { value: name, text: `${text} over 1\u00a0h`, beside }
    return name === line.route ? [asNow, over] : [over, bolus]
  })
}

function timeMark(key: string, hours: number, label: string, { at, showing, marks }: LineContext): Marked {
  const sign = key === 'at' ? 'not negative' : 'positive'
  return marks.quantity([...at, key], showing.typedTime(hours), { label, of: 'time', sign })
}

function reckonedMark({ line, at, showing, marks }: LineContext): (string | Marked)[] {
  const reckoned = line.rate ?? line.amount
  if (reckoned === undefined) throw new RangeError('a dose line has an amount or a rate')
  const mark =
    line.rate === undefined
      ? marks.quantity([...at, 'amount'], reckonedInWords(reckoned, false, showing), { label: 'dose', of: 'dose' })
      : marks.quantity([...at, 'rate'], reckonedInWords(reckoned, true, showing), { label: 'rate', of: 'doseRate' })
  if (line.by === undefined || reckoned.per !== 'kg') return [mark]
  const by = marks.choice([...at, 'by'], WEIGHTS[line.by], 'weight that the dose is reckoned by', WEIGHT_CHOICES)
  return [mark, ' by ', by, ' weight']
}

/** What a dose comes to, its cap and its moiety, in brackets behind it. */
function asideInWords({ line, at, index, regimen, result, showing, marks }: LineContext): (string | Marked)[] {
  const reckoned = line.rate ?? line.amount
  const given = regimen.course.administrations.find((one) => one.line === index && !one.missed)
  const aside: (string | Marked)[][] = []
  if (given !== undefined && (reckoned?.per !== 'dose' || line.rate !== undefined)) {
    aside.push([value(showing.typedAmount(given.productAmount))])
  }
  if (line.atMost !== undefined) {
    const most = marks.quantity([...at, 'atMost'], showing.typedAmount(line.atMost), {
      label: 'most of one dose',
      of: 'amount'
    })
    aside.push(['at most ', most])
  }
  if (line.product !== undefined && given !== undefined) {
    aside.push([value(`${showing.typedAmount(given.amount)} of ${result.study.drugModel.drug.moiety}`)])
  }
  if (aside.length === 0) return []
  return [' (', ...aside.flatMap((part, k) => (k === 0 ? part : [', ', ...part])), ')']
}

function reckonedInWords(reckoned: Reckoned, rate: boolean, showing: Showing): string {
  const per = reckoned.per === 'dose' ? '' : `/${reckoned.per}`
  return withUnit(typed(showing.amount(reckoned.value)), `${showing.amountUnit}${per}${rate ? '/h' : ''}`)
}

const WEIGHTS = {
  actual: 'actual',
  ideal: 'ideal',
  adjusted: 'adjusted',
  lean: 'lean',
  actualIfBelowIdeal: 'actual, if below ideal,',
  adjustedAbove120PercentIdeal: 'adjusted, above 120\u00a0% of ideal,'
} as const
const WEIGHT_CHOICES = choicesOf(Object.entries(WEIGHTS))

function departureInWords(
  exception: Exception,
  at: readonly Step[],
  showing: Showing,
  marks: Marks
): (string | Marked)[] {
  const which = marks.whole([...at, 'number'], String(exception.number), 'number of the dose', false)
  if (exception.missed === true) return ['dose\u00a0', which, ' missed']
  const time = (key: string, hours: number, label: string) =>
    marks.quantity([...at, key], showing.typedTime(hours), { label, of: 'time' })
  const said: (string | Marked)[][] = []
  const { lateBy, amount, over, stoppedAfter, fractionTaken } = exception
  if (lateBy !== undefined) {
    const shown = showing.typedTime(Math.abs(lateBy))
    const mark = { label: 'late by', of: 'time', sign: 'any', ...(lateBy < 0 && { shown }) } as const
    const shifts = exception.shiftsLater === true ? ', and the later ones with it' : ''
    said.push([marks.quantity([...at, 'lateBy'], shown, mark), `${lateBy < 0 ? ' early' : ' late'}${shifts}`])
  }
  if (amount !== undefined) {
    const read = reckonedInWords(amount, false, showing)
    said.push([marks.quantity([...at, 'amount'], read, { label: 'dose instead', of: 'dose' }), ' instead'])
  }
  if (over !== undefined) said.push(['over ', time('over', over, 'length of this infusion')])
  if (stoppedAfter !== undefined) said.push(['stopped after ', time('stoppedAfter', stoppedAfter, 'stopped after')])
  if (fractionTaken !== undefined) {
    said.push([marks.share([...at, 'fractionTaken'], fractionTaken, 'share of the dose taken'), ' taken'])
  }
  return ['dose\u00a0', which, ' ', ...said.flatMap((part, k) => (k === 0 ? part : [', ', ...part]))]
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
