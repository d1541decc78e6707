import { tableColumns, tableCsv } from '../../report/concentrationTable'
import type { ColumnMeaning } from '../../report/csvw'
import { csvwMetadata } from '../../report/csvw'
import { exposureCsv } from '../../report/exposureTable'
import { LONG_COLUMNS } from '../../report/longTable'
import { phasesCsv } from '../../report/phasesTable'
import type { StudyResult } from '../../study/result'
import type { Download, NamedFile } from './protocol'

/** A table as the command line writes it: the CSV and the metadata file that says what each column means. */
export function tableFiles(what: Download, result: StudyResult, studyFile: string): readonly NamedFile[] {
  const { columns, chunks } = written(what, result)
  const url = `${studyFile.replace(/\.json$/i, '')}-${what}.csv`
  const { study, cautions } = result
  const metadata = csvwMetadata({ url, title: study.title, hash: study.hash, cautions, columns })
  return [
    { name: url, content: new Blob([...chunks], { type: 'text/csv;charset=utf-8' }) },
    { name: `${url}-metadata.json`, content: new Blob([metadata], { type: 'application/json' }) }
  ]
}

function written(
  what: Download,
  result: StudyResult
): { readonly columns: readonly ColumnMeaning[]; readonly chunks: Iterable<string> } {
  switch (what) {
    case 'table':
      return { columns: tableColumns(result), chunks: tableCsv(result) }
    case 'exposure':
      return { columns: LONG_COLUMNS, chunks: [exposureCsv(result)] }
    case 'phases':
      return { columns: LONG_COLUMNS, chunks: [phasesCsv(result)] }
  }
}
