/** Three significant figures as plain text for a terminal: `17.4`, `1500`, `0.0351`; a dash for what is not defined. */
export function plainNumber(value: number | undefined): string {
  if (value === undefined) return '-'
  if (!Number.isFinite(value)) throw new RangeError(`cannot print ${value}`)
  const rounded = Number(value.toPrecision(3))
  return rounded === 0
    ? '0'
    : Math.abs(rounded) >= 1e-4 && Math.abs(rounded) < 1e9
      ? String(rounded)
      : rounded.toExponential()
}

/** A share of time as a percentage; one that is not quite all or none is never rounded to 100 or 0. */
export function plainPercent(share: number | undefined): string {
  if (share === undefined) return '-'
  if (share > 0 && share < 0.001) return 'under 0.1 %'
  if (share < 1 && share > 0.999) return 'over 99.9 %'
  return `${plainNumber(100 * share)} %`
}

/** Columns set side by side: the first flush left, the others flush right, two spaces between. */
export function alignedRows(rows: readonly (readonly string[])[]): string[] {
  const widths: number[] = []
  for (const row of rows) {
    for (const [i, cell] of row.entries()) widths[i] = Math.max(widths[i] ?? 0, cell.length)
  }
  return rows.map((row) =>
    row
      .map((cell, i) => (i === 0 ? cell.padEnd(widths[i]!) : cell.padStart(widths[i]!)))
      .join('  ')
      .trimEnd()
  )
}
