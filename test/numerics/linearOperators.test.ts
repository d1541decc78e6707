import { expect, test } from 'vitest'
import { areaToInfinity, steadyState } from '../../src/numerics/gth'
import { LinearOperators, operatorFor } from '../../src/numerics/linearOperators'
import { NumericalFailure } from '../../src/numerics/numericalFailure'
import { advanceInto, eliminatedOver } from '../../src/numerics/operator'
import { outflow, reachedFrom } from '../../src/numerics/rates'
import { planInto } from '../../src/numerics/taylorPlan'
import type { ReadonlyVector } from '../../src/numerics/vector'
import { functionalsOf, type ReferenceModel, type ReferenceOperator, ratesOf, referenceModels } from './referenceModels'

const U = 2.220446049250313e-16

/** Number of doublings that the engine takes over this duration. */
function doublings(model: ReferenceModel, duration: number): number {
  const rates = ratesOf(model)
  const functionals = functionalsOf(model)
  const sigma = Math.max(
    ...Array.from({ length: model.size }, (_, j) => outflow(rates, j)),
    ...functionals.map(({ decay }) => decay)
  )
  const plan = { degree: 0, stride: 0, squarings: 0 }
  planInto(sigma * duration, model.size, plan)
  return plan.squarings
}

/**
 * Largest error as a share of 4 u (s + 12 + |ln entry|) relative, the entry scaled by `scale` to a pure number. A
 * reference of 0 stands for less than 1e-290: there the value need only be that small, and not negative.
 */
function worst(got: ReadonlyVector, expected: ReadonlyVector, s: number, scale: (index: number) => number): number {
  expect(got.length).toBe(expected.length)
  let largest = 0
  for (let p = 0; p < expected.length; p++) {
    if (expected[p] === 0) {
      if (!(got[p] >= 0 && got[p] <= 1.1e-290)) return Number.POSITIVE_INFINITY
      continue
    }
    const allowed = 4 * U * (s + 12 + Math.abs(Math.log(expected[p] * scale(p))))
    const share = Math.abs(got[p] - expected[p]) / expected[p] / allowed
    if (!(share <= largest)) largest = share
  }
  return largest
}

function shares(model: ReferenceModel, reference: ReferenceOperator): Record<string, number> {
  const { duration: t } = reference
  const rates = ratesOf(model)
  const operator = operatorFor(rates, functionalsOf(model), model.inputs, t)
  const s = doublings(model, t)
  const m = model.inputs.length
  const { volume } = model
  // Areas in units of t / V and t^2 / V, effect sites in units of 1 / V and t / V.
  const ofRow = (r: number) => (r === 0 ? volume / t : volume)
  const found: Record<string, number> = {
    transition: worst(operator.transition, reference.transition, s, () => 1),
    sink: worst(operator.sink, reference.sink, s, () => 1),
    response: worst(operator.response, reference.response, s, () => 1 / t),
    sinkResponse: worst(operator.sinkResponse, reference.sinkResponse, s, () => 1 / t),
    rows: worst(operator.rows, reference.rows, s, (p) => ofRow(Math.floor(p / model.size))),
    direct: worst(operator.direct, reference.direct, s, (p) => ofRow(Math.floor(p / m)) / t)
  }
  const input = model.inputs[0]
  if (reference.steadyAfterBolus && reference.steadyInfusion) {
    const unit = Array.from({ length: model.size }, (_, i) => (i === input ? 1 : 0))
    const reached = reachedFrom(rates, unit)
    const afterBolus = unit.map((_, i) => operator.transition[i * model.size + input])
    const infused = unit.map((_, i) => operator.response[i * m])
    found.steadyAfterBolus = worst(steadyState(operator, afterBolus, reached), reference.steadyAfterBolus, s, () => 1)
    found.steadyInfusion = worst(steadyState(operator, infused, reached), reference.steadyInfusion, s, () => 1 / t)
  }
  return found
}

for (const model of referenceModels) {
  test(`every entry is within 4 u (s + 12 + |ln entry|) of 500 digits: ${model.name}`, () => {
    for (const reference of model.operators) {
      for (const [part, share] of Object.entries(shares(model, reference))) {
        expect(share, `${part} over ${reference.duration}: error as a share of the bound`).toBeLessThanOrEqual(1)
      }
    }
  })
}

for (const model of referenceModels) {
  const { areaToInfinity: expected } = model
  if (!expected) continue
  test(`area to infinity is within 4 u (12 + |ln entry|) of 450 digits: ${model.name}`, () => {
    const unit = Array.from({ length: model.size }, (_, i) => (i === model.inputs[0] ? 1 : 0))
    const fastest = Math.max(...Array.from({ length: model.size }, (_, j) => outflow(ratesOf(model), j)))
    expect(worst(areaToInfinity(ratesOf(model), unit), expected, 0, () => fastest)).toBeLessThanOrEqual(1)
  })
}

test('the bound is one that can be missed: without mass balance the error of a stiff model passes it', () => {
  // Plain repeated squaring of the same short step, as a reader would first write it.
  const model = referenceModels.find(({ name }) => name === 'exchange 10^8 times as fast as elimination')
  const reference = model?.operators.at(-1)
  if (!model || !reference) throw new Error('reference model missing')
  const s = doublings(model, reference.duration)
  const n = model.size
  let x = [...operatorFor(ratesOf(model), [], [], reference.duration / 2 ** s).transition]
  for (let k = 0; k < s; k++) {
    x = x.map((_, p) => {
      let sum = 0
      for (let j = 0; j < n; j++) sum += x[Math.floor(p / n) * n + j] * x[j * n + (p % n)]
      return sum
    })
  }
  expect(worst(x, reference.transition, s, () => 1)).toBeGreaterThan(1)
})

test('no time at all changes nothing', () => {
  const model = referenceModels[4]
  const operator = operatorFor(ratesOf(model), functionalsOf(model), model.inputs, 0)
  expect([...operator.transition]).toEqual([1, 0, 0, 0, 1, 0, 0, 0, 1])
  expect([...operator.decays]).toEqual([1, 1])
  for (const part of [operator.sink, operator.response, operator.sinkResponse, operator.rows, operator.direct]) {
    expect([...part].every((value) => value === 0)).toBe(true)
  }
})

test('a compartment without any rate keeps its amount, and its input and area grow with time', () => {
  const operator = operatorFor({ size: 1, between: [0], out: [0] }, [{ weights: [0.5], decay: 0 }], [0], 3)
  expect([...operator.transition, ...operator.sink, ...operator.response]).toEqual([1, 0, 3])
  expect([...operator.rows, ...operator.direct]).toEqual([1.5, 2.25])
})

test('advancing sums what the operator says: amounts, functionals, eliminated', () => {
  const rates = { size: 2, between: [0, 0, 0.9, 0], out: [0, 0.1] }
  const functionals = [
    { weights: [0, 0.05], decay: 0 },
    { weights: [0, 0.02], decay: 0.4 }
  ]
  const operator = operatorFor(rates, functionals, [1], 5)
  const amounts = new Float64Array(2)
  const values = new Float64Array(2)
  advanceInto(operator, [100, 20], [3, 0.7], [6], amounts, values)
  const { transition: x, response, rows, direct, decays } = operator
  expect(amounts[1]).toBeCloseTo(x[2] * 100 + x[3] * 20 + response[1] * 6, 12)
  expect(values[1]).toBeCloseTo(decays[1] * 0.7 + rows[2] * 100 + rows[3] * 20 + direct[1] * 6, 12)
  expect(amounts[0] + amounts[1] + eliminatedOver(operator, [100, 20], [6])).toBeCloseTo(120 + 30, 11)
})

test('operators can go over to other rates of the same size, and then give what fresh ones give', () => {
  const [first, second] = [referenceModels[4], referenceModels[5]]
  const operators = new LinearOperators(ratesOf(first), functionalsOf(first), [0])
  operators.into(7, operators.create())
  operators.use(ratesOf(second), functionalsOf(second))
  const operator = operators.create()
  operators.into(7, operator)
  expect(operator).toEqual(operatorFor(ratesOf(second), functionalsOf(second), [0], 7))
})

test('misuse and results out of range are refused by name', () => {
  const rates = { size: 2, between: [0, 0, 0.9, 0], out: [0, 0.1] }
  const operators = new LinearOperators(rates, [], [0])
  const operator = operators.create()
  expect(() => operators.into(-1, operator)).toThrow(RangeError)
  expect(() => operators.into(Number.NaN, operator)).toThrow(RangeError)
  expect(() => operators.into(1e279, operator)).not.toThrow()
  expect(() => operators.into(1e290, operator)).toThrow(NumericalFailure)
  expect(() => operatorFor({ ...rates, out: [0, -0.1] }, [], [], 1)).toThrow('rate out of compartment 1 is -0.1')
  expect(() => operatorFor({ ...rates, between: [0, Number.NaN, 0.9, 0] }, [], [], 1)).toThrow(RangeError)
  expect(() => operatorFor({ ...rates, between: [0.1, 0, 0.9, 0] }, [], [], 1)).toThrow('to itself')
  expect(() => operatorFor({ ...rates, out: [0] }, [], [], 1)).toThrow(RangeError)
  expect(() => operatorFor(rates, [], [2], 1)).toThrow('no compartment 2')
  expect(() => operatorFor(rates, [{ weights: [1], decay: 0 }], [], 1)).toThrow(RangeError)
  expect(() => operatorFor(rates, [{ weights: [1, 1], decay: -1 }], [], 1)).toThrow(RangeError)
  expect(() => operators.use({ size: 1, between: [0], out: [1] }, [])).toThrow(RangeError)
  expect(() => operators.use(rates, [{ weights: [1, 1], decay: 0 }])).toThrow(RangeError)
})
