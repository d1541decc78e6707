import type { RegimenResult, StudyResult } from '../study/result'
import { csvRows } from './csv'
import { DAY_NAMES, INTERVAL_NAMES, REGIMEN_NAMES, STEADY_STATE_NAMES, whenWord } from './exposureDocument'
import { LONG_COLUMNS, type LongRow, longCells, rowsOfGroup } from './longTable'

/** Every exposure of every regimen, one value a row. */
export function exposureRows(result: StudyResult): LongRow[] {
  const until = result.study.sampling.until
  return result.regimens.flatMap((regimen) => regimenRows(regimen, until))
}

/** The exposure as CSV, one value a row, in full precision. */
export function exposureCsv(result: StudyResult): string {
  return csvRows([LONG_COLUMNS.map((column) => column.name), ...exposureRows(result).map(longCells)])
}

function regimenRows(regimen: RegimenResult, until: number): LongRow[] {
  const { exposure, name } = regimen
  const { steadyState, highestRunningAuc24: running } = exposure
  const whole = { regimen: name, over: 'throughout', from: 0, to: until }
  const rows: LongRow[] = exposure.intervals.flatMap((interval, i) =>
    rowsOfGroup(interval, INTERVAL_NAMES, {
      regimen: name,
      over: `interval ${i + 1}${interval.incomplete ? ', incomplete' : ''}`,
      from: interval.start,
      to: interval.end
    })
  )
  for (const day of exposure.days) {
    rows.push(...rowsOfGroup(day, DAY_NAMES, { regimen: name, over: `day ${day.day}`, from: day.from, to: day.to }))
  }
  rows.push(
    ...rowsOfGroup(steadyState, STEADY_STATE_NAMES, {
      regimen: name,
      over: 'steady state, if nothing changed any more',
      from: undefined,
      to: undefined
    }),
    ...rowsOfGroup(exposure, REGIMEN_NAMES, whole),
    {
      ...whole,
      over: 'the 24 h with the largest area',
      from: running?.from,
      to: running === undefined ? undefined : running.from + 24,
      quantity: 'auc',
      value: running?.auc,
      unit: 'mg.h/L',
      note: running === undefined ? (exposure.why.highestRunningAuc24 ?? '') : ''
    }
  )
  for (const target of exposure.targets) {
    const verdict = target.met === undefined ? 'not evaluable' : target.met ? 'met' : 'not met'
    rows.push({
      ...whole,
      over: `target ${target.index}, ${whenWord(target.target.when)}`,
      quantity: target.target.kind,
      value: target.value,
      unit: target.unit,
      note: target.why === undefined ? verdict : `${verdict}: ${target.why}`
    })
  }
  return rows
}
