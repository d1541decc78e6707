import { describe, expect, test } from 'vitest'
import { NumericalFailure } from '../../src/numerics/numericalFailure'
import type { Dose } from '../../src/pk/dose'
import type { Model } from '../../src/pk/model'
import { constantState, periodicState } from '../../src/pk/periodic'
import { periodicSegments } from '../../src/pk/periodicSegments'
import { finalState, propagate } from '../../src/pk/propagate'
import type { Session } from '../../src/pk/sessions'
import { type BodyState, emptyState } from '../../src/pk/state'
import { timeline } from '../../src/pk/timeline'
import { expectWithin } from '../expectWithin'
import { mammillary, oneCompartment } from './subjects'

const model = mammillary({ volumes: [12, 30], clearance: 4, exchanges: [9], ke0: 0.4 })
const period = 6

/** The state at the end of many explicit periods from an empty body, with everything given again in each. */
function explicit(doses: readonly Dose[], sessions: readonly Session[], periods: number): BodyState {
  const starts = Array.from({ length: periods }, (_, k) => k * period)
  return finalState(
    propagate(
      timeline({
        doses: starts.flatMap((start) => doses.map((dose) => ({ ...dose, start: dose.start + start }))),
        models: [{ from: 0, model }],
        sessions: starts.flatMap((start) => sessions.map((session) => ({ ...session, start: session.start + start }))),
        until: periods * period
      }),
      emptyState(model)
    )
  )
}

function expectSameState(actual: BodyState, expected: BodyState, relative: number): void {
  for (let i = 0; i < expected.amounts.length; i++) {
    expectWithin(actual.amounts[i], expected.amounts[i], { relative }, `amount ${i}`)
  }
  for (let i = 0; i < expected.effectSites.length; i++) {
    expectWithin(actual.effectSites[i], expected.effectSites[i], { relative }, `effect site ${i}`)
  }
}

describe('periodic state', () => {
  const cases: [string, Dose[], Session[]][] = [
    ['a bolus', [{ kind: 'bolus', start: 1.25, into: 0, amount: 100 }], []],
    ['an infusion within the period', [{ kind: 'infusion', start: 0, into: 0, amount: 100, duration: 1 }], []],
    [
      'an infusion around the end of the period',
      [{ kind: 'infusion', start: 5, into: 0, amount: 100, duration: 3 }],
      []
    ],
    [
      'an infusion of three periods less a bit',
      [{ kind: 'infusion', start: 2.5, into: 0, amount: 100, duration: 17 }],
      []
    ],
    ['an infusion of exactly two periods', [{ kind: 'infusion', start: 2.5, into: 1, amount: 100, duration: 12 }], []],
    ['a lag of more than a period', [{ kind: 'bolus', start: 14.5, into: 0, amount: 100 }], []],
    [
      'boluses, overlapping infusions and a session',
      [
        { kind: 'bolus', start: 0, into: 0, amount: 30 },
        { kind: 'infusion', start: 4.5, into: 1, amount: 100, duration: 10.125 }
      ],
      [{ start: 4, duration: 3.5, clearance: 9 }]
    ],
    [
      'sessions that overlap their own repeats',
      [{ kind: 'bolus', start: 3, into: 0, amount: 30 }],
      [{ start: 4, duration: 8.5, clearance: 2 }]
    ]
  ]
  test.each(cases)('of %s is the state after 400 explicit periods', (_, doses, sessions) => {
    const periodic = periodicState(periodicSegments({ model, period, doses, sessions }))
    expectSameState(periodic, explicit(doses, sessions, 400), 1e-13)
  })

  test('comes back after one period to a few rounding units', () => {
    const doses: Dose[] = [{ kind: 'infusion', start: 4, into: 0, amount: 50, duration: 9 }]
    const segments = periodicSegments({ model, period, doses, sessions: [] })
    const state = periodicState(segments)
    expectSameState(finalState(propagate(segments, state)), state, 2e-15)
  })

  test('of an endless infusion beside boluses is the sum of both', () => {
    const doses: Dose[] = [{ kind: 'bolus', start: 0, into: 0, amount: 30 }]
    const both = periodicState(periodicSegments({ model, period, doses, sessions: [], endless: [7, 0] }))
    const boluses = periodicState(periodicSegments({ model, period, doses, sessions: [] }))
    const constant = constantState(model, [7, 0])
    expectSameState(
      both,
      {
        amounts: [0, 1].map((i) => boluses.amounts[i] + constant.amounts[i]),
        effectSites: [boluses.effectSites[0] + constant.effectSites[0]]
      },
      1e-14
    )
  })

  test('keeps its digits where elimination is 1e10 times slower than the period', () => {
    const slow = oneCompartment({ volume: 1, k: 1e-10 })
    const doses: Dose[] = [{ kind: 'bolus', start: 0, into: 0, amount: 1 }]
    const state = periodicState(periodicSegments({ model: slow, period: 1, doses, sessions: [] }))
    // 1 / (e^x - 1) = 1/x - 1/2 + x/12, x = 1e-10.
    expectWithin(state.amounts[0], 1e10 - 0.5, { relative: 1e-15 })
  })
})

describe('constant state', () => {
  test('has every effect site at its source, and rate / clearance in the observed compartment', () => {
    const { amounts, effectSites } = constantState(model, [8, 0])
    expectWithin(amounts[0] / 12, 8 / 4, { relative: 1e-15 })
    expectWithin(amounts[1] / 30, 2, { relative: 1e-15 })
    expectWithin(effectSites[0], 2, { relative: 1e-15 })
  })
})

describe('drug that never leaves', () => {
  const trap: Model = {
    ...model,
    compartments: [...model.compartments, { name: 'trap', column: 'trap', holds: 'drug' }],
    transfers: [...model.transfers, { kind: 'first-order', from: 1, to: 2, rate: 0.1 }]
  }

  test('has no steady state, and the compartment is named', () => {
    const doses: Dose[] = [{ kind: 'bolus', start: 0, into: 0, amount: 30 }]
    const segments = periodicSegments({ model: trap, period, doses, sessions: [] })
    expect(() => periodicState(segments)).toThrow('compartment "trap" never leaves')
    expect(() => constantState(trap, [1, 0, 0])).toThrow(NumericalFailure)
  })

  test('does not matter where no drug gets', () => {
    const aside: Model = { ...trap, transfers: [...model.transfers] }
    const doses: Dose[] = [{ kind: 'bolus', start: 0, into: 0, amount: 30 }]
    const state = periodicState(periodicSegments({ model: aside, period, doses, sessions: [] }))
    expect(state.amounts[2]).toBe(0)
    expect(state.amounts[0]).toBeGreaterThan(0)
  })
})
