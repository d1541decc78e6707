import { describe, expect, test } from 'vitest'
import { Flux } from '../../src/pk/flux'
import { bound, free } from '../../src/pk/fluxEquilibrium'
import { saturableRate, saturableSlope } from '../../src/pk/fluxSaturable'
import type { Model } from '../../src/pk/model'
import { expectWithin } from '../expectWithin'
import { Random } from '../laws/random'
import { randomModel } from '../laws/randomModel'
import { mixed, saturable, targetMediated } from './nonlinearModels'

/** Jacobian by central differences, to about 1e-9 of the largest rates. */
function differences(flux: Flux, state: Float64Array): number[] {
  const n = flux.size
  const out = new Array<number>(n * n)
  const [above, below] = [new Float64Array(n), new Float64Array(n)]
  for (let j = 0; j < n; j++) {
    const step = 1e-5 * Math.max(1e-3, Math.abs(state[j]))
    const moved = Float64Array.from(state)
    moved[j] = state[j] + step
    flux.derivativeInto(moved, above)
    moved[j] = state[j] - step
    flux.derivativeInto(moved, below)
    for (let i = 0; i < n; i++) out[i * n + j] = (above[i] - below[i]) / (2 * step)
  }
  return out
}

const models: readonly (readonly [string, Model])[] = [
  ['saturable', saturable({ volume: 49, maximumRate: 17, halfSaturation: 5.7 })],
  ['saturable with Hill exponent 2.5', saturable({ volume: 49, maximumRate: 17, halfSaturation: 5.7, hill: 2.5 })],
  ['saturable with Hill exponent 0.7', saturable({ volume: 49, maximumRate: 17, halfSaturation: 5.7, hill: 0.7 })],
  ['mixed', mixed()],
  ['full binding', targetMediated({ approximation: 'none', turnover: true })],
  ['quasi-steady-state binding', targetMediated({ approximation: 'quasi-steady-state', turnover: true })],
  ['random linear', randomModel(new Random(3))]
]

describe('the right side and its Jacobian', () => {
  test.each(models)('the analytic Jacobian is the derivative of the right side: %s', (_name, model) => {
    const random = new Random(11)
    const flux = new Flux(model)
    for (let round = 0; round < 20; round++) {
      const state = Float64Array.from({ length: flux.size }, () => random.logBetween(1e-2, 300))
      const jacobian = new Float64Array(flux.size * flux.size)
      flux.jacobianInto(state, jacobian)
      const expected = differences(flux, state)
      for (let p = 0; p < jacobian.length; p++) {
        const row = Math.floor(p / flux.size) * flux.size
        const size = Math.max(...expected.slice(row, row + flux.size).map(Math.abs), 1e-6)
        expectWithin(jacobian[p], expected[p], { absolute: 1e-5 * size }, `entry ${p}`)
      }
    }
  })

  test.each(models)(
    'drug is neither made nor lost: columns of the Jacobian sum to 0 over drug and eliminated: %s',
    (_name, model) => {
      const flux = new Flux(model)
      const n = flux.size
      const random = new Random(5)
      const state = Float64Array.from({ length: n }, () => random.logBetween(1e-2, 300))
      const jacobian = new Float64Array(n * n)
      flux.jacobianInto(state, jacobian)
      const derivative = new Float64Array(n)
      flux.derivativeInto(state, derivative)
      const drug = model.compartments.flatMap(({ holds }, i) => (holds === 'drug' ? [i] : []))
      const places = [...drug, n - 1]
      const sum = (value: (place: number) => number): number => places.reduce((total, place) => total + value(place), 0)
      const size = (value: (place: number) => number): number => sum((place) => Math.abs(value(place)))
      expect(Math.abs(sum((i) => derivative[i]))).toBeLessThanOrEqual(1e-14 * size((i) => derivative[i]))
      for (let j = 0; j < n; j++) {
        const entry = (i: number): number => jacobian[i * n + j]
        expect(Math.abs(sum(entry))).toBeLessThanOrEqual(1e-14 * size(entry))
      }
    }
  )
})

describe('a saturable transfer', () => {
  test('half the maximum at half saturation, whatever the Hill exponent', () => {
    for (const hill of [0.5, 1, 1.7, 4]) expectWithin(saturableRate(30, 12, 30, hill), 6, { relative: 1e-15 })
  })

  test('goes on below zero as its tangent, without a jump of value or slope', () => {
    expect(saturableRate(-60, 12, 30, 1)).toBe(-24)
    expect(saturableSlope(-60, 12, 30, 1)).toBe(0.4)
    expectWithin(saturableSlope(1e-12, 12, 30, 1), 0.4, { relative: 1e-12 })
    expect(saturableRate(-60, 12, 30, 2)).toBe(0)
    expect(saturableSlope(-60, 12, 30, 2)).toBe(0)
  })

  test('stays finite from the smallest amounts to the largest, with steep and flat Hill exponents', () => {
    for (const hill of [0.3, 1, 3, 20]) {
      for (const amount of [-1e3, -1e-300, 0, 1e-300, 1e-20, 1, 1e20, 1e300]) {
        expect(Number.isFinite(saturableRate(amount, 12, 30, hill)), `rate ${hill} ${amount}`).toBe(true)
        expect(Number.isFinite(saturableSlope(amount, 12, 30, hill)), `slope ${hill} ${amount}`).toBe(true)
      }
    }
  })
})

describe('binding at equilibrium', () => {
  test('free x free = constant x bound and free + bound = total, over ten orders of magnitude', () => {
    const random = new Random(8)
    for (let round = 0; round < 200; round++) {
      const drug = random.logBetween(1e-5, 1e5)
      const target = random.logBetween(1e-5, 1e5)
      const constant = random.logBetween(1e-5, 1e5)
      const complex = bound(drug, target, constant)
      const [freeDrug, freeTarget] = [free(drug, target, constant), free(target, drug, constant)]
      expectWithin(freeDrug * freeTarget, constant * complex, { relative: 1e-13 }, 'equilibrium')
      expectWithin(freeDrug + complex, drug, { relative: 1e-14 }, 'drug')
      expectWithin(freeTarget + complex, target, { relative: 1e-14 }, 'target')
    }
  })

  test('two approximated bindings that share a compartment are refused', () => {
    const model = targetMediated({ approximation: 'quasi-steady-state', turnover: true })
    const twice = { ...model, transfers: [...model.transfers, model.transfers[model.transfers.length - 1]] }
    expect(() => new Flux(twice)).toThrow('compartment "drug" takes part in two approximated bindings')
  })
})
