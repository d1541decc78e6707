import { exposureDocument } from '../report/exposureDocument'
import { exposureCsv } from '../report/exposureTable'
import { exposureText } from '../report/exposureText'
import { LONG_COLUMNS } from '../report/longTable'
import { emit, type OutputOptions } from './emit'
import { resultOf } from './studyFile'

/** `phasewise exposure STUDY`: peaks, troughs, areas and targets of every regimen. */
export function exposure(path: string, options: OutputOptions): void {
  const result = resultOf(path)
  emit(
    {
      result,
      columns: LONG_COLUMNS,
      csv: () => [exposureCsv(result)],
      json: () => [`${JSON.stringify({ ...exposureDocument(result), cautions: result.cautions }, null, 2)}\n`],
      text: () => [exposureText(result)]
    },
    options
  )
}
