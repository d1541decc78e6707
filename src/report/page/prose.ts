/** A sentence whose numbers and symbols are set apart; plain text stands as a string. */
export type Prose = readonly (string | Marked)[]

export interface Marked {
  /** `value`: a number with its unit; `strong`: what matters most; `symbol`: of a formula; `raised`, `lowered`: in one. */
  readonly kind: 'value' | 'strong' | 'symbol' | 'raised' | 'lowered'
  readonly text: string
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
