import { describe, expect, test } from 'vitest'
import { NumericalFailure } from '../../src/numerics/numericalFailure'
import { Rosenbrock } from '../../src/numerics/rosenbrock'
import { RosenbrockRecorder } from '../../src/numerics/rosenbrockCourse'
import { RosenbrockFailure } from '../../src/numerics/rosenbrockFailure'
import type { RosenbrockSystem, RosenbrockTolerance } from '../../src/numerics/rosenbrockSystem'
import { expectWithin } from '../expectWithin'
import { endError, HIRES, OREGONATOR, ROBERTSON, solve, VAN_DER_POL } from './rosenbrockProblems'

/** Relative tolerance alone, with an absolute part of a thousandth of it. */
function tolerance(relative: number): RosenbrockTolerance {
  return { relative, absoluteInto: (_state, _step, out) => out.fill(1e-3 * relative) }
}

function scalar(derivative: (y: number) => number, slope: (y: number) => number): RosenbrockSystem {
  return {
    size: 1,
    coupled: 1,
    derivativeInto: (y, out) => out.fill(derivative(y[0])),
    jacobianInto: (y, out) => out.fill(slope(y[0]))
  }
}

describe('published end values of stiff problems', () => {
  // Achieved error stays within twenty times the tolerance, which is what the method promises.
  for (const problem of [HIRES, ROBERTSON, VAN_DER_POL, OREGONATOR]) {
    test.each([1e-6, 1e-8, 1e-10])(`${problem.name} at relative tolerance %s`, (relative) => {
      expect(endError(problem, solve(problem, relative).y)).toBeLessThan(20 * relative)
    })
  }

  test('O01: HIRES to 1e-6 at tolerance 1e-8', () => expect(endError(HIRES, solve(HIRES, 1e-8).y)).toBeLessThan(1e-6))
  test('O02: Robertson to 1e-5 at tolerance 1e-6', () =>
    expect(endError(ROBERTSON, solve(ROBERTSON, 1e-6).y)).toBeLessThan(1e-5))
  test('O05: van der Pol to 1e-6 at tolerance 1e-8', () =>
    expect(endError(VAN_DER_POL, solve(VAN_DER_POL, 1e-8).y)).toBeLessThan(1e-6))
})

describe('work', () => {
  // Limits a quarter above what was counted; a worse controller or a lost digit of the Jacobian shows here first.
  test.each([
    [HIRES, 710, 20],
    [ROBERTSON, 900, 25],
    [VAN_DER_POL, 2660, 30]
  ])('$name at 1e-8 stays within its budget of steps and rejections', (problem, steps, rejections) => {
    const { counts } = solve(problem, 1e-8)
    expect(counts.steps).toBeLessThan(steps)
    expect(counts.rejections).toBeLessThan(rejections)
  })

  test('each try costs one factorisation and seven evaluations, each step one Jacobian and one evaluation more', () => {
    const { counts } = solve(HIRES, 1e-6)
    const tried = counts.steps + counts.rejections
    expect(counts.factorisations).toBe(tried)
    expect(counts.jacobians).toBe(counts.steps)
    expect(counts.derivatives).toBe(7 * tried + counts.steps)
  })
})

describe('the end and the course', () => {
  test('the end is met exactly and the course ends in the state that was reached', () => {
    const { y, course } = solve(HIRES, 1e-6)
    expect(course.times[0]).toBe(0)
    expect(course.times[course.times.length - 1]).toBe(HIRES.end)
    for (let i = 0; i < y.length; i++) expect(course.value(i, HIRES.end)).toBe(y[i])
  })

  test('keeping the course changes no bit of the end', () => {
    const solver = new Rosenbrock(VAN_DER_POL.system, { tolerance: tolerance(1e-7) })
    const kept = Float64Array.from(VAN_DER_POL.initial)
    const recorder = new RosenbrockRecorder(2)
    solver.advance(kept, 2, recorder)
    const bare = Float64Array.from(VAN_DER_POL.initial)
    solver.advance(bare, 2)
    expect(bare).toEqual(kept)
  })

  test('value, slope and rise of the course are those of the solution within the tolerance', () => {
    const { course } = solve(
      {
        ...HIRES,
        system: scalar(
          (y) => -y,
          () => -1
        ),
        initial: [1],
        scale: [1],
        expected: [Math.exp(-3)],
        end: 3
      },
      1e-9
    )
    for (let k = 0; k <= 60; k++) {
      const t = (3 * k) / 60
      expectWithin(course.value(0, t), Math.exp(-t), { absolute: 1e-8 }, `value at ${t}`)
      expectWithin(course.slope(0, t), -Math.exp(-t), { absolute: 1e-6 }, `slope at ${t}`)
      expectWithin(course.rise(0, t, 3), Math.exp(-3) - Math.exp(-t), { absolute: 2e-8 }, `rise from ${t}`)
    }
    // Between two times a millionth apart the rise keeps nine digits, the difference of two values would keep ten less six.
    expectWithin(course.rise(0, 1, 1.000001), Math.exp(-1) * Math.expm1(-1e-6), { relative: 1e-6 })
  })

  test('states that ride along give the same numbers as states that are solved with the rest', () => {
    const decay = (coupled: number): RosenbrockSystem => ({
      size: 4,
      coupled,
      derivativeInto(y, out) {
        out[0] = -y[0] * y[0] + 0.1 * y[1]
        out[1] = y[0] * y[0] - 0.1 * y[1]
        out[2] = 3 * (y[1] - y[2])
        out[3] = y[0] + y[2]
      },
      jacobianInto(y, out) {
        out.set([-2 * y[0], 0.1, 0, 0, 2 * y[0], -0.1, 0, 0, 0, 3, -3, 0, 1, 0, 1, 0])
      }
    })
    const end = (coupled: number): Float64Array => {
      const y = Float64Array.from([1, 0, 0.5, 0])
      new Rosenbrock(decay(coupled), { tolerance: tolerance(1e-9) }).advance(y, 5)
      return y
    }
    const [together, apart] = [end(4), end(2)]
    for (let i = 0; i < 4; i++) expectWithin(apart[i], together[i], { relative: 1e-13 })
  })

  test('a stretch of no length changes nothing', () => {
    const y = Float64Array.from([2, 0])
    new Rosenbrock(VAN_DER_POL.system, { tolerance: tolerance(1e-6) }).advance(y, 0)
    expect(Array.from(y)).toEqual([2, 0])
  })
})

describe('what cannot be integrated ends in a named failure', () => {
  function failureOf(system: RosenbrockSystem, initial: number, duration: number, budget?: number): RosenbrockFailure {
    const y = Float64Array.from([initial])
    try {
      new Rosenbrock(system, { tolerance: tolerance(1e-6), ...(budget !== undefined && { budget }) }).advance(
        y,
        duration
      )
    } catch (failure) {
      if (failure instanceof RosenbrockFailure) return failure
      throw failure
    }
    throw new Error(`no failure, but ${y[0]}`)
  }

  test('a solution that runs to infinity: step-too-small, with the time, the step and the state', () => {
    // y' = y^2 from 1 is 1 / (1 - t).
    const failure = failureOf(
      scalar(
        (y) => y * y,
        (y) => 2 * y
      ),
      1,
      2
    )
    expect(failure).toBeInstanceOf(NumericalFailure)
    expect(failure.code).toBe('step-too-small')
    expectWithin(failure.stop.time, 1, { relative: 1e-4 })
    expect(failure.stop.state[0]).toBeGreaterThan(1e4)
    expect(failure.message).toContain(`at time ${failure.stop.time} with a step of ${failure.stop.step}`)
  })

  test('a derivative that is not a number: not-a-number', () => {
    expect(
      failureOf(
        scalar(
          () => Number.NaN,
          () => 0
        ),
        1,
        2
      ).code
    ).toBe('not-a-number')
    expect(
      failureOf(
        scalar(
          (y) => -Math.sqrt(y),
          (y) => -0.5 / Math.sqrt(y)
        ),
        0,
        2
      ).code
    ).toBe('not-a-number')
  })

  test('a budget that is used up: too-many-steps', () => {
    const failure = failureOf(
      scalar(
        (y) => -y,
        () => -1
      ),
      1,
      1e9,
      10
    )
    expect(failure.code).toBe('too-many-steps')
    expect(failure.stop.time).toBeGreaterThan(0)
  })

  test('misuse is a RangeError', () => {
    const solver = new Rosenbrock(VAN_DER_POL.system, { tolerance: tolerance(1e-6) })
    expect(() => solver.advance(new Float64Array(2), -1)).toThrow(RangeError)
    expect(() => solver.advance(new Float64Array(2), Number.NaN)).toThrow(RangeError)
    expect(() => new Rosenbrock(VAN_DER_POL.system, { tolerance: tolerance(0) })).toThrow(RangeError)
    expect(() => new Rosenbrock({ ...VAN_DER_POL.system, coupled: 3 }, { tolerance: tolerance(1e-6) })).toThrow(
      RangeError
    )
  })
})

describe('tolerances and signs', () => {
  test('a relative tolerance above 1e-4 is brought down to it', () => {
    const end = (relative: number): Float64Array => {
      const y = Float64Array.from(HIRES.initial)
      new Rosenbrock(HIRES.system, {
        tolerance: { relative, absoluteInto: (_state, _step, out) => out.fill(1e-7) }
      }).advance(y, HIRES.end)
      return y
    }
    expect(end(0.1)).toEqual(end(1e-4))
  })

  test('a nonnegative state never falls below -10 absolute tolerances, where without the rule it does in one step', () => {
    // Saturable decline 10 y / (0.001 + y) without a continuation below zero: one long step jumps over the pole at -0.001
    // on to a branch that goes down for ever, and its error estimate sees nothing.
    const decline = scalar(
      (y) => (-10 * y) / (0.001 + y),
      (y) => -0.01 / ((0.001 + y) * (0.001 + y))
    )
    const lowest = (nonnegative: boolean): number => {
      const y = Float64Array.from([20])
      const recorder = new RosenbrockRecorder(1)
      new Rosenbrock(decline, {
        tolerance: { relative: 1e-4, absoluteInto: (_state, _step, out) => out.fill(1e-4) },
        ...(nonnegative && { nonnegative: [true] })
      }).advance(y, 100, recorder)
      const course = recorder.finish(100, y)
      return Math.min(...Array.from(course.times, (time) => course.value(0, time)))
    }
    expect(lowest(true)).toBeGreaterThanOrEqual(-1e-3)
    expect(lowest(false)).toBeLessThan(-100)
  })
})
