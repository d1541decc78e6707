import type { Hours } from '../units/canonical'

/** A dose over one of the drug's limits. */
export interface DoseOverLimit {
  /** Position of the limit in the drug's list. */
  readonly limit: number
  readonly of: 'single' | 'daily' | 'rate' | 'total' | 'step'
  /** Position of the dose line, and the scheduled dose of it, that went over. */
  readonly line: number
  readonly number: number
  readonly at: Hours
  /** What was given: mg, mg per 24 h, mg/h. */
  readonly value: number
  readonly limitValue: number
  readonly product?: string
  readonly source: string
}
