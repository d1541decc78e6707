import { describe, expect, test } from 'vitest'
import { areaBetween, extremes, valueAt } from '../../src/pk/curve'
import { integrate, stateAfter } from '../../src/pk/integrate'
import type { Model } from '../../src/pk/model'
import { OperatorStore } from '../../src/pk/operatorStore'
import { periodicState } from '../../src/pk/periodic'
import { EXACTLY, periodicIntegrated, ROUGHLY } from '../../src/pk/periodicIntegrated'
import { type PeriodicRequest, periodicSegments } from '../../src/pk/periodicSegments'
import type { BodyState } from '../../src/pk/state'
import { constantSolution, periodicSolution } from '../../src/pk/steadySolution'
import type { Signal } from '../../src/pk/trajectory'
import { expectWithin } from '../expectWithin'
import { mixed, repeated, saturable, targetMediated } from './nonlinearModels'
import { oneCompartment } from './subjects'

const observed: Signal = { kind: 'observed' }

/**
 * One compartment, saturable elimination alone, boluses: the integrated Michaelis-Menten equation [Beal 1982, J.
 * Pharmacokinet. Biopharm. 10:109, from memory] over one period, with what is lost equal to the dose.
 */
function closedForm(given: { volume: number; maximumRate: number; half: number; dose: number; period: number }): {
  trough: number
  peak: number
  average: number
  carriedOver: number
} {
  const { volume, maximumRate, half, dose, period } = given
  const rise = dose / volume
  const trough = rise / Math.expm1((maximumRate * period - dose) / (volume * half))
  const peak = trough + rise
  const area = (volume / maximumRate) * rise * (half + (peak + trough) / 2)
  return { trough, peak, average: area / period, carriedOver: (trough * (half + peak)) / (peak * (half + trough)) }
}

describe('the periodic state of one saturable path under boluses', () => {
  const volume = 49
  const maximumRate = 415 / 24
  const half = 5.7
  const model = saturable({ volume, maximumRate, halfSaturation: half })

  test.each([10, 100, 200, 300, 350, 400, 410, 414, 414.9])('%s mg a day: the closed form', (dose) => {
    const { trough, peak, average, carriedOver } = closedForm({ volume, maximumRate, half, dose, period: 24 })
    const segments = repeated(model, { into: 0, amount: dose, every: 24, count: 1 })
    const solution = periodicSolution(segments, new OperatorStore())
    if (solution.kind === 'none') throw new Error(solution.why)
    const tolerance = { relative: 3e-9 / (1 - carriedOver) }
    expectWithin(solution.state.amounts[0] / volume, trough, tolerance)
    const found = extremes(solution.course, observed, 0, 24)
    expectWithin(found.peak, peak, tolerance)
    expectWithin(found.minimum, trough, tolerance)
    expectWithin(areaBetween(solution.course, observed, 0, 24) / 24, average, tolerance)
    expect(solution.convergence?.change).toBeLessThan(1e-6)
    expect(solution.convergence?.periods).toBeLessThan(40)
    const rough = periodicIntegrated(segments, ROUGHLY)
    expectWithin(rough.state.amounts[0] / volume, trough, { relative: 3e-5 / (1 - carriedOver) })
  })

  test('an endless infusion alone: K26, 300 mg/d', () => {
    const solution = constantSolution(model, [300 / 24], 24, new OperatorStore())
    if (solution.kind === 'none') throw new Error(solution.why)
    expectWithin(valueAt(solution.course, observed, 0, 'after'), 14.8695652174, { relative: 1e-11 })
    expectWithin(valueAt(solution.course, observed, 24, 'before'), 14.8695652174, { relative: 1e-10 })
  })
})

const cases: readonly (readonly [string, PeriodicRequest])[] = [
  ['mixed elimination, oral', period(mixed(), 12, [{ kind: 'bolus', start: 1, into: 0, amount: 150 }])],
  ['with a Hill exponent', period(mixed(2.5), 24, [{ kind: 'bolus', start: 0, into: 1, amount: 400 }])],
  [
    'an infusion that runs over the end of the period, beside one without end',
    {
      ...period(mixed(), 8, [{ kind: 'infusion', start: 5, into: 1, amount: 60, duration: 11 }]),
      endless: [0, 3, 0]
    }
  ],
  [
    'sessions that recur',
    {
      ...period(mixed(), 48, [{ kind: 'bolus', start: 0, into: 0, amount: 300 }]),
      sessions: [{ start: 40, duration: 4, clearance: 9 }]
    }
  ],
  [
    'full binding with turnover',
    period(targetMediated({ approximation: 'none', turnover: true }), 336, [
      { kind: 'bolus', start: 0, into: 0, amount: 20 }
    ])
  ],
  [
    'binding in its approximation',
    period(targetMediated({ approximation: 'quasi-steady-state', turnover: true }), 336, [
      { kind: 'infusion', start: 0, into: 0, amount: 20, duration: 2 }
    ])
  ]
]

function period(model: Model, length: number, doses: PeriodicRequest['doses']): PeriodicRequest {
  return { model, period: length, doses, sessions: [] }
}

describe('the periodic state of other models', () => {
  test.each(cases)('%s: comes back after a period, and is where a long integration leads', (_, request) => {
    const segments = periodicSegments(request)
    const { state } = periodicIntegrated(segments, EXACTLY)
    const { model } = request
    const all = Array.from(state.amounts).reduce((sum, amount) => sum + amount, 0)
    const after = stateAfter(segments, state, { relative: 1e-12, floor: 1e-6 })
    const target = model.compartments.findIndex(({ holds }) => holds === 'target')
    let long: BodyState = {
      amounts: model.compartments.map((_, i) => (i === target ? 3 : 0)),
      effectSites: model.effectSites.map(() => 0)
    }
    for (let k = 0; k < 150; k++) long = stateAfter(segments, long, { relative: 1e-10, floor: 1e-6 })
    model.compartments.forEach(({ name }, i) => {
      expectWithin(after.amounts[i], state.amounts[i], { absolute: 1e-9 * (state.amounts[i] + 1e-4 * all) }, name)
      expectWithin(long.amounts[i], state.amounts[i], { absolute: 1e-7 * (state.amounts[i] + 1e-4 * all) }, name)
    })
    model.effectSites.forEach(({ name }, i) => {
      expectWithin(after.effectSites[i], state.effectSites[i], { relative: 1e-8 }, name)
      expectWithin(long.effectSites[i], state.effectSites[i], { relative: 1e-7 }, name)
    })
  })

  test.each(cases)('%s: what leaves in a period is what enters', (_, request) => {
    const segments = periodicSegments(request)
    const { state } = periodicIntegrated(segments, EXACTLY)
    const course = integrate(segments, state)
    const left = course.pieces.reduce((sum, piece) => sum + piece.eliminated(piece.segment.duration), 0)
    const entered = segments.reduce(
      (sum, { boluses, inputs, duration }) =>
        sum + request.model.compartments.reduce((all, _, i) => all + boluses[i] + inputs[i] * duration, 0),
      0
    )
    expectWithin(left, entered, { relative: 1e-7 })
  })

  test('far below half saturation is that of the linear model', () => {
    const linear = oneCompartment({ volume: 30, k: 0.2 })
    const limit = saturable({ volume: 30, maximumRate: 0.2 * 30 * 1e12, halfSaturation: 1e12 })
    const given = { into: 0, amount: 100, every: 6, count: 1 }
    const exact = periodicState(repeated(linear, given)).amounts[0]
    expectWithin(periodicIntegrated(repeated(limit, given), EXACTLY).state.amounts[0], exact, { relative: 3e-9 })
  })

  test('from any guess the same state', () => {
    const segments = periodicSegments(cases[0][1])
    const { state } = periodicIntegrated(segments, EXACTLY)
    for (const guess of [
      [0, 0, 0],
      [1, 1, 1],
      [1e4, 1e5, 1e5]
    ]) {
      const other = periodicIntegrated(segments, EXACTLY, guess).state
      for (let i = 1; i < 3; i++) expectWithin(other.amounts[i], state.amounts[i], { relative: 1e-8 })
    }
  })
})

describe('where there is none', () => {
  test('says so in words: the capacity, or drug that never leaves', () => {
    const model = saturable({ volume: 49, maximumRate: 415 / 24, halfSaturation: 5.7 })
    const above = repeated(model, { into: 0, amount: 215, every: 12, count: 1 })
    expect(periodicSolution(above, new OperatorStore())).toEqual({
      kind: 'none',
      why: 'no steady state: the dose rate 430 mg/d is above the capacity 415 mg/d'
    })
    expect(constantSolution(model, [430 / 24], 24, new OperatorStore())).toEqual({
      kind: 'none',
      why: 'no steady state: the dose rate 430 mg/d is above the capacity 415 mg/d'
    })
  })

  test('an iteration that does not converge stops with its name', () => {
    const model = saturable({ volume: 49, maximumRate: 415 / 24, halfSaturation: 5.7 })
    const above = repeated(model, { into: 0, amount: 430, every: 24, count: 1 })
    expect(() => periodicIntegrated(above, EXACTLY)).toThrow(/the periodic state was not found in \d+ corrections/)
  })
})
