import { describe, expect, test } from 'vitest'
import { balanceAtLevel } from '../../src/pk/instantaneousHalfLife'
import type { Model } from '../../src/pk/model'
import { stationaryState } from '../../src/pk/stationary'
import { expectWithin } from '../expectWithin'
import { mixed, saturable, targetMediated } from './nonlinearModels'
import { mammillary, oneCompartment } from './subjects'

function balance(model: Model, level: number): { amount: number; elimination: number; halfLife: number } {
  const found = balanceAtLevel(model, level)
  if (typeof found === 'string') throw new Error(found)
  return found
}

describe('instantaneous half-life', () => {
  test('of a linear model is the same at every level: ln 2 / k, ln 2 x Vss / CL', () => {
    for (const level of [0.01, 1, 100]) {
      expectWithin(balance(oneCompartment({ volume: 20, k: 0.1, ka: 2 }), level).halfLife, Math.LN2 / 0.1, {
        relative: 1e-12
      })
      const model = mammillary({ volumes: [12, 30], clearance: 4, exchanges: [9] })
      expectWithin(balance(model, level).halfLife, (Math.LN2 * 42) / 4, { relative: 1e-12 })
    }
  })

  test.each([0.1, 5.7, 20, 300])('of one saturable path is ln 2 (Km + C) V / Vmax, at %s mg/L', (level) => {
    const model = saturable({ volume: 49, maximumRate: 17, halfSaturation: 5.7 })
    expectWithin(balance(model, level).halfLife, (Math.LN2 * (5.7 + level) * 49) / 17, { relative: 1e-12 })
  })

  test('counts what the peripheral compartment holds in equilibrium', () => {
    // By hand: 0.6 x 20 C = 0.25 x peripheral; out 0.02 x 20 C + 18 C / (2.5 + C).
    const { amount, elimination } = balance(mixed(), 4)
    expectWithin(amount, 80 + (0.6 * 80) / 0.25, { relative: 1e-12 })
    expectWithin(elimination, 1.6 + (18 * 4) / 6.5, { relative: 1e-12 })
  })

  test.each(['none', 'quasi-steady-state'] as const)('counts bound drug, binding %s', (approximation) => {
    const model = targetMediated({ approximation, turnover: true })
    // By hand, per amounts: on = 10 / 3; target: 0.06 = 0.02 T + net; net = on D T - 0.5 P = 0.005 P. Kss the same in both.
    const drug = 6
    const bindingPerTarget = ((10 / 3) * drug * 0.005) / 0.505
    const target = 0.06 / (0.02 + bindingPerTarget)
    const complex = (bindingPerTarget * target) / 0.005
    const { amount, elimination } = balance(model, drug / 3)
    expectWithin(amount, drug + (0.007 / 0.01) * drug + complex, { relative: 1e-11 })
    expectWithin(elimination, 0.003 * drug + 0.005 * complex, { relative: 1e-11 })
  })

  test('is none where drug at that level never leaves', () => {
    const model = { ...oneCompartment({ volume: 20, k: 0.1 }), transfers: [] }
    expect(balanceAtLevel(model, 1)).toBe('no steady state: drug that enters compartment "central" never leaves')
  })

  test('is asked for a level above 0', () => expect(() => balanceAtLevel(mixed(), 0)).toThrow(RangeError))
})

// Published equation Css = Km R / (Vmax - R), and its inverse; K25: Bauer & Blouin 1983 (paediatric maximum rate and half
// saturation by age, abstract); K26: Grasela, Sheiner et al. 1983, Clin. Pharmacokinet. 8:355 (abstract). Expected numbers
// recomputed with independent code.
describe('the constant state', () => {
  const phenytoin = saturable({ volume: 49, maximumRate: 415, halfSaturation: 5.7 })

  test.each([
    [200, 5.3023255814],
    [250, 8.63636363636],
    [300, 14.8695652174],
    [350, 30.6923076923],
    [400, 152.0]
  ])('K26: %s mg/d leads to %s mg/L', (rate, level) => {
    expectWithin(stationaryState(phenytoin, [rate]).amounts[0] / 49, level, { relative: 1e-11 })
  })

  test.each([
    [10, 264.331210191],
    [15, 300.724637681],
    [20, 322.957198444]
  ])('K26: %s mg/L is held by %s mg/d', (level, rate) => {
    expectWithin(balance(phenytoin, level).elimination, rate, { relative: 1e-11 })
  })

  test.each([
    [10.93, 6.82, 7.51374885426],
    [10.05, 6.51, 7.00836820084]
  ])('K25: %s mg/kg/d and %s mg/L: 15 mg/L is held by %s mg/kg/d', (maximumRate, halfSaturation, rate) => {
    const model = saturable({ volume: 0.7, maximumRate, halfSaturation })
    expectWithin(balance(model, 15).elimination, rate, { relative: 1e-11 })
  })

  test('keeps its digits up to capacity', () => {
    for (const left of [1e-2, 1e-4, 1e-6, 1e-8]) {
      const rate = 415 * (1 - left)
      // Rounding of the rates alone moves the answer by 1e-16 / left.
      const tolerance = { relative: 1e-14 + 4e-16 / left }
      expectWithin(stationaryState(phenytoin, [rate]).amounts[0] / 49, (5.7 * rate) / (415 - rate), tolerance)
    }
  })

  test.each([0.5, 1, 2, 4])('with a Hill exponent of %s', (hill) => {
    const model = saturable({ volume: 49, maximumRate: 415, halfSaturation: 5.7, hill })
    for (const rate of [1, 100, 300, 410]) {
      const level = 5.7 * (rate / (415 - rate)) ** (1 / hill)
      expectWithin(stationaryState(model, [rate]).amounts[0] / 49, level, { relative: 1e-12 }, `${rate} mg/d`)
    }
  })
})
