import { expect, test } from 'vitest'
import { LinearOperators } from '../../src/numerics/linearOperators'
import { advanceInto } from '../../src/numerics/operator'
import { functionalsOf, ratesOf, referenceModels } from '../numerics/referenceModels'

const ROUNDS = 12
const CALLS = 2000
/** Bytes a call; the smallest array of numbers would take more. */
const LIMIT = 64

/** Heap that `run` leaves behind, in bytes a call, in the best of several rounds: the first ones run before it is compiled. Stops below the limit. */
function bytesPerCall(run: (call: number) => void): number {
  if (globalThis.gc === undefined) throw new Error('run node with --expose-gc')
  let least = Number.POSITIVE_INFINITY
  for (let round = 0; round < ROUNDS && least >= LIMIT; round++) {
    globalThis.gc()
    const before = process.memoryUsage().heapUsed
    for (let call = 0; call < CALLS; call++) run(call)
    least = Math.min(least, (process.memoryUsage().heapUsed - before) / CALLS)
  }
  return least
}

for (const name of [
  'depot, central, peripheral',
  'depot and three peripheral compartments, two of them alike',
  'blood and eleven tissues'
]) {
  const model = referenceModels.find((each) => each.name === name)
  if (!model) throw new RangeError(`no reference model ${name}`)
  const rates = ratesOf(model)
  const functionals = functionalsOf(model)
  const operators = new LinearOperators(rates, functionals, model.inputs)
  const operator = operators.create()

  test(`making an operator of ${model.size} compartments in storage that is there allocates nothing`, () => {
    expect(bytesPerCall((call) => operators.into(0.5 + (call % 7), operator))).toBeLessThan(LIMIT)
  })

  test(`going over to other rates of ${model.size} compartments allocates nothing`, () => {
    expect(bytesPerCall(() => operators.use(rates, functionals))).toBeLessThan(LIMIT)
  })

  test(`advancing ${model.size} compartments allocates nothing`, () => {
    operators.into(2, operator)
    const inputs = new Float64Array(model.inputs.length).fill(3)
    const amounts = new Float64Array(model.size).fill(1)
    const values = new Float64Array(functionals.length)
    const nextAmounts = new Float64Array(model.size)
    const nextValues = new Float64Array(functionals.length)
    const bytes = bytesPerCall(() => advanceInto(operator, amounts, values, inputs, nextAmounts, nextValues))
    expect(bytes).toBeLessThan(LIMIT)
  })
}

test('the measure sees an allocation of one small array a call', () => {
  const kept: Float64Array[] = []
  const bytes = bytesPerCall((call) => {
    kept[call % 10] = new Float64Array(4)
  })
  expect(bytes).toBeGreaterThan(LIMIT)
})
