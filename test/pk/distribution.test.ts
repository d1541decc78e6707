import { describe, expect, test } from 'vitest'
import { rootBetween } from '../../src/numerics/root'
import { valueAt } from '../../src/pk/curve'
import { distributionOver } from '../../src/pk/distribution'
import type { Model } from '../../src/pk/model'
import { phaseParts } from '../../src/pk/phaseParts'
import { expectWithin } from '../expectWithin'
import { Random } from '../laws/random'
import { changingCourse } from './exposures'
import { courseFor, hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

const precise = { relative: 1e-9 }

// The woman of 71 years of the PW-101 model (invented): CL 1.5016171875, V1 17.4, Q 9, V2 38. Times from exponential sums
// in 30-digit arithmetic, by independent code.
// The oral times to 10 digits: test/reference/generate/pk_exposure.py.
const disposition = { volumes: [17.4, 38], clearance: 1.5016171875, exchanges: [9] }
const pw101 = subjectOf(mammillary(disposition))

function withDepot(ka: number): Model {
  const model = mammillary(disposition)
  return {
    ...model,
    compartments: [...model.compartments, { name: 'depot', column: 'depot', holds: 'drug' }],
    transfers: [...model.transfers, { kind: 'first-order', from: 2, to: 0, rate: ka }]
  }
}

function firstOver(course: ReturnType<typeof courseFor>): number {
  const [first] = distributionOver(course, undefined)
  if (first.over === undefined) throw new Error(first.why)
  return first.over
}

describe('time from the end of the input to distribution being over', () => {
  test('after a bolus', () => {
    expectWithin(firstOver(courseFor(pw101, [line(750)], 24)), 4.997586460777084, precise)
  })

  test('after an infusion of 1 h', () => {
    expectWithin(firstOver(courseFor(pw101, [line(750, { over: 1 })], 24)), 4.532410302532861, precise)
  })

  test('after an infusion of 1 h every 12 h at steady state', () => {
    const course = courseFor(pw101, [line(750, { over: 1, every: hours(12) })], 48, 'steady-state')
    for (const { over, byPhases } of distributionOver(course, undefined)) {
      expectWithin(over ?? Number.NaN, 2.826871745179128, precise)
      expect(byPhases).toBe(over)
    }
  })

  test.each([
    [0.9, 6.92762756],
    [0.3, 12.2021343],
    [0.05, 39.70183089]
  ])('after an oral dose with ka %s: %s h after the lag', (ka, over) => {
    const subject = subjectOf(withDepot(ka), 2, { lag: 0.25, bioavailability: 0.62 })
    const course = courseFor(subject, [line(500)], 100)
    expectWithin(firstOver(course), over, { relative: 1e-8 })
    const [{ endOfInput, readableFrom = Number.NaN }] = distributionOver(course, undefined)
    expect(endOfInput).toBe(0.25)
    expectWithin(readableFrom - 0.25, over, { relative: 1e-8 })
  })

  // Minto CF et al. 1997 Anesthesiology 86:10-23, parameters of the simple model, minutes; recomputed by independent code.
  test('K17: after a bolus of remifentanil', () => {
    const model = mammillary({ volumes: [4.98, 9.01, 6.54], clearance: 2.46, exchanges: [1.69, 0.065] })
    expectWithin(firstOver(courseFor(subjectOf(model), [line(1)], 60)), 6.149487, { absolute: 5e-7 })
  })
})

describe('the parts of the phases', () => {
  test('sum to the concentration and are never negative from an empty body on, however near ka is to a phase', () => {
    const random = new Random(1901)
    for (let k = 0; k < 30; k++) {
      const rates = mammillary(disposition)
      const near = 0.8153143 * (1 + random.pick([0, 1e-12, 1e-6, 0.3, -0.9]))
      const model = withDepot(near)
      expect(rates.observed).toBe(0)
      const oral = {
        name: 'oral',
        input: 'bolus',
        bioavailability: 0.7,
        lag: 0.5,
        parts: [{ into: 2, fraction: 1, lag: 0 }]
      } as const
      const subject = { ...subjectOf(model), routes: [...subjectOf(model).routes, oral] }
      const lines = [
        line(random.between(10, 500), { route: 'oral', every: hours(8) }),
        line(300, { at: 5, over: random.between(0.1, 20) }),
        line(100, { at: 20 })
      ]
      const { trajectory } = courseFor(subject, lines, 48)
      const parts = phaseParts(trajectory)
      if (typeof parts === 'string') throw new Error(parts)
      for (const piece of parts) {
        const { start, duration } = piece.piece.segment
        const offset = duration * random.next()
        const own = piece.at(offset)
        const level = valueAt(trajectory, { kind: 'observed' }, start + offset, 'after')
        expectWithin(
          own.reduce((sum, part) => sum + part, 0),
          level,
          { relative: 1e-12 }
        )
        for (const part of own) expect(part).toBeGreaterThanOrEqual(0)
      }
    }
  })

  test('sum to the concentration also after a change of the person, in a session and in a body that is not empty', () => {
    const changed = { ...pw101, model: mammillary({ volumes: [30, 50], clearance: 0.4, exchanges: [20] }) }
    const { trajectory } = changingCourse(pw101, [line(750, { over: 1, every: hours(12) })], 60, {
      start: 'steady-state',
      changes: [{ from: 31, subject: changed }],
      sessions: [{ at: 40, duration: 4, clearance: 10 }]
    })
    const parts = phaseParts(trajectory)
    if (typeof parts === 'string') throw new Error(parts)
    expect(new Set(parts.map(({ piece }) => piece.segment.model)).size).toBe(3)
    for (const piece of parts) {
      const offset = piece.piece.segment.duration / 3
      expectWithin(
        piece.at(offset).reduce((sum, part) => sum + part, 0),
        piece.piece.concentration({ kind: 'observed' }, offset),
        { relative: 1e-13 }
      )
    }
  })
})

describe('what is said instead of a time', () => {
  test('a model without a faster phase does not describe distribution, by any route', () => {
    const message = 'this model does not describe distribution; follow the local sampling rule'
    const plain = courseFor(subjectOf(oneCompartment({ volume: 20, k: 0.1 })), [line(100)], 24)
    const oral = courseFor(subjectOf(oneCompartment({ volume: 20, k: 0.1, ka: 1 }), 0), [line(100)], 24)
    for (const course of [plain, oral]) {
      const [{ over, why, readableFrom }] = distributionOver(course, undefined)
      expect(over).toBeUndefined()
      expect(readableFrom).toBeUndefined()
      expect(why).toBe(message)
    }
  })

  test('an interval that is over first says never', () => {
    const course = courseFor(pw101, [line(750, { every: hours(2) })], 10)
    for (const { over, why } of distributionOver(course, undefined)) {
      expect(over).toBeUndefined()
      expect(why).toBe('never within this interval')
    }
  })

  test('an infusion that runs through the interval says never', () => {
    const course = courseFor(pw101, [line(750, { over: 24 }), line(100, { at: 24 })], 48)
    expect(distributionOver(course, undefined)[0].why).toBe('never within this interval')
  })
})

describe("the model's own rule", () => {
  const course = courseFor(pw101, [line(750, { over: 1 })], 24)

  test('counts when it is later', () => {
    const [later] = distributionOver(course, { delay: 6, from: 'dose end' })
    expect(later.over).toBe(6)
    expect(later.readableFrom).toBe(7)
    expectWithin(later.byPhases ?? Number.NaN, 4.532410302532861, precise)
    const [fromStart] = distributionOver(course, { delay: 6, from: 'dose start' })
    expect(fromStart.over).toBe(5)
  })

  test('does not when it is earlier', () => {
    expectWithin(
      distributionOver(course, { delay: 2, from: 'dose end' })[0].over ?? Number.NaN,
      4.532410302532861,
      precise
    )
  })

  test('opens the time for a sample where the model describes no distribution, and the time it is over stays undefined', () => {
    const plain = courseFor(subjectOf(oneCompartment({ volume: 20, k: 0.1 })), [line(100)], 24)
    const [{ over, readableFrom, readableTo }] = distributionOver(plain, { delay: 8, from: 'dose start' })
    expect(over).toBeUndefined()
    expect([readableFrom, readableTo]).toEqual([8, 24])
  })
})

test('the slow phase alone remains once the fast part is 5 %: closed form of a bolus', () => {
  const course = courseFor(pw101, [line(750)], 24)
  const parts = phaseParts(course.trajectory)
  if (typeof parts === 'string') throw new Error(parts)
  const [fast, slow] = parts[0].phases
  const share = (t: number) =>
    fast.coefficient * Math.exp(-fast.eigenvalue * t) * 0.95 - 0.05 * slow.coefficient * Math.exp(-slow.eigenvalue * t)
  expectWithin(firstOver(course), rootBetween(share, 0, 24), { relative: 1e-13 })
})
