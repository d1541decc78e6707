import type { RegimenExposure } from '../pk/exposure'
import type { When } from '../pk/target'
import type { TargetResult } from '../pk/targetMet'
import { nonlinearViews } from '../study/nonlinear'
import type { RegimenResult, StudyResult } from '../study/result'
import { nonlinearDocument } from './nonlinearDocument'
import { withReasons } from './undefinedValues'

/** The names of one dosing interval's values, with their units. */
export const INTERVAL_NAMES = {
  auc: 'auc_mg_h_L',
  peak: 'peak_mg_L',
  peakTime: 'peakTime_h',
  trough: 'trough_mg_L',
  minimum: 'minimum_mg_L',
  minimumTime: 'minimumTime_h',
  average: 'average_mg_L'
} as const

/** The names of one day's values; shares of time are fractions, for the first window target. */
export const DAY_NAMES = {
  auc: 'auc_mg_h_L',
  timeInWindow: 'timeInWindow',
  timeAbove: 'timeAbove',
  timeBelow: 'timeBelow'
} as const

/** The names of the steady state's values. */
export const STEADY_STATE_NAMES = {
  period: 'period_h',
  auc: 'auc_mg_h_L',
  auc24: 'auc24_mg_h_L',
  peak: 'peak_mg_L',
  peakTime: 'peakTime_h',
  trough: 'trough_mg_L',
  minimum: 'minimum_mg_L',
  average: 'average_mg_L',
  fluctuation: 'fluctuation',
  swing: 'swing',
  accumulationRatio: 'accumulationRatio',
  peakRatio: 'peakRatio',
  troughRatio: 'troughRatio',
  effectiveHalfLife: 'effectiveHalfLife_h',
  operationalHalfLife: 'operationalHalfLife_h',
  reached90: 'reached90_h',
  reached90ByTrough: 'reached90ByTrough_h',
  reached90OfChange: 'reached90OfChange_h',
  reached90ByLevel: 'reached90ByLevel_h',
  timeInWindow: 'timeInWindow',
  timeAbove: 'timeAbove',
  timeBelow: 'timeBelow'
} as const

/** The names of what holds for the regimen as a whole. */
export const REGIMEN_NAMES = {
  timeInWindow: 'timeInWindow',
  timeAbove: 'timeAbove',
  timeBelow: 'timeBelow',
  timeToReach: 'timeToReach_h',
  timeToLeave: 'timeToLeave_h',
  aucLast24: 'aucLast24_mg_h_L',
  aucNext24: 'aucNext24_mg_h_L'
} as const

/** These and what is a group of its own. */
const WHOLE_NAMES = {
  ...REGIMEN_NAMES,
  highestRunningAuc24: 'highestRunningAuc24',
  nonlinear: 'nonlinear'
} as const

const LINEAR = 'the model is linear: doses add up and nothing saturates'

/** `exposure --json`: per regimen its intervals, days, steady state and targets, with a reason for every `null`. */
export function exposureDocument(result: StudyResult): object {
  const views = nonlinearViews(result)
  return {
    regimens: result.regimens.map((regimen, i) => regimenDocument(regimen, nonlinearDocument(views[i])))
  }
}

function regimenDocument(regimen: RegimenResult, nonlinear: object | undefined): object {
  const { exposure } = regimen
  const whole = {
    ...exposure,
    highestRunningAuc24: runningDocument(exposure),
    nonlinear,
    why: { ...exposure.why, ...(nonlinear === undefined && { nonlinear: LINEAR }) }
  }
  return {
    name: regimen.name,
    intervals: exposure.intervals.map((interval) => ({
      start_h: interval.start,
      end_h: interval.end,
      incomplete: interval.incomplete,
      ...withReasons(interval, INTERVAL_NAMES)
    })),
    days: exposure.days.map((day) => ({ day: day.day, ...withReasons(day, DAY_NAMES) })),
    steadyState: withReasons(exposure.steadyState, STEADY_STATE_NAMES),
    ...withReasons(whole, WHOLE_NAMES),
    targets: exposure.targets.map(targetDocument),
    overLimits: regimen.overLimits,
    notes: regimen.notes
  }
}

function runningDocument({ highestRunningAuc24: running }: RegimenExposure): object | undefined {
  return running === undefined ? undefined : { auc_mg_h_L: running.auc, from_h: running.from }
}

function targetDocument(result: TargetResult): object {
  return {
    index: result.index,
    kind: result.target.kind,
    when: whenWord(result.target.when),
    met: result.met ?? null,
    value: result.value ?? null,
    unit: result.unit,
    worstFrom_h: result.worstFrom ?? null,
    ...(result.why === undefined ? {} : { why: { value: result.why } })
  }
}

/** The word of the study file: `steady-state`, `day-1`. */
export function whenWord(when: When): string {
  return when.kind === 'day' ? `day-${when.day}` : when.kind
}
