import { describe, expect, test } from 'vitest'
import { INTEGRATION_WITNESS, integrate } from '../../src/pk/integrate'
import { propagate } from '../../src/pk/propagate'
import { emptyState } from '../../src/pk/state'
import type { Piece, Trajectory } from '../../src/pk/trajectory'
import { witness } from '../../src/pk/witness'
import { Random } from '../laws/random'
import { randomStudy } from '../laws/randomModel'
import { course } from '../laws/rowsOf'
import { repeated } from './nonlinearModels'
import { mammillary } from './subjects'

const model = mammillary({ volumes: [17, 38], clearance: 1.5, exchanges: [9] })
const segments = repeated(model, { into: 0, amount: 500, every: 12, count: 4, over: 1 })
const exact = propagate(segments, emptyState(model))
const times = Array.from({ length: 97 }, (_, k) => k / 2)

/** A trajectory with its pieces changed. */
function altered(trajectory: Trajectory, change: (piece: Piece) => Partial<Piece>): Trajectory {
  return {
    ...trajectory,
    pieces: trajectory.pieces.map(
      (piece): Piece => ({
        segment: piece.segment,
        probes: piece.probes,
        amountsInto: (offset, out) => piece.amountsInto(offset, out),
        concentration: (signal, offset) => piece.concentration(signal, offset),
        slope: (signal, offset) => piece.slope(signal, offset),
        area: (signal, offset) => piece.area(signal, offset),
        areaBetween: (signal, from, to) => piece.areaBetween(signal, from, to),
        eliminated: (offset) => piece.eliminated(offset),
        ...change(piece)
      })
    )
  }
}

describe('the second witness', () => {
  test('exponential and integrator agree within 1e-10 on 200 random linear models and regimens, each balanced to 1e-13', () => {
    for (let seed = 1; seed <= 200; seed++) {
      const given = course(randomStudy(new Random(seed)))
      const again = integrate(given.segments, given.initial, INTEGRATION_WITNESS)
      const table = Array.from({ length: 101 }, (_, k) => (given.end * k) / 100)
      const seen = witness(given.trajectory, again, table)
      expect(seen.largestRelativeDifference, `seed ${seed} at ${seen.at} h`).toBeLessThan(1e-10)
      expect(seen.massBalance, `seed ${seed}, exponential`).toBeLessThan(1e-13)
      expect(witness(again, given.trajectory, table).massBalance, `seed ${seed}, integrator`).toBeLessThan(2e-13)
    }
  })

  test('a difference shows with its size and its place', () => {
    const bent = altered(exact, (piece) => ({
      concentration: (signal, offset) =>
        piece.concentration(signal, offset) * (piece.segment.start + offset === 17.5 ? 1 + 3e-7 : 1)
    }))
    const seen = witness(bent, exact, times)
    expect(seen.largestRelativeDifference).toBeCloseTo(3e-7, 12)
    expect(seen.at).toBe(17.5)
  })

  test('a difference just after a bolus shows, though the sample at that time is taken before it', () => {
    const boluses = repeated(model, { into: 0, amount: 500, every: 12, count: 2 })
    const less = boluses.map((segment) => ({ ...segment, boluses: segment.boluses.length > 0 ? [499, 0] : [] }))
    const seen = witness(propagate(boluses, emptyState(model)), propagate(less, emptyState(model)), [0])
    expect(seen.largestRelativeDifference).toBeCloseTo(1 / 500, 12)
  })

  test('a value below a millionth of the peak counts relative to that millionth', () => {
    const far = propagate(repeated(model, { into: 0, amount: 500, every: 3000, count: 1 }), emptyState(model))
    const nothing = altered(far, (piece) => ({
      concentration: (signal, offset) => (offset === 3000 ? 0 : piece.concentration(signal, offset))
    }))
    expect(witness(far, nothing, [0, 3000]).largestRelativeDifference).toBeLessThan(1e-20)
  })

  test('drug that is lost shows in the mass balance of the first', () => {
    const leaking = altered(exact, (piece) => ({ eliminated: (offset) => 0.999 * piece.eliminated(offset) }))
    expect(witness(leaking, exact, times).massBalance).toBeGreaterThan(1e-5)
    expect(witness(exact, leaking, times).massBalance).toBeLessThan(1e-14)
  })

  test('a number that is none is never taken for agreement', () => {
    const none = altered(exact, () => ({ concentration: () => Number.NaN }))
    expect(witness(exact, none, times).largestRelativeDifference).toBeNaN()
  })

  test('no times are refused', () => expect(() => witness(exact, exact, [])).toThrow(RangeError))
})
