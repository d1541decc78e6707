import type { Quantity } from '../../units/quantity'
import type { Kind } from '../../units/unitTable'
import type { Step } from '../path'
import type { Sign } from '../unitProblem'

/** A place in a study file whose value can be typed anew, what may stand there and what stands there now. */
export type Place = {
  /** From the top of the file; the value there is the one given here. */
  readonly path: readonly Step[]
  /** What the value is, in words: `weight`. */
  readonly label: string
} & PlaceValue

export type PlaceValue =
  | {
      readonly kind: 'quantity'
      readonly quantity: Quantity
      /** Absent: a unit of the model's own, which stays. */
      readonly of?: Kind
      readonly sign: Sign
    }
  /** A number from 0 to 1 that is typed and read in per cent. */
  | { readonly kind: 'share'; readonly share: number }
  /** A plain number over 0. */
  | { readonly kind: 'number'; readonly number: number }
  /** A whole number from 1; where it may be absent, nothing typed takes it away. */
  | { readonly kind: 'whole'; readonly whole?: number; readonly optional: boolean }
  | { readonly kind: 'choice'; readonly choice?: string; readonly choices: readonly Choice[] }
  | { readonly kind: 'text'; readonly text?: string; readonly longest: number; readonly optional: boolean }

export interface Choice {
  readonly value: string
  readonly text: string
  /** What must stand beside the value for it to hold, by key; undefined for what must not. */
  readonly beside?: Readonly<Record<string, unknown>>
}

/** The value at a place as it stands in the file; undefined where nothing stands. */
export function valueIn(place: Place): unknown {
  switch (place.kind) {
    case 'quantity':
      return place.quantity
    case 'share':
      return place.share
    case 'number':
      return place.number
    case 'whole':
      return place.whole
    case 'choice':
      return place.choice
    case 'text':
      return place.text
  }
}

/** The place with the value that stands there in another state of the file; as it was where that does not fit. */
export function placeIn(place: Place, value: unknown): Place {
  switch (place.kind) {
    case 'quantity':
      return isQuantity(value) ? { ...place, quantity: value } : place
    case 'share':
      return typeof value === 'number' ? { ...place, share: value } : place
    case 'number':
      return typeof value === 'number' ? { ...place, number: value } : place
    case 'whole': {
      const { whole: _, ...bare } = place
      return typeof value === 'number' ? { ...place, whole: value } : value === undefined ? bare : place
    }
    case 'choice':
      return typeof value === 'string' ? { ...place, choice: value } : place
    case 'text': {
      const { text: _, ...bare } = place
      return typeof value === 'string' ? { ...place, text: value } : value === undefined ? bare : place
    }
  }
}

function isQuantity(value: unknown): value is Quantity {
  return typeof value === 'object' && value !== null && 'value' in value && 'unit' in value
}
