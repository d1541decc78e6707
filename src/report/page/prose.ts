import type { Place } from '../../study/edit/place'
import type { Quantity } from '../../units/quantity'

/** A sentence whose numbers and symbols are set apart; plain text stands as a string. */
export type Prose = readonly (string | Marked)[]

export interface Marked {
  /** `value`: a number with its unit; `strong`: what matters most; `symbol`: of a formula; `raised`, `lowered`: in one. */
  readonly kind: 'value' | 'strong' | 'symbol' | 'raised' | 'lowered'
  readonly text: string
  /** Where the value stands in the study file, where it can be typed anew. */
  readonly edit?: EditMark
}

/** A value of the study file that is edited in place. */
export interface EditMark {
  readonly place: Place
  /** The path as issues and questions write it: `patient.weight`. */
  readonly at: string
  /** The value in the canonical unit, where it was typed in another. */
  readonly echo?: string
  /** It is told after an edit alone: half an hour as 0.5 h surprises nobody. */
  readonly quietEcho?: boolean
  /** What is asked back because the value is implausible, with the same number in a neighbouring unit. */
  readonly question?: EditQuestion
}

export interface EditQuestion {
  readonly text: string
  readonly offer?: { readonly quantity: Quantity; readonly text: string }
}

/** A number with its unit. */
export function value(text: string): Marked {
  return { kind: 'value', text }
}

export function strong(text: string): Marked {
  return { kind: 'strong', text }
}

export function symbol(text: string): Marked {
  return { kind: 'symbol', text }
}

export function raised(text: string): Marked {
  return { kind: 'raised', text }
}

/** The sentence as plain text. */
export function plain(prose: Prose): string {
  return prose.map((part) => (typeof part === 'string' ? part : part.text)).join('')
}
