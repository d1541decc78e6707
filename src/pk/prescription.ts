import type { Hours, Milligrams } from '../units/canonical'
import type { Spacing } from '../units/spacing'
import type { WeightDescriptor } from './subject'

/** An amount, or a rate per hour, in mg of the product named, absolute or per kg or m2 of the subject. */
export interface Reckoned {
  readonly value: number
  readonly per: 'dose' | 'kg' | 'm2'
}

/** One line of a regimen: a dose, once or repeated, in canonical units. */
export interface DoseLine {
  readonly route: string
  /** Exactly one of `amount` [mg, mg/kg, mg/m2] and `rate` [mg/h, …; needs `over`]. */
  readonly amount?: Reckoned
  readonly rate?: Reckoned
  readonly over?: Hours
  /** Mass of moiety per mass of product; 1 where the drug has no products. */
  readonly moietyFraction: number
  readonly product?: string
  readonly by?: WeightDescriptor
  /** Cap on the amount of one dose, in the product's own mass. */
  readonly atMost?: Milligrams
  readonly at: Hours
  readonly every?: Spacing
  /** Absent with `every`: repeats while the dose time is before the end of the study. */
  readonly count?: number
  readonly exceptions: readonly Exception[]
}

/** What happened to one scheduled dose of a line, counted from 1. Absent keys: as scheduled. */
export interface Exception {
  readonly number: number
  readonly missed?: boolean
  readonly lateBy?: Hours
  readonly shiftsLater?: boolean
  readonly amount?: Reckoned
  readonly over?: Hours
  readonly stoppedAfter?: Hours
  readonly fractionTaken?: number
}

/** A regimen as prescribed, before it is written out for one individual. */
export interface Prescription {
  readonly name: string
  readonly start: 'empty' | 'steady-state'
  readonly lines: readonly DoseLine[]
}

/** Haemodialysis: extra clearance of total drug in the observed compartment. */
export interface SessionLine {
  readonly at: Hours
  readonly duration: Hours
  readonly clearance: number
  readonly every?: Spacing
  readonly count?: number
}
