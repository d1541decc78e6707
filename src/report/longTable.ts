import type { Reasons } from '../pk/reasons'
import type { Cell } from './csv'
import type { ColumnMeaning } from './csvw'

/** One value of a long table: what it is, over which stretch of time, and why it is missing where it is. */
export interface LongRow {
  readonly regimen: string
  /** `interval 1`, `day 2`, `steady state`, `throughout`. */
  readonly over: string
  readonly from: number | undefined
  readonly to: number | undefined
  readonly quantity: string
  readonly value: number | undefined
  readonly unit: string
  readonly note: string
}

/** Columns of a long table, in order, with what each holds. */
export const LONG_COLUMNS: readonly ColumnMeaning[] = [
  {
    name: 'regimen',
    description: 'the regimen, by its name; empty for what holds for every regimen',
    datatype: 'string'
  },
  {
    name: 'over',
    description: 'the stretch of time or the part of the model that the value is of',
    datatype: 'string'
  },
  {
    name: 'from_h',
    description: 'start of that stretch, elapsed since time 0 of the study',
    datatype: 'number',
    unit: 'h'
  },
  { name: 'to_h', description: 'end of that stretch', datatype: 'number', unit: 'h' },
  { name: 'quantity', description: 'what the value is', datatype: 'string' },
  {
    name: 'value',
    description: 'the value, in the unit of its row; empty where it is not defined',
    datatype: 'number'
  },
  { name: 'unit', description: 'UCUM unit of the value; 1 for a pure number or a share', datatype: 'string' },
  { name: 'note', description: 'why a value is not defined, or what must be read beside it', datatype: 'string' }
]

export function longCells(row: LongRow): readonly Cell[] {
  return [row.regimen, row.over, row.from, row.to, row.quantity, row.value, row.unit, row.note]
}

/** Units by the ending of a document's name: `peak_mg_L` is the peak in mg/L. */
const UNIT_OF_ENDING: readonly (readonly [string, string])[] = [
  ['_mg_h_L', 'mg.h/L'],
  ['_mg_L', 'mg/L'],
  ['_L_h', 'L/h'],
  ['_per_h', '/h'],
  ['_per_L', '/L'],
  ['_mg', 'mg'],
  ['_L', 'L'],
  ['_h', 'h']
]

/** A document's name taken apart: `auc24_mg_h_L` is `auc24` in mg.h/L; a name without an ending is a pure number. */
export function nameAndUnit(name: string): { readonly quantity: string; readonly unit: string } {
  const ending = UNIT_OF_ENDING.find(([end]) => name.endsWith(end))
  return ending === undefined
    ? { quantity: name, unit: '1' }
    : { quantity: name.slice(0, -ending[0].length), unit: ending[1] }
}

/** One row a value of a group, under the names of its document. */
export function rowsOfGroup<const Names extends Readonly<Record<string, string>>>(
  group: { readonly [Name in keyof Names]: number | undefined } & { readonly why: Reasons },
  names: Names,
  place: Pick<LongRow, 'regimen' | 'over' | 'from' | 'to'>
): LongRow[] {
  return Object.entries(names).map(([name, shown]) => {
    const value = group[name]
    return { ...place, ...nameAndUnit(shown), value, note: value === undefined ? (group.why[name] ?? '') : '' }
  })
}
