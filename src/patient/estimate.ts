import { nameInWords } from './covariateWords'
import type { CovariateName } from './person'

/** A value that an equation gave, or why it gave none. Never a silent NaN, never a guess. */
export type Estimate = Computed | NotComputed

export interface Computed {
  readonly kind: 'computed'
  /** Canonical unit of the covariate. */
  readonly value: number
  readonly notes: readonly Note[]
}

export interface NotComputed {
  readonly kind: 'not computed'
  readonly reason: string
  /** What would have to be typed; empty where typing more does not help. */
  readonly missing: readonly CovariateName[]
}

/** Something that must be read beside a value. */
export interface Note {
  /**
   * `edge`: the equation is at or beyond the edge of its validity; `guard`: a floor or a ceiling of the model was applied;
   * `instead`: a value given directly stands in place of a computed one; `derived`: how it follows from what was typed.
   */
  readonly kind: 'edge' | 'guard' | 'instead' | 'derived'
  readonly text: string
}

/** A finite value above 0 with its notes; anything else is "not computed" with the number that came out. */
export function computed(value: number, notes: readonly Note[] = []): Estimate {
  if (Number.isFinite(value) && value > 0) return { kind: 'computed', value, notes }
  return notComputed(`the equation gives ${Number(value.toPrecision(3))}, which no body has`)
}

export function notComputed(reason: string, missing: readonly CovariateName[] = []): NotComputed {
  return { kind: 'not computed', reason, missing }
}

/** Every value present, or "needs ..." naming those that are not. The keys are names of covariates. */
export function allOf<T extends Readonly<Record<string, unknown>>>(
  values: T
): { kind: 'all'; values: { [K in keyof T]-?: Exclude<T[K], undefined> } } | NotComputed {
  const missing = Object.keys(values).filter((name) => values[name] === undefined)
  if (missing.length > 0) return notComputed(`needs ${missing.map(nameInWords).join(' and ')}`, missing)
  return { kind: 'all', values: values as { [K in keyof T]-?: Exclude<T[K], undefined> } }
}
