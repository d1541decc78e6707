import { basename } from 'node:path'
import { type ColumnMeaning, csvwMetadata } from '../report/csvw'
import { limitCautions } from '../study/cautions'
import type { StudyResult } from '../study/result'
import { writeFiles, writeToStandardOutput } from './output'

/** The options that every verb with an output shares. */
export interface OutputOptions {
  readonly json?: boolean
  readonly out?: string
}

/** What a verb has to give: text for the terminal, CSV for files, a JSON document. Only the one asked for is made. */
export interface Offer {
  readonly result: StudyResult
  readonly columns: readonly ColumnMeaning[]
  readonly csv: () => Iterable<string>
  readonly json: () => Iterable<string>
  /** Shown where neither a file nor JSON is asked for; the CSV where absent. */
  readonly text?: () => Iterable<string>
}

function sayLimits({ study, regimens }: StudyResult): void {
  const cautions = study.regimens.flatMap((regimen, i) => limitCautions(regimen, regimens[i]?.overLimits ?? []))
  for (const caution of new Set(cautions)) process.stderr.write(`Caution: ${caution}.\n`)
}

/** Write what was asked for: JSON by `--json` or a name that ends in it, CSV with its metadata file beside it, or text. */
export function emit(offer: Offer, options: OutputOptions): void {
  if (options.out === undefined) {
    writeToStandardOutput(options.json ? offer.json() : (offer.text ?? offer.csv)())
    // A bare table has no place for a caution; documents and texts carry all of theirs.
    if (options.json !== true && offer.text === undefined) sayLimits(offer.result)
    return
  }
  if (options.json || options.out.endsWith('.json')) {
    writeFiles([{ path: options.out, chunks: offer.json() }])
    return
  }
  const { study, cautions } = offer.result
  const metadata = csvwMetadata({
    url: basename(options.out),
    title: study.title,
    hash: study.hash,
    cautions,
    columns: offer.columns
  })
  writeFiles([
    { path: options.out, chunks: offer.csv() },
    { path: `${options.out}-metadata.json`, chunks: [metadata] }
  ])
}
