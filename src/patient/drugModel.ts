import type { Hours, Milligrams } from '../units/canonical'
import type { CovariateName } from './person'

/**
 * A model file, checked and in canonical units: what is known of a drug before it meets a person.
 * Names of parameters and compartments are those of the file and are known to exist.
 */
export interface DrugModel {
  readonly id: string
  readonly title: string
  readonly drug: Drug
  /** Clearances and volumes contain 1/F: no intravenous route, values labelled "/F". */
  readonly apparent: boolean
  readonly source: Source
  readonly studied?: Studied
  readonly covariates: CovariateChoices
  /** The model's own covariates, by name. */
  readonly declared: Readonly<Record<string, DeclaredCovariate>>
  readonly parameters: readonly Parameter[]
  readonly valid: readonly CovariateRange[]
  readonly compartments: readonly DrugCompartment[]
  readonly transfers: readonly DrugTransfer[]
  readonly routes: readonly DrugRoute[]
  readonly observations: readonly { readonly id: string; readonly of: readonly string[] }[]
}

export interface Drug {
  readonly name: string
  readonly moiety: string
  readonly matrix: string
  /** [g/mol] */
  readonly molarMass?: number
  readonly fractionUnbound?: number
  readonly products: readonly { readonly name: string; readonly fraction: number }[]
  readonly limits: readonly DoseLimit[]
  readonly sampleAfter?: { readonly delay: Hours; readonly from: 'dose start' | 'dose end'; readonly source?: string }
}

/** A largest dose; moiety mass unless a product is named. `rate` in mg/h, `daily` and `step` in mg per 24 h. */
export interface DoseLimit {
  readonly of: 'single' | 'daily' | 'rate' | 'total' | 'step'
  readonly value: Milligrams
  readonly product?: string
  readonly source: string
}

export interface Source {
  readonly kind: 'invented' | 'published' | 'user'
  readonly citation: string
  readonly doi?: string
  readonly read?: string
  readonly cautions: readonly string[]
}

export interface Studied {
  readonly subjects?: number
  /** Largest single dose that was studied, of the moiety. */
  readonly largestDose?: Milligrams
  readonly description: string
  readonly ranges: readonly CovariateRange[]
}

/** Bounds in the covariate's canonical unit, or the categories that were studied. */
export interface CovariateRange {
  readonly covariate: CovariateName
  readonly low?: number
  readonly high?: number
  readonly categories?: readonly string[]
}

/** Which equation gives each computed covariate; absent where the model does not use it. */
export interface CovariateChoices {
  readonly creatinineClearance?: { readonly equation: 'cockcroft-gault'; readonly weight: string } & Guard
  readonly estimatedGfr?: { readonly equation: GfrEquation } & Guard
  readonly bodySurfaceArea?: { readonly equation: 'mosteller' | 'du-bois' | 'haycock' }
  readonly leanWeight?: { readonly equation: 'janmahasatian' | 'james' }
}

/** Creatinine raised to a floor [mg/dL] or a result held at a ceiling [canonical unit]: printed, never silent. */
export interface Guard {
  readonly creatinineAtLeast?: number
  readonly atMost?: number
}

export type GfrEquation =
  | 'ckd-epi-2021-creatinine'
  | 'ckd-epi-2021-creatinine-cystatin'
  | 'ckd-epi-2012-cystatin'
  | 'mdrd'
  | 'bedside-schwartz'

export type DeclaredCovariate =
  | { readonly kind: 'number'; readonly unit: string; readonly asks?: string }
  | {
      readonly kind: 'category'
      readonly categories: readonly string[]
      readonly frequencies?: Readonly<Record<string, number>>
      readonly asks?: string
    }

/** A parameter's typical value is a sum of products. `toCanonical` turns the unit that the file states into the core's. */
export interface Parameter {
  readonly name: string
  readonly unit: string
  /** canonical = value x times / per. */
  readonly toCanonical: { readonly times: number; readonly per: number }
  readonly typical: readonly Term[]
  readonly assumed?: { readonly because: string }
}

/** Coefficient, in the parameter's stated unit, times factors. */
export interface Term {
  readonly value: number
  readonly factors: readonly Factor[]
  readonly assumed?: { readonly because: string }
}

/**
 * How a covariate enters. Numbers that stand beside a covariate (`reference`, `half`, `at`) are in `in`, the unit of the
 * file: the canonical covariate x times / per. `slope` and `rate` are per that unit.
 */
export type Factor =
  | {
      readonly kind: 'power'
      readonly covariate: CovariateName
      readonly in: CovariateUnit
      readonly reference: number
      readonly exponent: number
    }
  | {
      readonly kind: 'linear'
      readonly covariate: CovariateName
      readonly in: CovariateUnit
      readonly reference: number
      readonly slope: number
    }
  | {
      readonly kind: 'exponential'
      readonly covariate: CovariateName
      readonly in: CovariateUnit
      readonly reference: number
      readonly rate: number
    }
  | {
      readonly kind: 'maturation'
      readonly covariate: CovariateName
      readonly in: CovariateUnit
      readonly half: number
      readonly exponent: number
    }
  | { readonly kind: 'category'; readonly covariate: CovariateName; readonly values: Readonly<Record<string, number>> }
  | {
      readonly kind: 'step'
      readonly covariate: CovariateName
      readonly in: CovariateUnit
      readonly at: number
      readonly below: number
      readonly from: number
    }

export interface CovariateUnit {
  readonly unit: string
  readonly times: number
  readonly per: number
}

export interface DrugCompartment {
  readonly id: string
  /** Name of the volume parameter. */
  readonly volume?: string
  readonly observed: boolean
}

/** The transfers of a model file; every rate, clearance and the like names a parameter. */
export type DrugTransfer =
  | { readonly kind: 'first-order'; readonly from: string; readonly to: string; readonly rate: string }
  | { readonly kind: 'exchange'; readonly between: readonly [string, string]; readonly clearance: string }
  | {
      readonly kind: 'exchange'
      readonly between: readonly [string, string]
      readonly rates: readonly [string, string]
    }
  | { readonly kind: 'clearance'; readonly from: string; readonly clearance: string }
  | { readonly kind: 'elimination'; readonly from: string; readonly rate: string }
  | {
      readonly kind: 'transit'
      readonly from: string
      readonly to: string
      readonly stages: number
      readonly rate: string
    }
  | { readonly kind: 'effect'; readonly from: string; readonly to: string; readonly rate: string }
  | {
      readonly kind: 'saturable'
      readonly from: string
      readonly to?: string
      readonly maximumRate: string
      readonly halfSaturation: string
      readonly hill?: number | string
    }
  | {
      readonly kind: 'binding'
      readonly drug: string
      readonly target: string
      readonly complex: string
      readonly association: string
      readonly dissociation: string
      readonly approximation: 'none' | 'quasi-steady-state'
    }
  | { readonly kind: 'production'; readonly into: string; readonly rate: string }

export interface DrugRoute {
  readonly name: string
  readonly input: 'infusion' | 'bolus'
  readonly bioavailability?: string
  readonly lag?: string
  /** One part with fraction 1 where the file says `into`. */
  readonly parts: readonly {
    readonly into: string
    readonly fraction: string | number
    readonly lag?: string
    readonly over?: string
  }[]
}
