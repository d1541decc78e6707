import { nonlinearViews } from '../study/nonlinear'
import type { RegimenResult, StudyResult } from '../study/result'
import { CAUTION } from './caution'
import { STEADY_STATE_NAMES, whenWord } from './exposureDocument'
import { nameAndUnit } from './longTable'
import { nonlinearText } from './nonlinearText'
import { alignedRows, plainNumber, plainPercent } from './plainText'

type SteadyStateName = keyof typeof STEADY_STATE_NAMES

/** What each value of the steady state is called on a terminal, in the order in which they are printed. */
const STEADY_STATE_WORDS: readonly (readonly [SteadyStateName, string])[] = [
  ['period', 'period'],
  ['auc', 'AUC of a period'],
  ['auc24', 'AUC over 24 h at steady state'],
  ['peak', 'peak'],
  ['peakTime', 'peak, after the start of the period'],
  ['trough', 'trough'],
  ['minimum', 'minimum'],
  ['average', 'average'],
  ['fluctuation', 'fluctuation'],
  ['swing', 'swing'],
  ['accumulationRatio', 'accumulation ratio (AUC)'],
  ['peakRatio', 'ratio of peaks'],
  ['troughRatio', 'ratio of troughs'],
  ['effectiveHalfLife', 'effective half-life'],
  ['operationalHalfLife', 'operational half-life'],
  ['reached90', '90 % of steady state reached (AUC)'],
  ['reached90ByTrough', '90 % of steady state reached (trough)'],
  ['reached90OfChange', '90 % of the change of dose reached'],
  ['reached90ByLevel', '90 % of the constant level reached'],
  ['timeInWindow', 'time in window'],
  ['timeAbove', 'time above window'],
  ['timeBelow', 'time below window']
]

/** Those that are shares of time. */
const SHARES: ReadonlySet<SteadyStateName> = new Set(['timeInWindow', 'timeAbove', 'timeBelow'])

/** The exposure as it is read on a terminal: three significant figures, a reason for each dash. */
export function exposureText(result: StudyResult): string {
  const lines = [result.study.title, '']
  const views = nonlinearViews(result)
  result.regimens.forEach((regimen, i) => {
    lines.push(...regimenText(regimen), ...nonlinearText(views[i]), '')
  })
  lines.push(...result.cautions.map((caution) => `Caution: ${caution}.`), CAUTION)
  return `${lines.join('\n')}\n`
}

function regimenText(regimen: RegimenResult): string[] {
  const { exposure } = regimen
  const intervals = alignedRows([
    [
      'interval',
      'from, h',
      'to, h',
      'peak, mg/L',
      'at, h',
      'trough, mg/L',
      'minimum, mg/L',
      'average, mg/L',
      'AUC, mg.h/L'
    ],
    ...exposure.intervals.map((interval, i) => [
      `${i + 1}${interval.incomplete ? ' incomplete' : ''}`,
      plainNumber(interval.start),
      plainNumber(interval.end),
      plainNumber(interval.peak),
      plainNumber(interval.peakTime),
      plainNumber(interval.trough),
      plainNumber(interval.minimum),
      plainNumber(interval.average),
      plainNumber(interval.auc)
    ])
  ])
  const days = alignedRows([
    ['day', 'AUC, mg.h/L', 'in window', 'above', 'below'],
    ...exposure.days.map((day) => [
      String(day.day),
      plainNumber(day.auc),
      plainPercent(day.timeInWindow),
      plainPercent(day.timeAbove),
      plainPercent(day.timeBelow)
    ])
  ])
  return [
    regimen.name,
    '',
    ...indented(intervals),
    '',
    ...indented(days),
    '',
    '  Steady state, if nothing changed any more',
    ...indented(steadyStateText(regimen)),
    ...(exposure.targets.length === 0 ? [] : ['', '  Targets', ...indented(targetsText(regimen))]),
    ...regimen.notes.map((note) => `  Note: ${note}.`)
  ]
}

function steadyStateText(regimen: RegimenResult): string[] {
  const { steadyState } = regimen.exposure
  const rows = STEADY_STATE_WORDS.map(([name, words]) => {
    const value = steadyState[name]
    const { unit } = nameAndUnit(STEADY_STATE_NAMES[name])
    return {
      cells: [words, SHARES.has(name) ? plainPercent(value) : plainNumber(value), unit === '1' ? '' : unit],
      why: value === undefined ? steadyState.why[name] : undefined
    }
  })
  const reasons = new Set(rows.map(({ why }) => why))
  const [only] = reasons
  // One reason for everything is said once.
  if (reasons.size === 1 && only !== undefined) return [only]
  return alignedRows(rows.map((row) => row.cells)).map((line, i) => {
    const why = rows[i]?.why
    return why === undefined ? line : `${line}  ${why}`
  })
}

function targetsText(regimen: RegimenResult): string[] {
  return alignedRows(
    regimen.exposure.targets.map((result) => [
      `${result.index} ${result.target.kind}, ${whenWord(result.target.when)}`,
      plainNumber(result.value),
      result.unit,
      result.met === undefined ? `not evaluable: ${result.why ?? ''}` : result.met ? 'met' : 'not met'
    ])
  )
}

function indented(lines: readonly string[]): string[] {
  return lines.map((line) => `  ${line}`)
}
