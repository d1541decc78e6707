import type { StudyResult } from '../study/result'
import { withReasons } from './undefinedValues'

/** The names of one stretch's values, with their units. */
export const STRETCH_NAMES = {
  rulingPhase: 'rulingPhase',
  stiffness: 'stiffness',
  longestExplicitStep: 'longestExplicitStep_h',
  explicitSteps: 'explicitSteps',
  vss: 'vss_L',
  vz: 'vz_L',
  mrt: 'mrt_h',
  clearance: 'clearance_L_h',
  terminalHalfLife: 'terminalHalfLife_h'
} as const

/** `phases --json`: per stretch between patient changes the phases and moments, per regimen when distribution is over. */
export function phasesDocument(result: StudyResult): object {
  return {
    /** Clearance and volumes contain 1/F. */
    apparent: result.study.drugModel.apparent,
    stretches: result.phases.map((stretch) => ({
      from_h: stretch.from,
      to_h: stretch.to,
      phases: stretch.phases.map((phase) => ({
        eigenvalue_per_h: phase.eigenvalue,
        halfLife_h: phase.halfLife,
        coefficient_per_L: phase.coefficient,
        shareOfAuc: phase.shareOfAuc
      })),
      accumulation: stretch.accumulation.map(({ period, shares }) => ({ period_h: period, shares })),
      ...withReasons(stretch, STRETCH_NAMES),
      absorption: stretch.absorption.map(inputRate),
      effectSites: stretch.effectSites.map(inputRate),
      compartments: stretch.names,
      rateMatrix_per_h: stretch.matrix,
      elimination_per_h: stretch.out,
      decrementTimes: stretch.decrements.map((decrement) => ({
        site: decrement.site,
        infusion_h: decrement.infusion,
        ...withReasons(decrement, { by20: 'by20percent_h', by50: 'by50percent_h', by80: 'by80percent_h' })
      })),
      notes: stretch.notes
    })),
    distribution: result.regimens.flatMap((regimen, index) =>
      regimen.distribution.map((over) => ({
        regimen: regimen.name,
        regimenIndex: index,
        interval: over.interval,
        over_h: over.over ?? null,
        endOfInput_h: over.endOfInput ?? null,
        byPhases_h: over.byPhases ?? null,
        readableFrom_h: over.readableFrom ?? null,
        readableTo_h: over.readableTo,
        ...(over.why === undefined ? {} : { why: { over_h: over.why } })
      }))
    )
  }
}

function inputRate(rate: { readonly name: string; readonly rate: number; readonly halfLife: number }): object {
  return { name: rate.name, rate_per_h: rate.rate, halfLife_h: rate.halfLife }
}
