import type { PhasesOfStretch } from '../pk/phases'
import type { StudyResult } from '../study/result'
import { csvRows } from './csv'
import { LONG_COLUMNS, type LongRow, longCells, rowsOfGroup } from './longTable'
import { STRETCH_NAMES } from './phasesDocument'

/** The phases of every stretch and when distribution is over in every interval, one value a row. */
export function phasesRows(result: StudyResult): LongRow[] {
  return [
    ...result.phases.flatMap((stretch) => stretchRows(stretch, result.study.drugModel.apparent)),
    ...result.regimens.flatMap((_, index) => distributionRows(result, index))
  ]
}

/** The phases as CSV, one value a row, in full precision. */
export function phasesCsv(result: StudyResult): string {
  return csvRows([LONG_COLUMNS.map((column) => column.name), ...phasesRows(result).map(longCells)])
}

function stretchRows(stretch: PhasesOfStretch, apparent: boolean): LongRow[] {
  const place = { regimen: '', from: stretch.from, to: stretch.to, note: '' }
  const rows: LongRow[] = stretch.phases.flatMap((phase, i) => {
    const over = `phase ${i + 1}${i === stretch.rulingPhase ? ', ruling' : ''}`
    return [
      { ...place, over, quantity: 'eigenvalue', value: phase.eigenvalue, unit: '/h' },
      { ...place, over, quantity: 'halfLife', value: phase.halfLife, unit: 'h' },
      { ...place, over, quantity: 'coefficient', value: phase.coefficient, unit: '/L' },
      { ...place, over, quantity: 'shareOfAuc', value: phase.shareOfAuc, unit: '1' }
    ]
  })
  for (const rate of [...stretch.absorption, ...stretch.effectSites]) {
    rows.push({ ...place, over: rate.name, quantity: 'rate', value: rate.rate, unit: '/h' })
  }
  const { rulingPhase: _, ...names } = STRETCH_NAMES
  const over = apparent ? 'disposition, volumes and clearance over F' : 'disposition'
  rows.push(...rowsOfGroup(stretch, names, { ...place, over }))
  stretch.names.forEach((to, i) => {
    stretch.names.forEach((from, j) => {
      const value = stretch.matrix[i]?.[j]
      rows.push({ ...place, over: 'rate matrix', quantity: `${from} to ${to}`, value, unit: '/h' })
    })
    rows.push({ ...place, over: 'rate matrix', quantity: `${to} out of the body`, value: stretch.out[i], unit: '/h' })
  })
  return rows
}

function distributionRows(result: StudyResult, index: number): LongRow[] {
  const regimen = result.regimens[index]
  if (regimen === undefined) throw new RangeError(`there is no regimen ${index}`)
  return regimen.distribution.map((over) => {
    const interval = regimen.exposure.intervals[over.interval]
    return {
      regimen: regimen.name,
      over: `interval ${over.interval + 1}, after the end of the input`,
      from: interval?.start,
      to: interval?.end,
      quantity: 'distributionOver',
      value: over.over,
      unit: 'h',
      note: over.why ?? ''
    }
  })
}
