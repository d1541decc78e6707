import type { Issue } from '../../pk/issue'
import type { PageView } from '../../report/page/page'
import type { SaturationView } from '../../report/page/saturationView'

/** What became of a file: a page, or everything that is wrong with it. */
export type Outcome =
  | { readonly ok: true; readonly page: PageView }
  | { readonly ok: false; readonly issues: readonly Issue[] }

export interface RowsAsked {
  /** Position of the regimen. */
  readonly regimen: number
  readonly from: number
  readonly count: number
}

/** The tables that can be taken away as files. */
export type Download = 'table' | 'exposure' | 'phases'

export interface NamedFile {
  readonly name: string
  readonly content: Blob
}

/**
 * What the worker does for the page. It keeps the last study that could be computed: rows and files are of that one,
 * as the page shows it.
 */
export interface PageWorker {
  /** Validate a study file, compute it and lay the page out; downloads are named after the file. */
  open(file: Blob, name: string): Promise<Outcome>
  /** Rows of the concentration table as the screen shows them. */
  rows(asked: RowsAsked): Promise<readonly (readonly string[])[]>
  /** What saturation makes of the dose; undefined for a linear model. */
  saturation(): Promise<SaturationView | undefined>
  /** How far a second computation agrees, in a sentence with what that does not prove. */
  confirm(): Promise<string>
  /** A table in full precision, as the command line writes it, and its metadata. */
  download(what: Download): Promise<readonly NamedFile[]>
}
