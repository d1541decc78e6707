import type { Issue } from '../../pk/issue'
import type { PageView } from '../../report/page/page'
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
  /** Validate a study file, compute it and lay the page out. */
  open(file: Blob): Promise<Outcome>
  /** The page shows the last study that was opened from now on; downloads are named after the file. */
  takeUp(name: string): Promise<void>
  /** Rows of the concentration table as the screen shows them. */
  rows(asked: RowsAsked): Promise<readonly (readonly string[])[]>
  /** A table in full precision, as the command line writes it, and its metadata. */
  download(what: Download): Promise<readonly NamedFile[]>
}
