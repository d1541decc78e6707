import type { RegimenResult, StudyResult } from '../../study/result'
import { type Entry, entry, entryOf, type GridPlan, grid, regimenColumns } from './grid'
import { percent, shownUnit, significant, typed } from './number'
import type { GridView, RegimenLabel } from './page'
import type { Showing } from './showing'
import { targetHead, targetNumber } from './targetWords'

/** Intervals shown of one regimen; the file that can be taken away has them all. */
const MOST_INTERVALS = 60

/** Exposure by regimen: targets, steady state, the whole study, by day, and each regimen's intervals. */
export function exposureGrids(
  result: StudyResult,
  labels: readonly RegimenLabel[],
  showing: Showing
): readonly GridView[] {
  return [
    ...targetsGrid(result, labels, showing),
    steadyStateGrid(result, labels, showing),
    studyGrid(result, labels, showing),
    ...dayGrids(result, labels, showing),
    ...result.regimens.map((regimen, k) => intervalsGrid(regimen, labels[k]!, showing))
  ]
}

function targetsGrid(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): GridView[] {
  const { study } = result
  if (study.targets.length === 0) return []
  const rows = study.targets.map((target, index): GridPlan['rows'][number] => {
    const entries = result.regimens.map(({ exposure }): Entry => {
      const judged = exposure.targets[index]
      if (judged?.met === undefined) return { shown: undefined, why: judged?.why ?? 'not evaluable' }
      return { shown: targetNumber(judged, study, showing), met: judged.met }
    })
    return { head: targetHead(target, study, showing), entries }
  })
  const explanation = 'the worst value over the stretches that a target names'
  return [grid({ title: 'Targets', explanation, columns: regimenColumns(labels), rows, folded: false })]
}

function steadyStateGrid(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): GridView {
  type Name =
    | 'peak'
    | 'trough'
    | 'minimum'
    | 'average'
    | 'auc24'
    | 'timeInWindow'
    | 'fluctuation'
    | 'accumulationRatio'
    | 'effectiveHalfLife'
    | 'reached90'
    | 'period'
  const states = result.regimens.map((regimen) => regimen.exposure.steadyState)
  const row = (head: string, name: Name, show: (value: number) => string): GridPlan['rows'][number] => ({
    head,
    entries: states.map((state) => entryOf(state, name, show))
  })
  const level = (value: number) => significant(showing.concentration(value))
  const time = (value: number) => significant(showing.time(value))
  const concentration = shownUnit(showing.concentrationUnit)
  return grid({
    title: 'At steady state',
    explanation: 'of what repeats at the end, if nothing changed any more',
    columns: regimenColumns(labels),
    folded: false,
    rows: [
      row(`${showing.unbound}peak, ${concentration}`, 'peak', level),
      row(`${showing.unbound}trough, ${concentration}`, 'trough', level),
      row(`${showing.unbound}average, ${concentration}`, 'average', level),
      row(`${showing.unbound}AUC24 at steady state, ${shownUnit(showing.areaUnit)}`, 'auc24', (value) =>
        significant(showing.area(value))
      ),
      ...(windowed(result) ? [row('time in window', 'timeInWindow', percent)] : []),
      row('fluctuation', 'fluctuation', percent),
      row('accumulation ratio', 'accumulationRatio', (value) => significant(value)),
      row(`effective half-life, ${showing.timeUnit}`, 'effectiveHalfLife', time),
      row(`period, ${showing.timeUnit}`, 'period', (value) => typed(showing.time(value))),
      row(`90\u00a0% of it reached after, ${showing.timeUnit}`, 'reached90', time)
    ]
  })
}

function studyGrid(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): GridView {
  const exposures = result.regimens.map((regimen) => regimen.exposure)
  const time = (value: number) => significant(showing.time(value))
  const area = (value: number) => significant(showing.area(value))
  type Name = 'timeInWindow' | 'timeAbove' | 'timeBelow' | 'timeToReach' | 'timeToLeave' | 'aucLast24' | 'aucNext24'
  const row = (head: string, name: Name, show: (value: number) => string): GridPlan['rows'][number] => ({
    head,
    entries: exposures.map((exposure) => entryOf(exposure, name, show))
  })
  const areaUnit = shownUnit(showing.areaUnit)
  const peaks = exposures.map(({ intervals }) => Math.max(...intervals.map((interval) => interval.peak)))
  const rows: GridPlan['rows'][number][] = [
    {
      head: `highest ${showing.unbound}peak, ${shownUnit(showing.concentrationUnit)}`,
      entries: peaks.map((peak) =>
        entry(
          Number.isFinite(peak) ? peak : undefined,
          (x) => significant(showing.concentration(x)),
          'no dose is given'
        )
      )
    },
    {
      head: `highest running ${showing.unbound}AUC24, ${areaUnit}`,
      entries: exposures.map(({ highestRunningAuc24, why }) =>
        entry(highestRunningAuc24?.auc, area, why.highestRunningAuc24)
      )
    }
  ]
  if (windowed(result)) {
    rows.push(
      row('time in window', 'timeInWindow', percent),
      row('time above it', 'timeAbove', percent),
      row('time below it', 'timeBelow', percent),
      row(`window reached after, ${showing.timeUnit}`, 'timeToReach', time),
      row(`window left for good at, ${showing.timeUnit}`, 'timeToLeave', time)
    )
  }
  if (result.study.now !== undefined) {
    rows.push(
      row(`${showing.unbound}AUC of the last 24 h, ${areaUnit}`, 'aucLast24', area),
      row(`${showing.unbound}AUC of the next 24 h, ${areaUnit}`, 'aucNext24', area)
    )
  }
  return grid({
    title: 'Over the study',
    explanation: 'as written, from the first dose to the end',
    columns: regimenColumns(labels),
    rows,
    folded: false
  })
}

function dayGrids(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): GridView[] {
  const [first] = result.regimens
  const days = first?.exposure.days ?? []
  if (days.length === 0) return []
  const byDay = (title: string, name: 'auc' | 'timeInWindow', show: (value: number) => string) =>
    grid({
      title,
      explanation: 'day n runs from 24 (n - 1) to 24 n h',
      columns: regimenColumns(labels),
      folded: true,
      rows: days.map(({ day }, k) => ({
        head: `day ${day}`,
        entries: result.regimens.map(({ exposure }) => {
          const found = exposure.days[k]
          return found === undefined ? entry(undefined, show, 'no such day') : entryOf(found, name, show)
        })
      }))
    })
  const area = byDay(`${capital(showing.unbound)}AUC by day, ${shownUnit(showing.areaUnit)}`, 'auc', (value) =>
    significant(showing.area(value))
  )
  return windowed(result) ? [area, byDay('Time in window by day', 'timeInWindow', percent)] : [area]
}

function intervalsGrid(regimen: RegimenResult, label: RegimenLabel, showing: Showing): GridView {
  const { intervals } = regimen.exposure
  const shown = intervals.slice(0, MOST_INTERVALS)
  const concentration = shownUnit(showing.concentrationUnit)
  const level = (value: number) => significant(showing.concentration(value))
  const time = (value: number) => significant(showing.time(value), 4)
  const more = intervals.length - shown.length
  return grid({
    title: `Intervals of ${label.letter}`,
    explanation: `${label.name}, from each dose to the next one given${more > 0 ? `; ${more} more are in the CSV file` : ''}`,
    columns: [
      `peak, ${concentration}`,
      `at, ${showing.timeUnit}`,
      `trough, ${concentration}`,
      `minimum, ${concentration}`,
      `average, ${concentration}`,
      `AUC, ${shownUnit(showing.areaUnit)}`
    ].map((title) => ({ title })),
    folded: true,
    rows: shown.map((interval) => ({
      head: `${typed(showing.time(interval.start))} to ${typed(showing.time(interval.end))}\u00a0${showing.timeUnit}${interval.incomplete ? ', incomplete' : ''}`,
      entries: [
        entryOf(interval, 'peak', level),
        entryOf(interval, 'peakTime', time),
        entryOf(interval, 'trough', level),
        entryOf(interval, 'minimum', level),
        entryOf(interval, 'average', level),
        entryOf(interval, 'auc', (value) => significant(showing.area(value)))
      ]
    }))
  })
}

function windowed(result: StudyResult): boolean {
  return result.study.targets.some((target) => target.kind === 'window')
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}
