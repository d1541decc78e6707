import type { Hours } from './canonical'

/**
 * A distance between repeats as it was typed, so that its multiples are those of the typed unit:
 * `hours` = value x times / per, an exact ratio of integers.
 */
export interface Spacing {
  readonly value: number
  readonly times: number
  readonly per: number
}

/** k x spacing [h]: multiplied in the typed unit, rounded to 15 significant digits, then converted by the exact ratio. */
export function multipleOf(spacing: Spacing, k: number): Hours {
  return (Number((k * spacing.value).toPrecision(15)) * spacing.times) / spacing.per
}
