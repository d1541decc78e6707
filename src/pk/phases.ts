import { expm1 } from '../numerics/elementary'
import { outflow } from '../numerics/rates'
import { type Eigenvalue, spectrum } from '../numerics/spectrum'
import type { Hours, Litres, LitresPerHour, PerHour } from '../units/canonical'
import { type DecrementTimes, decrementTimes } from './decrement'
import { type Disposition, dispositionOf } from './disposition'
import { dispositionMoments } from './dispositionMoments'
import { type InputRate, inputRates } from './inputRates'
import { isLinear, type Model } from './model'
import { phasesOfNonlinear } from './nonlinearPhases'
import { type NumberOrReason, numbersOf, type Reasons, reasonsOf } from './reasons'

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

/** Numbers of a stretch that may be undefined. */
interface StretchValues {
  /** Largest over smallest magnitude of the eigenvalues of all rates of the stretch, effect sites included. */
  readonly stiffness: number | undefined
  /** 2 / largest: of a forward Euler method. */
  readonly longestExplicitStep: Hours | undefined
  /** Such steps from 0 to the end of the sampling. */
  readonly explicitSteps: number | undefined
  readonly vss: Litres | undefined
  readonly vz: Litres | undefined
  readonly mrt: Hours | undefined
  readonly clearance: LitresPerHour | undefined
  /** ln 2 / smallest eigenvalue of the disposition. */
  readonly terminalHalfLife: Hours | undefined
}

/** The phases of the disposition over one stretch between changes of the person, sessions off. */
export interface PhasesOfStretch extends StretchValues {
  readonly from: Hours
  readonly to: Hours
  /** Rate matrix [/h], row i column j from j to i, the diagonal minus all that leaves; `out` is what leaves the body. */
  readonly matrix: readonly (readonly number[])[]
  readonly out: readonly PerHour[]
  /** Of the compartments, in the matrix's order. */
  readonly names: readonly string[]
  /** Fastest first; empty where the disposition is no sum of exponentials of their own (see `why.phases`). */
  readonly phases: readonly Phase[]
  /** One for each dosing period asked for. */
  readonly accumulation: readonly SharesOfAccumulation[]
  /** Position of the slowest phase that carries at least 10 % of the area. */
  readonly rulingPhase: number | undefined
  readonly absorption: readonly InputRate[]
  readonly effectSites: readonly InputRate[]
  /** Half-life of the slowest absorption, where it is slower than the disposition. */
  readonly absorptionSetsFinalSlope: Hours | undefined
  readonly decrements: readonly DecrementTimes[]
  /** What must be read beside the numbers: near or equal rates, an oscillation. */
  readonly notes: readonly string[]
  readonly why: Reasons
}

export interface PhasesRequest {
  /** Of the stretch, without sessions. */
  readonly model: Model
  readonly from: Hours
  readonly to: Hours
  /** End of the sampling, for the number of explicit steps. */
  readonly until: Hours
  /** Dosing periods for the shares of accumulation. */
  readonly periods: readonly Hours[]
  /** The regimens' own lengths of infusion, for the decrement times. */
  readonly infusions: readonly Hours[]
}

/** A coefficient below this part of the largest is that of a phase that a bolus does not set off. */
const ROUNDING = 1e-13

/** A phase rules that carries at least this much of the area. */
export const RULING_SHARE = 0.1

/** The phases of one stretch; of a model that is not linear, why it has none. */
export function phasesOf(request: PhasesRequest): PhasesOfStretch {
  const { model, from, to, until } = request
  if (!isLinear(model)) return phasesOfNonlinear(model, from, to)
  const disposition = dispositionOf(model)
  const { rates } = disposition
  const all = spectrum(rates)
  const phases = phasesOfDisposition(disposition)
  const listed = typeof phases === 'string' ? [] : phases
  const slowest = slowestRate(disposition)
  const moments = dispositionMoments(disposition, typeof slowest === 'number' ? slowest : undefined)
  const never = 'drug never leaves the body from the observed compartment'
  const values: Readonly<Record<keyof StretchValues, NumberOrReason>> = {
    ...explicitStepping(all, model, until),
    vss: moments?.vss ?? never,
    vz: moments?.vz ?? (typeof slowest === 'string' ? slowest : never),
    mrt: moments?.mrt ?? never,
    clearance: moments?.clearance ?? never,
    terminalHalfLife: typeof slowest === 'number' ? Math.LN2 / slowest : slowest
  }
  const absorption = inputRates(disposition, typeof slowest === 'number' ? slowest : undefined)
  const slowInputs = absorption.filter(({ setsFinalSlope }) => setsFinalSlope).map(({ halfLife }) => halfLife)
  return {
    from,
    to,
    matrix: Array.from({ length: rates.size }, (_, i) =>
      Array.from({ length: rates.size }, (_, j) => (i === j ? -outflow(rates, j) : rates.between[i * rates.size + j]))
    ),
    out: Array.from(rates.out),
    names: model.compartments.map(({ name }) => name),
    phases: listed,
    accumulation: listed.length === 0 ? [] : request.periods.map((period) => sharesOfAccumulation(listed, period)),
    rulingPhase: rulingPhase(listed),
    absorption,
    effectSites: model.effectSites.map(({ name, rate }) => ({
      ...{ name, rate, halfLife: Math.LN2 / rate, stages: 1, setsFinalSlope: false }
    })),
    ...numbersOf(values),
    absorptionSetsFinalSlope: slowInputs.length > 0 ? Math.max(...slowInputs) : undefined,
    decrements: typeof slowest === 'number' ? decrementTimes(model, request.infusions) : [],
    notes: notesOn(all),
    why: {
      ...reasonsOf(values),
      ...(typeof phases === 'string' && { phases, rulingPhase: phases, accumulation: phases }),
      ...(typeof slowest === 'string' && { decrements: slowest })
    }
  }
}

/**
 * The phases of a disposition, fastest first; in words why it has none of their own. Coefficients are positive where every
 * exchange goes both ways; in a ring one may be negative.
 */
export function phasesOfDisposition(disposition: Disposition): readonly Phase[] | string {
  const phases: Phase[] = []
  for (const { eigenvalue, coefficient, shareOfArea, why } of disposition.terms) {
    const { rate, halfLife } = eigenvalue
    if (coefficient === undefined || shareOfArea === undefined || halfLife === undefined) {
      return why ?? 'part of the drug never leaves, so that the area is not finite'
    }
    phases.push({ eigenvalue: rate, halfLife, coefficient, shareOfAuc: shareOfArea })
  }
  const largest = Math.max(...phases.map(({ coefficient }) => Math.abs(coefficient)))
  return phases.map((phase) => {
    const isRounding = Math.abs(phase.coefficient) <= ROUNDING * largest
    return isRounding ? { ...phase, coefficient: 0, shareOfAuc: 0 } : phase
  })
}

/** Position of the slowest phase that carries at least 10 % of the area. */
export function rulingPhase(phases: readonly Phase[]): number | undefined {
  const ruling = phases.findLastIndex(({ shareOfAuc }) => shareOfAuc >= RULING_SHARE)
  return ruling < 0 ? undefined : ruling
}

function slowestRate({ terms }: Disposition): NumberOrReason {
  const slowest = terms.at(-1)?.eigenvalue
  if (slowest === undefined || slowest.rate === 0) return 'drug never leaves the body from the observed compartment'
  return slowest.kind === 'complex' ? 'the slowest part of the disposition swings' : slowest.rate
}

function sharesOfAccumulation(phases: readonly Phase[], period: Hours): SharesOfAccumulation {
  const parts = phases.map(({ coefficient, eigenvalue }) => coefficient / expm1(eigenvalue * period))
  const sum = parts.reduce((total, part) => total + part, 0)
  return { period, shares: parts.map((part) => part / sum) }
}

function explicitStepping(
  all: readonly Eigenvalue[],
  model: Model,
  until: Hours
): Record<'stiffness' | 'longestExplicitStep' | 'explicitSteps', NumberOrReason> {
  const sites = model.effectSites.map(({ rate }) => rate)
  const magnitudes = [...all.map(magnitudeOf), ...sites]
  const largest = Math.max(...magnitudes)
  const smallest = Math.min(...magnitudes)
  if (!(largest > 0)) {
    const why = 'nothing moves'
    return { stiffness: why, longestExplicitStep: why, explicitSteps: why }
  }
  const stiffness = smallest > 0 ? largest / smallest : 'the smallest eigenvalue is 0: something never leaves'
  if (all.some(({ kind }) => kind === 'complex')) {
    const why = 'defined for real eigenvalues'
    return { stiffness, longestExplicitStep: why, explicitSteps: why }
  }
  return { stiffness, longestExplicitStep: 2 / largest, explicitSteps: Math.ceil(until / (2 / largest)) }
}

function magnitudeOf({ rate, period }: Eigenvalue): PerHour {
  const frequency = period === undefined ? 0 : (2 * Math.PI) / period
  return frequency === 0 ? rate : Math.sqrt(rate * rate + frequency * frequency)
}

function notesOn(all: readonly Eigenvalue[]): string[] {
  const notes: string[] = []
  if (all.some(({ kind }) => kind === 'defective'))
    notes.push('equal rates on one path: their exponential comes with powers of time')
  if (all.some(({ kind }) => kind === 'clustered'))
    notes.push('two rates are so near each other that neither has a coefficient of its own')
  if (all.some(({ kind }) => kind === 'complex')) notes.push('amounts swing: a pair of eigenvalues is complex')
  return notes
}
