import type { NextStep, NonlinearView } from '../pk/nonlinearView'
import type { SteadyPoint } from '../pk/steadyScan'
import { withReasons } from './undefinedValues'

/** The nonlinear view of one regimen as it stands in `exposure --json`; undefined for a linear model. */
export function nonlinearDocument(view: NonlinearView | string | undefined): object | undefined {
  if (view === undefined) return undefined
  if (typeof view === 'string') return { why: { nonlinear: view } }
  const { why } = view
  return {
    doseRate_mg_h: view.doseRate,
    ...withReasons(
      {
        capacity: view.capacity?.rate,
        slope: view.slope,
        reached90OfChange: view.reached90OfChange,
        current: view.current === undefined ? undefined : pointDocument(view.current),
        at80: view.at80 === undefined ? undefined : pointDocument(view.at80),
        nextStep: view.nextStep === undefined ? undefined : stepDocument(view.nextStep),
        why
      },
      {
        capacity: 'capacity_mg_h',
        slope: 'slope_mg_L_per_mg_h',
        reached90OfChange: 'reached90OfChange_h',
        current: 'current',
        at80: 'at80percentOfCapacity',
        nextStep: 'largestNextStep'
      }
    ),
    curve: view.curve.map(pointDocument),
    instantaneousHalfLives: view.halfLives.map(({ of, level, amount, elimination, halfLife }) => ({
      at: of,
      level_mg_L: level,
      amount_mg: amount,
      elimination_mg_h: elimination,
      halfLife_h: halfLife
    }))
  }
}

function pointDocument(point: SteadyPoint): object {
  return {
    factor: point.factor,
    doseRate_mg_h: point.doseRate,
    average_mg_L: point.average,
    peak_mg_L: point.peak,
    minimum_mg_L: point.minimum
  }
}

function stepDocument(step: NextStep): object {
  const lower = step.atLowerMaximum
  return {
    ...pointDocument(step),
    rise_mg_h: step.rise,
    at15percentLowerMaximum: typeof lower === 'string' ? null : pointDocument(lower),
    ...withReasons(step, { reached90: 'reached90_h' }),
    ...(typeof lower === 'string' && { why: { ...step.why, at15percentLowerMaximum: lower } })
  }
}
