import type { Hours } from '../units/canonical'
import type { Model } from './model'
import { NO_HALF_LIVES, NO_MOMENTS } from './nonlinearWords'
import type { PhasesOfStretch } from './phases'

/** What is said of the phases of a stretch whose model is not linear: it has none, and why; its effect sites' rates. */
export function phasesOfNonlinear(model: Model, from: Hours, to: Hours): PhasesOfStretch {
  return {
    from,
    to,
    matrix: [],
    out: [],
    names: model.compartments.map(({ name }) => name),
    phases: [],
    accumulation: [],
    rulingPhase: undefined,
    absorption: [],
    effectSites: model.effectSites.map(({ name, rate }) => ({
      ...{ name, rate, halfLife: Math.LN2 / rate, stages: 1, setsFinalSlope: false }
    })),
    stiffness: undefined,
    longestExplicitStep: undefined,
    explicitSteps: undefined,
    vss: undefined,
    vz: undefined,
    mrt: undefined,
    clearance: undefined,
    terminalHalfLife: undefined,
    absorptionSetsFinalSlope: undefined,
    decrements: [],
    notes: [],
    why: {
      phases: NO_HALF_LIVES,
      rulingPhase: NO_HALF_LIVES,
      accumulation: NO_HALF_LIVES,
      stiffness: NO_HALF_LIVES,
      longestExplicitStep: NO_HALF_LIVES,
      explicitSteps: NO_HALF_LIVES,
      vss: NO_MOMENTS,
      vz: NO_MOMENTS,
      mrt: NO_MOMENTS,
      clearance: NO_MOMENTS,
      terminalHalfLife: NO_HALF_LIVES,
      decrements: NO_HALF_LIVES
    }
  }
}
