import type { Issue } from '../../pk/issue'
import type { PageView } from '../../report/page/page'
import type { SaturationView } from '../../report/page/saturationView'
import type { StudyFile } from '../../study/file/studySchema'

/** What became of a file: its content and its page, or everything that is wrong with it. */
export type Outcome =
  | { readonly ok: true; readonly file: StudyFile; readonly page: PageView }
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

/** What the worker does for the page. Rows and files are of the last study that the page took up, which it shows. */
export interface PageWorker {
  /** Validate a study file, compute it and lay the page out; `doing` is told what is being done. */
  open(file: Blob, doing?: (what: string) => void): Promise<Outcome>
  /** The page shows the last study that was opened from now on; downloads are named after the file. */
  takeUp(name: string): Promise<void>
  /** Rows of the concentration table as the screen shows them. */
  rows(asked: RowsAsked): Promise<readonly (readonly string[])[]>
  /** What saturation makes of the dose; undefined for a linear model. */
  saturation(): Promise<SaturationView | undefined>
  /** How far a second computation agrees, in a sentence with what that does not prove. */
  confirm(): Promise<string>
  /** A table in full precision, as the command line writes it, and its metadata. */
  download(what: Download): Promise<readonly NamedFile[]>
}
