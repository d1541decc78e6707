import type { Reasons } from '../../pk/reasons'
import type { GridCell, GridColumn, RegimenLabel } from './page'

/** A column a regimen. */
export function regimenColumns(labels: readonly RegimenLabel[]): readonly GridColumn[] {
  return labels.map((regimen) => ({ title: regimen.letter, regimen }))
}

/** A value as it is shown; one that is not defined as a dash with its reason. */
export function cell(shown: number | undefined, show: (value: number) => string, why: string | undefined): GridCell {
  if (shown !== undefined) return { text: show(shown) }
  return { text: '–', why: why ?? 'not defined' }
}

/** The cell of a named value of a group, with the group's own reason where it is not defined. */
export function cellOf<Name extends string>(
  group: { readonly [Key in Name]: number | undefined } & { readonly why: Reasons },
  name: Name,
  show: (value: number) => string
): GridCell {
  return cell(group[name], show, group.why[name])
}
