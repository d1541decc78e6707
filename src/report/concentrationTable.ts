import type { Course } from '../pk/course'
import { type ProfileColumn, profileColumns, profileRows } from '../pk/profile'
import type { SamplingTimes } from '../pk/profileTimes'
import type { StudyResult } from '../study/result'
import { csvRows } from './csv'
import type { ColumnMeaning } from './csvw'

/** Rows put into one piece of text: enough that writing is quick, few enough that memory stays flat. */
const ROWS_A_CHUNK = 2000

/** The concentration table's columns, with what each holds and in which unit. */
export function tableColumns(result: StudyResult): readonly ColumnMeaning[] {
  const { drugModel } = result.study
  const { name, matrix, moiety } = drugModel.drug
  return [
    { name: 'regimen', description: 'the regimen, by its name', datatype: 'string' },
    { name: 'time_h', description: 'time elapsed since time 0 of the study', datatype: 'number', unit: 'h' },
    {
      name: 'row',
      description:
        'sample, before dose, after dose or end of infusion; a sample at the time of a dose is taken before it',
      datatype: 'string'
    },
    ...profileColumns(modelOf(result)).map((column) => meaning(column, `${name} (${moiety}) in ${matrix}`))
  ]
}

/** Every row of every regimen, in full precision: regimen, time, row, then one number a column. */
export function* tableRows(result: StudyResult): Generator<(string | number)[]> {
  for (const regimen of result.regimens) yield* regimenRows(regimen.name, regimen.course, result.study.sampling)
}

/** The rows of one regimen, as in `tableRows`. */
export function* regimenRows(name: string, course: Course, sampling: SamplingTimes): Generator<(string | number)[]> {
  for (const row of profileRows(course, sampling)) yield [name, row.time, row.row, ...row.values]
}

/** The whole table as CSV text, in pieces, so that a million rows need no more memory than a few thousand. */
export function* tableCsv(result: StudyResult): Generator<string> {
  yield csvRows([tableColumns(result).map((column) => column.name)])
  let rows: (string | number)[][] = []
  for (const row of tableRows(result)) {
    rows.push(row)
    if (rows.length < ROWS_A_CHUNK) continue
    yield csvRows(rows)
    rows = []
  }
  yield csvRows(rows)
}

/** The table as one JSON document, in pieces: `{ columns: [names], rows: [[…]], cautions: [texts] }`. */
export function* tableJson(result: StudyResult): Generator<string> {
  const columns = tableColumns(result).map((column) => column.name)
  yield `{"columns":${JSON.stringify(columns)},"rows":[`
  let separator = '\n'
  for (const row of tableRows(result)) {
    yield `${separator}${JSON.stringify(row)}`
    separator = ',\n'
  }
  yield `\n],"cautions":${JSON.stringify(result.cautions)}}\n`
}

function modelOf(result: StudyResult) {
  const stretch = result.stretches[0]
  if (stretch === undefined) throw new RangeError('a study result has at least one stretch')
  return stretch.individual.subject.model
}

function meaning(column: ProfileColumn, what: string): ColumnMeaning {
  switch (column.kind) {
    case 'concentration':
      return numeric('concentration_mg_L', `total concentration of ${what}`, 'mg/L')
    case 'amount':
      return numeric(`amount_${column.name}_mg`, `amount in ${column.name}`, 'mg')
    case 'effect-site':
      return numeric(`concentration_${column.name}_mg_L`, `concentration at the effect site ${column.name}`, 'mg/L')
    case 'observation':
      return numeric(`concentration_${column.name}_mg_L`, `concentration of ${column.name}`, 'mg/L')
    case 'auc':
      return numeric('auc_mg_h_L', `area under the concentration curve of ${what} since time 0`, 'mg.h/L')
    case 'eliminated':
      return numeric('eliminated_mg', 'amount that has left the body since time 0', 'mg')
  }
}

function numeric(name: string, description: string, unit: string): ColumnMeaning {
  return { name, description, datatype: 'number', unit }
}
