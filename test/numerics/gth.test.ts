import { expect, test } from 'vitest'
import { areaToInfinity, followedBy, steadyState } from '../../src/numerics/gth'
import { operatorFor } from '../../src/numerics/linearOperators'
import { NumericalFailure } from '../../src/numerics/numericalFailure'
import { advanceAmountsInto } from '../../src/numerics/operator'
import { reachedFrom } from '../../src/numerics/rates'
import { expectWithin } from '../expectWithin'
import { compartments } from './compartments'
import { ratesOf, referenceModels } from './referenceModels'

/** Depot 0, central 1, peripheral 2. */
const oral = compartments(
  3,
  [
    [0, 1, 0.9],
    [1, 2, 0.5],
    [2, 1, 0.2]
  ],
  [[1, 0.1]]
)

function failureOf(run: () => unknown): NumericalFailure {
  try {
    run()
  } catch (failure) {
    if (failure instanceof NumericalFailure) return failure
    throw failure
  }
  throw new Error('did not fail')
}

test('the area to infinity is the dose over the clearance, wherever the dose goes in', () => {
  // Amount-time in the central compartment: dose / elimination rate.
  for (const load of [
    [250, 0, 0],
    [0, 250, 0],
    [0, 0, 250]
  ]) {
    expectWithin(areaToInfinity(oral, load)[1], 250 / 0.1, { relative: 1e-15 })
  }
})

test('steady state is what 4,000 explicit periods come to', () => {
  const operator = operatorFor(oral, [], [1], 12)
  const dose = [400, 0, 30]
  const load = new Float64Array(3)
  advanceAmountsInto(operator, dose, [3], load)
  const steady = steadyState(operator, load, [true, true, true])
  let now = new Float64Array(3)
  for (let period = 0; period < 4000; period++) {
    const next = new Float64Array(3)
    advanceAmountsInto(
      operator,
      now.map((amount, i) => amount + dose[i]),
      [3],
      next
    )
    now = next
  }
  for (const i of [0, 1, 2]) expectWithin(steady[i], now[i], { relative: 1e-14 }, `compartment ${i}`)
})

test('compartments that the input does not reach hold nothing and do not enter', () => {
  const operator = operatorFor(oral, [], [], 12)
  const load = [0, operator.transition[4], operator.transition[7]]
  const steady = steadyState(operator, load, reachedFrom(oral, [0, 1, 0]))
  expect(steady[0]).toBe(0)
  // A trap that nothing goes into does no harm.
  const apart = compartments(3, [[0, 1, 0.4]], [[1, 0.2]])
  expect([...areaToInfinity(apart, [1, 0, 0])]).toEqual([2.5, 5, 0])
})

test('drug that can never leave is a failure that names a compartment of the trap', () => {
  const trap = compartments(
    4,
    [
      [0, 1, 0.9],
      [1, 2, 0.1],
      [2, 3, 1],
      [3, 2, 1]
    ],
    [[1, 0.2]]
  )
  const area = failureOf(() => areaToInfinity(trap, [1, 0, 0, 0]))
  expect(area.code).toBe('no-way-out')
  expect(area.compartment).toBe(2)
  expect(area.message).toContain('compartment 2')
  const period = operatorFor(trap, [], [], 24)
  const load = [0.1, 0.2, 0.1, 0.1]
  expect(failureOf(() => steadyState(period, load, [true, true, true, true])).code).toBe('no-way-out')
})

test('a period in parts is the period as a whole, in every entry', () => {
  for (const model of referenceModels) {
    const rates = ratesOf(model)
    const duration = model.operators[2].duration
    const whole = operatorFor(rates, [], [], duration)
    const first = operatorFor(rates, [], [], 0.375 * duration)
    const rest = operatorFor(rates, [], [], 0.625 * duration)
    const parts = followedBy(first, rest)
    for (let p = 0; p < whole.transition.length; p++) {
      if (whole.transition[p] < 1e-290) continue
      const allowed = 4 * 2.220446049250313e-16 * (30 + Math.abs(Math.log(whole.transition[p])))
      expectWithin(parts.transition[p], whole.transition[p], { relative: allowed }, `${model.name}, entry ${p}`)
    }
    for (let j = 0; j < model.size; j++)
      expectWithin(parts.sink[j], whole.sink[j], { relative: 2e-14 }, `${model.name}, sink ${j}`)
  }
})

test('sizes that do not fit are refused', () => {
  expect(() => areaToInfinity(oral, [1, 0])).toThrow(RangeError)
  expect(() => steadyState(operatorFor(oral, [], [], 1), [1, 0, 0], [true])).toThrow(RangeError)
  const other = operatorFor(compartments(1, [], [[0, 1]]), [], [], 1)
  expect(() => followedBy(operatorFor(oral, [], [], 1), other)).toThrow(RangeError)
})
