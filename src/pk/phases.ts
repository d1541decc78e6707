import type { Hours, Litres, LitresPerHour, PerHour } from '../units/canonical'
import type { DecrementTimes } from './decrement'
import type { Reasons } from './reasons'

/** One exponential of the disposition: of the concentration after a unit bolus into the observed compartment. */
export interface Phase {
  readonly eigenvalue: PerHour
  readonly halfLife: Hours
  /** Share in the concentration after a bolus of 1 mg [/L]; the coefficients sum to 1/V. */
  readonly coefficient: number
  /** Of the area after a bolus. */
  readonly shareOfAuc: number
}

/** Which phases make the accumulation when a dose is repeated after `period`. */
export interface SharesOfAccumulation {
  readonly period: Hours
  /** coefficient / (e^(lambda period) - 1) over their sum, one a phase in the order of the phases. */
  readonly shares: readonly number[]
}

/** A rate outside the disposition: absorption, a transit, an effect site. */
export interface InputRate {
  readonly name: string
  readonly rate: PerHour
  readonly halfLife: Hours
  /** Slower than the slowest phase of the disposition, so that it sets the final slope. */
  readonly setsFinalSlope: boolean
}

/** The phases of the disposition over one stretch between changes of the person, sessions off. */
export interface PhasesOfStretch {
  readonly from: Hours
  readonly to: Hours
  /** Rate matrix [/h], row i column j from j to i, the diagonal minus all that leaves; `out` is what leaves the body. */
  readonly matrix: readonly (readonly number[])[]
  readonly out: readonly number[]
  /** Of the compartments, in the matrix's order. */
  readonly names: readonly string[]
  /** Fastest first; empty where the disposition has no such sum (see `why.phases`). */
  readonly phases: readonly Phase[]
  /** One for each dosing period asked for. */
  readonly accumulation: readonly SharesOfAccumulation[]
  /** Position of the slowest phase that carries at least 10 % of the area. */
  readonly rulingPhase: number | undefined
  readonly absorption: readonly InputRate[]
  readonly effectSites: readonly InputRate[]
  /** Largest over smallest eigenvalue of all rates of the stretch. */
  readonly stiffness: number | undefined
  /** 2 / largest: of a forward Euler method. */
  readonly longestExplicitStep: Hours | undefined
  /** Such steps from 0 to the end of the sampling. */
  readonly explicitSteps: number | undefined
  readonly vss: Litres | undefined
  readonly vz: Litres | undefined
  readonly mrt: Hours | undefined
  readonly clearance: LitresPerHour | undefined
  readonly terminalHalfLife: Hours | undefined
  /** Half-life of the slowest input rate, where one is slower than the disposition. */
  readonly absorptionSetsFinalSlope: Hours | undefined
  readonly decrements: readonly DecrementTimes[]
  /** What must be read beside the numbers: clustered or equal rates, an oscillation. */
  readonly notes: readonly string[]
  readonly why: Reasons
}
