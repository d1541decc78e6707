import Papa from 'papaparse'

/** A cell: text, a number written with the shortest digits that read back exactly, or empty. */
export type Cell = string | number | undefined

/**
 * Rows as CSV (RFC 4180): CRLF after every row, the last one too. Text that a spreadsheet would run as a formula is
 * written with a leading apostrophe. Throws `RangeError` for a number that is not finite: a table never holds one.
 */
export function csvRows(rows: readonly (readonly Cell[])[]): string {
  if (rows.length === 0) return ''
  for (const row of rows) {
    for (const cell of row) {
      if (typeof cell === 'number' && !Number.isFinite(cell)) throw new RangeError(`a table cell is ${cell}`)
    }
  }
  return `${Papa.unparse(rows as Cell[][], { newline: '\r\n', escapeFormulae: true })}\r\n`
}
