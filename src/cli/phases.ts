import { LONG_COLUMNS } from '../report/longTable'
import { phasesDocument } from '../report/phasesDocument'
import { phasesCsv } from '../report/phasesTable'
import { phasesText } from '../report/phasesText'
import { emit, type OutputOptions } from './emit'
import { resultOf } from './studyFile'

/** `phasewise phases STUDY`: rate matrix, half-lives, shares and when distribution is over. */
export function phases(path: string, options: OutputOptions): void {
  const result = resultOf(path)
  emit(
    {
      result,
      columns: LONG_COLUMNS,
      csv: () => [phasesCsv(result)],
      json: () => [`${JSON.stringify({ ...phasesDocument(result), cautions: result.cautions }, null, 2)}\n`],
      text: () => [phasesText(result)]
    },
    options
  )
}
