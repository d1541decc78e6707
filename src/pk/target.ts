import type { Hours } from '../units/canonical'
import type { Signal } from './trajectory'

export type TargetKind =
  | 'window'
  | 'trough'
  | 'peak'
  | 'minimum'
  | 'average'
  | 'level'
  | 'auc24'
  | 'auc-interval'
  | 'time-above'
  | 'time-below'

/** Over which stretches of time a target is asked for. */
export type When =
  | { readonly kind: 'steady-state' }
  | { readonly kind: 'throughout' }
  | { readonly kind: 'from-now' }
  | { readonly kind: 'every-interval' }
  | { readonly kind: 'every-day' }
  | { readonly kind: 'day'; readonly day: number }
  | { readonly kind: 'last-interval' }

/** What a regimen should reach or stay under. */
export interface Target {
  readonly kind: TargetKind
  readonly when: When
  readonly role?: 'efficacy' | 'safety'
  readonly signal: Signal
  /** Limits on the compared value, which is the total concentration (or area) x `factor`. */
  readonly low?: number
  readonly high?: number
  /** Free fraction where the target is unbound, divided by the MIC where limits are multiples of it; else 1. */
  readonly factor: number
  /** The free fraction is in the factor. */
  readonly unbound?: true
  /** Unit of the compared value: mg/L, mg.h/L, h or 1. */
  readonly unit: string
  /** Share of time that must be inside, above or below. */
  readonly share: number
  /** For `level`: how long after a dose's start or end. */
  readonly after?: Hours
  readonly from?: 'dose start' | 'dose end'
}
