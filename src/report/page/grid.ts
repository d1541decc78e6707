import type { Reasons } from '../../pk/reasons'
import type { GridCell, GridColumn, GridView, RegimenLabel } from './page'
import { listed, polished, sentence } from './showing'

/** A value as it is shown, or why it is not defined. */
export type Entry =
  | { readonly shown: string; readonly met?: boolean }
  | { readonly shown: undefined; readonly why: string }

/** A grid before its reasons are gathered into notes. */
export interface GridPlan extends Omit<GridView, 'rows' | 'notes'> {
  readonly rows: readonly { readonly head: string; readonly entries: readonly Entry[] }[]
}

/**
 * A grid whose undefined values carry marks, with the reasons below it. A row that is defined nowhere, for one reason,
 * leaves the table and is named in a note: a column of dashes tells nobody anything.
 */
export function grid(plan: GridPlan): GridView {
  const absent = new Map<string, string[]>()
  const marks = new Map<string, string>()
  const rows: { head: string; cells: GridCell[] }[] = []
  for (const { head, entries } of plan.rows) {
    const reasons = new Set(entries.map((entry) => (entry.shown === undefined ? entry.why : '')))
    const [only] = reasons
    if (reasons.size === 1 && only !== undefined && only !== '') {
      absent.set(only, [...(absent.get(only) ?? []), head.replace(/, [^,]*$/, '')])
      continue
    }
    rows.push({ head, cells: entries.map((entry) => cellOf(entry, marks)) })
  }
  const notes = [...marks].map(([why, mark]) => ({ mark, text: sentence(polished(why)) }))
  for (const [why, heads] of absent) notes.push({ mark: '', text: `Not defined: ${listed(heads)} (${polished(why)}).` })
  return { ...plan, rows, notes }
}

/** A column a regimen. */
export function regimenColumns(labels: readonly RegimenLabel[]): readonly GridColumn[] {
  return labels.map((regimen) => ({ title: regimen.letter, regimen }))
}

export function entry(value: number | undefined, show: (value: number) => string, why: string | undefined): Entry {
  return value === undefined ? { shown: undefined, why: why ?? 'not defined' } : { shown: show(value) }
}

/** A named value of a group, with the group's own reason where it is not defined. */
export function entryOf<Name extends string>(
  group: { readonly [Key in Name]: number | undefined } & { readonly why: Reasons },
  name: Name,
  show: (value: number) => string
): Entry {
  return entry(group[name], show, group.why[name])
}

function cellOf(entry: Entry, marks: Map<string, string>): GridCell {
  if (entry.shown !== undefined) {
    return { text: entry.shown, ...(entry.met === undefined ? {} : { met: entry.met }) }
  }
  const mark = marks.get(entry.why) ?? String.fromCharCode(97 + (marks.size % 26))
  marks.set(entry.why, mark)
  return { text: '–', mark }
}
