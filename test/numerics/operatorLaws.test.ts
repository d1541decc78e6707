import { expect, test } from 'vitest'
import { areaToInfinity } from '../../src/numerics/gth'
import { operatorFor } from '../../src/numerics/linearOperators'
import type { Functional, Operator } from '../../src/numerics/operator'
import type { Rates } from '../../src/numerics/rates'
import type { ReadonlyVector } from '../../src/numerics/vector'
import { functionalsOf, type ReferenceModel, ratesOf, referenceModels } from './referenceModels'

const U = 2.220446049250313e-16

function scaledRates({ size, between, out }: Rates, factor: number): Rates {
  return { size, between: Array.from(between, (k) => k * factor), out: Array.from(out, (k) => k * factor) }
}

/** Weights are amounts to concentrations, which time does not change, or ke0 / V, which it does. */
function scaledFunctionals(functionals: readonly Functional[], factor: number): readonly Functional[] {
  return functionals.map(({ weights, decay }) =>
    decay === 0 ? { weights, decay } : { weights: Array.from(weights, (w) => w * factor), decay: decay * factor }
  )
}

/** What each part of an operator is multiplied by when the unit of time becomes `factor` times as long. */
function inOldUnits(operator: Operator, functionals: readonly Functional[], factor: number): Operator {
  const area = (r: number) => (functionals[r].decay === 0 ? factor : 1)
  const n = operator.sink.length
  const m = operator.sinkResponse.length
  return {
    ...operator,
    duration: operator.duration * factor,
    response: operator.response.map((value) => value * factor),
    sinkResponse: operator.sinkResponse.map((value) => value * factor),
    rows: operator.rows.map((value, p) => value * area(Math.floor(p / n))),
    direct: operator.direct.map((value, p) => value * factor * area(Math.floor(p / m)))
  }
}

const PARTS = ['transition', 'sink', 'response', 'sinkResponse', 'rows', 'direct', 'decays'] as const

/** Largest relative difference over the entries above 1e-290, over what is allowed for an entry of that size. */
function apart(a: ReadonlyVector, b: ReadonlyVector, allowed: (entry: number) => number): number {
  let largest = 0
  for (let p = 0; p < b.length; p++) {
    if (b[p] < 1e-290) continue
    const share = Math.abs(a[p] - b[p]) / b[p] / allowed(b[p])
    if (!(share <= largest)) largest = share
  }
  return largest
}

/** Two results within the bound of one each (s up to 31). */
const twice = (entry: number) => 8 * U * (43 + Math.abs(Math.log(entry)))

function eachModel(
  run: (model: ReferenceModel, rates: Rates, functionals: readonly Functional[], t: number) => void
): void {
  for (const model of referenceModels) {
    for (const { duration } of model.operators) run(model, ratesOf(model), functionalsOf(model), duration)
  }
}

test('a unit of time longer by a power of 2 gives the same operator to the bit', () => {
  eachModel((model, rates, functionals, t) => {
    const expected = operatorFor(rates, functionals, model.inputs, t)
    for (const factor of [2 ** -7, 2, 2 ** 11]) {
      const other = operatorFor(
        scaledRates(rates, factor),
        scaledFunctionals(functionals, factor),
        model.inputs,
        t / factor
      )
      expect(inOldUnits(other, functionals, factor), model.name).toEqual(expected)
    }
  })
})

test('any other unit of time gives the same entries within 1e-13, as far as the rates themselves are the same', () => {
  eachModel((model, rates, functionals, t) => {
    const expected = operatorFor(rates, functionals, model.inputs, t)
    for (const factor of [60, 1 / 24, 3.7]) {
      const other = operatorFor(
        scaledRates(rates, factor),
        scaledFunctionals(functionals, factor),
        model.inputs,
        t / factor
      )
      const got = inOldUnits(other, functionals, factor)
      for (const part of PARTS) {
        // Rounding of each rate alone moves an entry e^-y by a share y u: 1e-13 is for entries that are not tiny.
        const allowed = (entry: number) => 1e-13 * Math.max(1, Math.abs(Math.log(entry)) / 10)
        expect(apart(got[part], expected[part], allowed), `${model.name}, ${part}, over ${t}`).toBeLessThanOrEqual(1)
      }
    }
  })
})

test('the order of the compartments changes nothing beyond rounding', () => {
  eachModel((model, rates, _, t) => {
    const n = model.size
    const moved = (i: number) => (i * 5 + 3) % n
    // A step of 5 visits every compartment only where n is no multiple of 5.
    if (n % 5 === 0) return
    const between = new Array<number>(n * n).fill(0)
    const out = new Array<number>(n).fill(0)
    for (let j = 0; j < n; j++) {
      out[moved(j)] = rates.out[j]
      for (let i = 0; i < n; i++) between[moved(i) * n + moved(j)] = rates.between[i * n + j]
    }
    const expected = operatorFor(rates, [], model.inputs, t)
    const other = operatorFor({ size: n, between, out }, [], model.inputs.map(moved), t)
    const back = expected.transition.map((_, p) => other.transition[moved(Math.floor(p / n)) * n + moved(p % n)])
    expect(apart(back, expected.transition, twice), model.name).toBeLessThanOrEqual(1)
    expect(apart(other.sinkResponse, expected.sinkResponse, twice), model.name).toBeLessThanOrEqual(1)
  })
})

test('one stretch of time after another is both together: X, sink, Phi, R, H', () => {
  eachModel((model, rates, functionals, t) => {
    const first = operatorFor(rates, functionals, model.inputs, 0.375 * t)
    const second = operatorFor(rates, functionals, model.inputs, 0.625 * t)
    const whole = operatorFor(rates, functionals, model.inputs, t)
    const [n, m, f] = [model.size, model.inputs.length, functionals.length]
    const product = (a: ReadonlyVector, b: ReadonlyVector, i: number, j: number, columns: number) => {
      let sum = 0
      for (let k = 0; k < n; k++) sum += a[i * n + k] * b[k * columns + j]
      return sum
    }
    const table = (rows: number, columns: number, entry: (i: number, j: number) => number) =>
      Float64Array.from({ length: rows * columns }, (_, p) => entry(Math.floor(p / columns), p % columns))
    const got = {
      transition: table(n, n, (i, j) => product(second.transition, first.transition, i, j, n)),
      sink: table(1, n, (i, j) => first.sink[j] + product(second.sink, first.transition, i, j, n)),
      response: table(n, m, (i, c) => second.response[i * m + c] + product(second.transition, first.response, i, c, m)),
      rows: table(
        f,
        n,
        (r, j) => second.decays[r] * first.rows[r * n + j] + product(second.rows, first.transition, r, j, n)
      ),
      direct: table(f, m, (r, c) => {
        const p = r * m + c
        return second.direct[p] + second.decays[r] * first.direct[p] + product(second.rows, first.response, r, c, m)
      })
    }
    for (const [part, values] of Object.entries(got)) {
      const expected = whole[part as keyof typeof got]
      expect(
        apart(values, expected, (entry) => 2 * twice(entry)),
        `${model.name}, ${part}, over ${t}`
      ).toBeLessThanOrEqual(1)
    }
  })
})

test('what goes in is there or has left: columns of X and their sink sum to 1, of Phi and its sink to t', () => {
  eachModel((model, rates, functionals, t) => {
    const { transition, sink, response, sinkResponse } = operatorFor(rates, functionals, model.inputs, t)
    const [n, m] = [model.size, model.inputs.length]
    for (let j = 0; j < n; j++) {
      let sum = sink[j]
      for (let i = 0; i < n; i++) sum += transition[i * n + j]
      expect(Math.abs(sum - 1), `${model.name}, column ${j}`).toBeLessThanOrEqual(8 * U)
    }
    for (let c = 0; c < m; c++) {
      let sum = sinkResponse[c]
      for (let i = 0; i < n; i++) sum += response[i * m + c]
      expect(Math.abs(sum / t - 1), `${model.name}, input ${c}`).toBeLessThanOrEqual(43 * U)
    }
  })
})

test('a functional that decays at an eigenvalue is that exponential by itself: nothing but e^(-k t) remains', () => {
  // One compartment, decay equal to its outflow: f = w t e^(-k t), where a difference of rates would be 0 / 0.
  const k = 0.37
  const operator = operatorFor({ size: 1, between: [0], out: [k] }, [{ weights: [2], decay: k }], [0], 5)
  expect(operator.rows[0]).toBeCloseTo(2 * 5 * Math.exp(-k * 5), 14)
  expect(operator.direct[0]).toBeCloseTo((2 * (1 - Math.exp(-k * 5) * (1 + k * 5))) / k ** 2, 13)
})

test('after very long the area under an input row is the area to infinity', () => {
  for (const model of referenceModels) {
    if (!model.areaToInfinity) continue
    const rates = ratesOf(model)
    const unit = Array.from({ length: model.size }, (_, i) => (i === model.inputs[0] ? 1 : 0))
    const area = areaToInfinity(rates, unit)
    const longest = Math.max(...area)
    const operator = operatorFor(rates, functionalsOf(model), model.inputs, 800 * longest)
    const got = operator.rows[model.inputs[0]] * model.volume
    expect(Math.abs(got / area[model.observed] - 1), model.name).toBeLessThanOrEqual(200 * U)
  }
})
