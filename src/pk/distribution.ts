import type { Hours } from '../units/canonical'

/** When, in one interval, a concentration is no longer that of drug on its way into the tissues. */
export interface DistributionOver {
  /** Position of the interval. */
  readonly interval: number
  /** Elapsed end of the interval's input: infusion end or bolus, lag included; the last one if several. */
  readonly endOfInput: Hours | undefined
  /** After the end of the input; the model's own rule where that is later. */
  readonly over: Hours | undefined
  /** The phases alone, without the model's own rule. */
  readonly byPhases: Hours | undefined
  /** Elapsed time from which, and until which, a sample may be compared with a window. */
  readonly readableFrom: Hours | undefined
  readonly readableTo: Hours
  readonly why?: string
}
