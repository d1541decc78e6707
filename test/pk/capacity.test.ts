import { describe, expect, test } from 'vitest'
import { capacityOf } from '../../src/pk/capacity'
import type { Model, Transfer } from '../../src/pk/model'
import { compartmentWithoutExit, reachedBy } from '../../src/pk/pathways'
import { noSteadyState } from '../../src/pk/steadySolution'
import { expectWithin } from '../expectWithin'
import { mixed, repeated, saturable, targetMediated } from './nonlinearModels'

const HALF = { halfSaturation: 5, hill: 1 }

/** Depot, central and peripheral with these transfers. */
function three(transfers: readonly Transfer[]): Model {
  const names = ['depot', 'central', 'peripheral']
  return {
    compartments: names.map((name) => ({ name, column: name, holds: 'drug', volume: 10 })),
    transfers,
    effectSites: [],
    observed: 1,
    observations: []
  }
}

function path(from: number, to: number | 'eliminated', maximumRate: number): Transfer {
  return { kind: 'saturable', from, to, maximumRate, ...HALF }
}

function arrow(from: number, to: number | 'eliminated', rate = 1): Transfer {
  return { kind: 'first-order', from, to, rate }
}

function capacity(model: Model, inputs: readonly number[]): readonly [number, number, readonly number[]] | undefined {
  const found = capacityOf(model, model.transfers, inputs)
  return found === undefined ? undefined : [found.rate, found.doseRate, found.compartments]
}

// Expected values by hand: the sum of the maximum rates that lead out of what a dose can get to.
describe('capacity', () => {
  test('is the sum of the maximum rates out of the body where there is no first-order path', () => {
    const model = three([arrow(0, 1), arrow(1, 2), arrow(2, 1), path(1, 'eliminated', 8), path(2, 'eliminated', 3)])
    expect(capacity(model, [0, 5, 0])).toEqual([11, 5, [1]])
    expect(capacity(model, [4, 5, 0])).toEqual([11, 9, [0, 1]])
  })

  test('is none where a first-order path leads out, however slow', () => {
    expect(capacity(mixed(), [5, 0, 0])).toBeUndefined()
    const model = three([arrow(0, 1), arrow(1, 2), arrow(2, 'eliminated', 1e-6), path(1, 'eliminated', 8)])
    expect(capacity(model, [5, 0, 0])).toBeUndefined()
  })

  test('is that of a saturable absorption which is the only way out of a dosed compartment', () => {
    const model = three([path(0, 1, 6), arrow(1, 'eliminated')])
    expect(capacity(model, [5, 0, 0])).toEqual([6, 5, [0]])
    expect(capacity(model, [5, 100, 0])).toEqual([6, 5, [0]])
    expect(capacity(model, [0, 100, 0])).toBeUndefined()
  })

  test('is the limit that is met first when all doses rise together', () => {
    // Absorption 6, elimination 10: with 2 in 3 of the dose oral the way out fails at 10, which the depot meets with 6.67.
    const model = three([path(0, 1, 6), path(1, 'eliminated', 10)])
    expect(capacity(model, [2, 1, 0])).toEqual([6, 2, [0]])
    expect(capacity(model, [1, 1, 0])).toEqual([10, 2, [0, 1]])
  })

  test('counts what a depot passes on where part of the dose leaves before', () => {
    const model = three([arrow(0, 1, 9), arrow(0, 'eliminated', 1), path(1, 'eliminated', 9)])
    const found = capacityOf(model, model.transfers, [5, 0, 0])
    expectWithin(found?.rate ?? Number.NaN, 10, { relative: 1e-14 })
    expect([found?.doseRate, found?.compartments]).toEqual([5, [0]])
  })

  test('does not count a saturable path that leads to no way out, nor one that leads back', () => {
    const model = three([path(0, 1, 100), path(1, 2, 50), path(2, 1, 50), path(1, 'eliminated', 4)])
    expect(capacity(model, [1, 0, 0])).toEqual([4, 1, [0]])
  })

  test('of drug that leaves only bound is what is produced of its target', () => {
    const model = targetMediated({ approximation: 'none', turnover: true })
    expect(capacity(model, [1, 0, 0, 0])).toBeUndefined()
    const onlyBound = model.transfers.filter(
      (transfer) => !(transfer.kind === 'first-order' && transfer.from === 0 && transfer.to === 'eliminated')
    )
    const found = capacity({ ...model, transfers: onlyBound }, [1, 0, 0, 0])
    expectWithin(found?.[0] ?? Number.NaN, 0.06, { relative: 1e-12 })
  })

  test('is smaller by what the body makes of the drug itself', () => {
    const model = three([arrow(0, 1), path(1, 'eliminated', 8), { kind: 'production', into: 1, rate: 3 }])
    expect(capacity(model, [2, 0, 0])).toEqual([5, 2, [0]])
  })

  test('is asked for a dose only', () => expect(capacity(mixed(), [0, 0, 0])).toBeUndefined())
})

// K26: Grasela, Sheiner et al. 1983, Clin. Pharmacokinet. 8:355 (abstract): 415 mg/d; "R >= 415 must be refused".
describe('no steady state, in words', () => {
  const phenytoin = saturable({ volume: 49, maximumRate: 415 / 24, halfSaturation: 5.7 })
  const daily = (amount: number): string | undefined =>
    noSteadyState(repeated(phenytoin, { into: 0, amount, every: 24, count: 1 }))

  test('above the capacity, with both rates', () => {
    expect(daily(430)).toBe('no steady state: the dose rate 430 mg/d is above the capacity 415 mg/d')
  })

  test('just above it, with the digits that tell them apart', () => {
    expect(daily(415.001)).toBe('no steady state: the dose rate 415.001 mg/d is above the capacity 415 mg/d')
  })

  test('at it', () => {
    const model = saturable({ volume: 49, maximumRate: 16, halfSaturation: 5.7 })
    expect(noSteadyState(repeated(model, { into: 0, amount: 384, every: 24, count: 1 }))).toBe(
      'no steady state: the dose rate 384 mg/d is at the capacity 384 mg/d'
    )
  })

  test('below it there is nothing to say', () => expect(daily(414.999)).toBeUndefined())

  test('names the compartments where they are not all that take a dose', () => {
    const model = three([path(0, 1, 6), arrow(1, 'eliminated')])
    const [segment] = repeated(model, { into: 0, amount: 240, every: 24, count: 1 })
    expect(noSteadyState([{ ...segment, inputs: [0, 5, 0] }])).toBe(
      'no steady state: the dose rate 240 mg/d into "depot" is above the capacity 144 mg/d'
    )
  })

  test('names the compartment that drug never leaves', () => {
    const model = three([arrow(0, 1), arrow(1, 2), path(1, 'eliminated', 8)])
    expect(noSteadyState(repeated(model, { into: 0, amount: 1, every: 24, count: 1 }))).toBe(
      'no steady state: drug that enters compartment "peripheral" never leaves'
    )
  })
})

describe('where things get to', () => {
  test('complex where both drug and target are, and out of the body with it', () => {
    const { transfers, ...rest } = targetMediated({ approximation: 'none', turnover: false })
    const model: Model = { ...rest, transfers: [...transfers, arrow(3, 'eliminated')] }
    expect(reachedBy(model, model.transfers, [true, false, false, false])).toEqual([true, true, false, false])
    const both = reachedBy(model, model.transfers, [true, false, true, false])
    expect(both).toEqual([true, true, true, true])
    expect(compartmentWithoutExit(model.transfers, both)).toBeUndefined()
    expect(compartmentWithoutExit(transfers, both)).toBe(0)
  })
})
