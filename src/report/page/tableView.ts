import type { ProfileColumn, ProfileRow } from '../../pk/profile'
import { profileColumns, profileRows } from '../../pk/profile'
import { rowTimes } from '../../pk/profileTimes'
import { sameTime } from '../../pk/times'
import type { RegimenResult, StudyResult } from '../../study/result'
import { shownUnit, significant, timeFigures } from './number'
import type { RegimenLabel, TableView } from './page'
import { type Showing, showingOf } from './showing'

/** The head of the concentration table and how many rows each regimen has. */
export function tableView(result: StudyResult, labels: readonly RegimenLabel[], showing: Showing): TableView {
  const columns = profileColumns(modelOf(result)).map((column) => ({
    title: columnTitle(column, showing),
    unit: shownUnit(columnUnit(column, showing)),
    numeric: true
  }))
  return {
    columns: [
      { title: 'time', unit: shownUnit(showing.timeUnit), numeric: true },
      { title: 'row', unit: '', numeric: false },
      ...columns
    ],
    regimens: result.regimens.map((regimen, k) => ({ label: labels[k]!, rows: rowCount(regimen, result) }))
  }
}

/** Rows of the concentration table as the screen shows them, read forwards once and kept, so that turning back is free. */
export class TableRows {
  readonly #result: StudyResult
  readonly #showing: Showing
  readonly #columns: readonly ProfileColumn[]
  readonly #read: { readonly rows: string[][]; readonly rest: Generator<ProfileRow> }[]

  constructor(result: StudyResult) {
    this.#result = result
    this.#showing = showingOf(result.study)
    this.#columns = profileColumns(modelOf(result))
    this.#read = result.regimens.map(({ course }) => ({ rows: [], rest: profileRows(course, result.study.sampling) }))
  }

  /** `count` rows of a regimen from the row `from`, counted from 0; fewer where the table ends. */
  rows(regimen: number, from: number, count: number): readonly (readonly string[])[] {
    const read = this.#read[regimen]
    if (read === undefined) throw new RangeError(`there is no regimen ${regimen} of ${this.#result.regimens.length}`)
    while (read.rows.length < from + count) {
      const next = read.rest.next()
      if (next.done === true) break
      read.rows.push(this.#shown(next.value))
    }
    return read.rows.slice(from, from + count)
  }

  #shown(row: ProfileRow): string[] {
    const cells = [timeFigures(this.#showing.time(row.time)), row.row as string]
    this.#columns.forEach((column, k) => {
      cells.push(significant(columnValue(column, row.values[k]!, this.#showing)))
    })
    return cells
  }
}

/** Sampling times, and one row more wherever a bolus enters the observed compartment at the time of a dose. */
function rowCount(regimen: RegimenResult, result: StudyResult): number {
  const { course } = regimen
  const given = course.segments.filter(({ boluses, model }) => boluses[model.observed]! > 0).map(({ start }) => start)
  let rows = 0
  let next = 0
  for (const { time, row } of rowTimes(course, result.study.sampling)) {
    rows++
    while (next < given.length && given[next]! < time && !sameTime(given[next]!, time)) next++
    if (row === 'before dose' && next < given.length && sameTime(given[next]!, time)) rows++
  }
  return rows
}

function columnTitle(column: ProfileColumn, showing: Showing): string {
  switch (column.kind) {
    case 'concentration':
      return `${showing.unbound}concentration`
    case 'amount':
      return `in ${column.name.replaceAll('_', ' ')}`
    case 'effect-site':
      return `at ${column.name}`
    case 'observation':
      return `${showing.unbound}${column.name}`
    case 'auc':
      return `${showing.unbound}AUC`
    case 'eliminated':
      return 'eliminated'
  }
}

function columnUnit(column: ProfileColumn, showing: Showing): string {
  switch (column.kind) {
    case 'amount':
    case 'eliminated':
      return showing.amountUnit
    case 'auc':
      return showing.areaUnit
    default:
      return showing.concentrationUnit
  }
}

function columnValue(column: ProfileColumn, canonical: number, showing: Showing): number {
  switch (column.kind) {
    case 'amount':
    case 'eliminated':
      return showing.amount(canonical)
    case 'auc':
      return showing.area(canonical)
    default:
      return showing.concentration(canonical)
  }
}

function modelOf(result: StudyResult) {
  const [stretch] = result.stretches
  if (stretch === undefined) throw new RangeError('a result has a stretch from time 0 on')
  return stretch.individual.subject.model
}
