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

/** A study with what it was computed to. */
interface Computed {
  readonly result: StudyResult
  readonly rows: TableRows
}

/** The last study that could be computed, and the one that the page shows. */
let computed: Computed | undefined
let shown: (Computed & { readonly name: string }) | undefined

async function open(file: Blob, doing: (what: string) => void = () => undefined): Promise<Outcome> {
  doing('reading the file')
  const reading = readStudy(new Uint8Array(await file.arrayBuffer()), shippedModel)
  if (!reading.ok) return { ok: false, issues: reading.issues }
  const outcome = runStudy(reading.study, doing)
  if (!outcome.ok) return { ok: false, issues: outcome.issues }
  doing('laying out the page')
  const { result } = outcome
  const page: PageView = pageOf(result, reading.file)
  computed = { result, rows: new TableRows(result) }
  return { ok: true, file: reading.file, page }
}

async function takeUp(name: string): Promise<void> {
  if (computed === undefined) throw new RangeError('no study has been computed')
  shown = { ...computed, name }
}

function current(): Computed & { readonly name: string } {
  if (shown === undefined) throw new RangeError('no study has been opened')
  return shown
}

const worker: PageWorker = {
  open,
  takeUp,
  rows: async ({ regimen, from, count }: RowsAsked) => current().rows.rows(regimen, from, count),
  saturation: async () => saturationView(current().result),
  confirm: async () => confirmationSentence(confirm(current().result)),
  download: async (what: Download) => tableFiles(what, current().result, current().name)
}

expose(worker)
