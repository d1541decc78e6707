import { expose } from 'comlink'
import { confirmationSentence } from '../../report/confirmationText'
import type { PageView } from '../../report/page/page'
import { pageOf } from '../../report/page/pageOf'
import { saturationView } from '../../report/page/saturationView'
import { TableRows } from '../../report/page/tableView'
import { confirm } from '../../study/confirmation'
import { readStudy } from '../../study/file/readStudy'
import type { StudyResult } from '../../study/result'
import { runStudy } from '../../study/run'
import { tableFiles } from './downloads'
import type { Download, Outcome, PageWorker, RowsAsked } from './protocol'
import { shippedModel } from './shippedModels'

/** The study that the page shows, with what it was computed to. */
interface Shown {
  readonly name: string
  readonly result: StudyResult
  readonly rows: TableRows
}

let shown: Shown | undefined

async function open(file: Blob, name: string): Promise<Outcome> {
  const reading = readStudy(new Uint8Array(await file.arrayBuffer()), shippedModel)
  if (!reading.ok) return { ok: false, issues: reading.issues }
  const outcome = runStudy(reading.study)
  if (!outcome.ok) return { ok: false, issues: outcome.issues }
  const { result } = outcome
  const page: PageView = pageOf(result, reading.file)
  shown = { name, result, rows: new TableRows(result) }
  return { ok: true, page }
}

function current(): Shown {
  if (shown === undefined) throw new RangeError('no study has been opened')
  return shown
}

const worker: PageWorker = {
  open,
  rows: async ({ regimen, from, count }: RowsAsked) => current().rows.rows(regimen, from, count),
  saturation: async () => saturationView(current().result),
  confirm: async () => confirmationSentence(confirm(current().result)),
  download: async (what: Download) => tableFiles(what, current().result, current().name)
}

expose(worker)
