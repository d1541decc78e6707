import { tableColumns, tableCsv, tableJson } from '../report/concentrationTable'
import { emit, type OutputOptions } from './emit'
import { resultOf } from './studyFile'

/** `phasewise table STUDY`: the concentration table. */
export function table(path: string, options: OutputOptions): void {
  const result = resultOf(path)
  emit({ result, columns: tableColumns(result), csv: () => tableCsv(result), json: () => tableJson(result) }, options)
}
