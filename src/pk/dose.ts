import type { Hours, Milligrams } from '../units/canonical'

/** Drug entering one compartment: lag, product and bioavailability are already applied. */
export type Dose =
  | { readonly kind: 'bolus'; readonly start: Hours; readonly into: number; readonly amount: Milligrams }
  | {
      readonly kind: 'infusion'
      readonly start: Hours
      readonly into: number
      readonly amount: Milligrams
      readonly duration: Hours
    }

/** One giving of a drug, as a nurse would chart it, with the inputs that it becomes in this individual. */
export interface Administration {
  /** Position of its line in the regimen, from 0. */
  readonly line: number
  /** Scheduled dose of the line, from 1. */
  readonly number: number
  /** Start of the giving, without lag. */
  readonly at: Hours
  /** Length of the giving, without lag; 0 for a bolus. */
  readonly duration: Hours
  readonly route: string
  /** Amount given, in the moiety of the model, before bioavailability. */
  readonly amount: Milligrams
  /** Amount given as the product's own mass; the same where the drug has no products. */
  readonly productAmount: Milligrams
  /** What was scheduled, where it was given otherwise: late, early, another amount, stopped early, partly taken. */
  readonly departure?: string
  /** Empty where the dose was missed. */
  readonly doses: readonly Dose[]
  readonly missed: boolean
}
