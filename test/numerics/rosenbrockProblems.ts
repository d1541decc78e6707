import { Rosenbrock } from '../../src/numerics/rosenbrock'
import { type RosenbrockCourse, RosenbrockRecorder } from '../../src/numerics/rosenbrockCourse'
import type { RosenbrockCounts, RosenbrockSystem } from '../../src/numerics/rosenbrockSystem'

/** A stiff initial value problem with a published end value. */
export interface Problem {
  readonly name: string
  readonly system: RosenbrockSystem
  readonly initial: readonly number[]
  readonly end: number
  readonly expected: readonly number[]
  /** The size of each state, for absolute tolerances. */
  readonly scale: readonly number[]
}

function system(
  size: number,
  derivative: (y: ArrayLike<number>) => readonly number[],
  jacobian: (y: ArrayLike<number>) => readonly (readonly number[])[]
): RosenbrockSystem {
  return {
    size,
    coupled: size,
    derivativeInto: (y, out) => out.set(derivative(y)),
    jacobianInto: (y, out) => out.set(jacobian(y).flat())
  }
}

/** "High irradiance response": eight reactions of plant photomorphogenesis [Hairer & Wanner 1996, IV.10]; end value O01: Bari Test Set for IVP Solvers, file hires.f. */
export const HIRES: Problem = {
  name: 'HIRES',
  system: system(
    8,
    (y) => [
      -1.71 * y[0] + 0.43 * y[1] + 8.32 * y[2] + 0.0007,
      1.71 * y[0] - 8.75 * y[1],
      -10.03 * y[2] + 0.43 * y[3] + 0.035 * y[4],
      8.32 * y[1] + 1.71 * y[2] - 1.12 * y[3],
      -1.745 * y[4] + 0.43 * y[5] + 0.43 * y[6],
      -280 * y[5] * y[7] + 0.69 * y[3] + 1.71 * y[4] - 0.43 * y[5] + 0.69 * y[6],
      280 * y[5] * y[7] - 1.81 * y[6],
      -280 * y[5] * y[7] + 1.81 * y[6]
    ],
    (y) => [
      [-1.71, 0.43, 8.32, 0, 0, 0, 0, 0],
      [1.71, -8.75, 0, 0, 0, 0, 0, 0],
      [0, 0, -10.03, 0.43, 0.035, 0, 0, 0],
      [0, 8.32, 1.71, -1.12, 0, 0, 0, 0],
      [0, 0, 0, 0, -1.745, 0.43, 0.43, 0],
      [0, 0, 0, 0.69, 1.71, -280 * y[7] - 0.43, 0.69, -280 * y[5]],
      [0, 0, 0, 0, 0, 280 * y[7], -1.81, 280 * y[5]],
      [0, 0, 0, 0, 0, -280 * y[7], 1.81, -280 * y[5]]
    ]
  ),
  initial: [1, 0, 0, 0, 0, 0, 0, 0.0057],
  end: 321.8122,
  expected: [
    0.7371312573325668e-3, 0.1442485726316185e-3, 0.5888729740967575e-4, 0.1175651343283149e-2, 0.2386356198831331e-2,
    0.6238968252742796e-2, 0.2849998395185769e-2, 0.2850001604814231e-2
  ],
  scale: [1, 1, 1, 1, 1, 1, 1, 1]
}

/** Three reactions with rates eleven powers of ten apart [Robertson 1966]; end value O02: Bari Test Set for IVP Solvers, file rober. */
export const ROBERTSON: Problem = {
  name: 'Robertson',
  system: system(
    3,
    (y) => {
      const first = 0.04 * y[0] - 1e4 * y[1] * y[2]
      const second = 3e7 * y[1] * y[1]
      return [-first, first - second, second]
    },
    (y) => [
      [-0.04, 1e4 * y[2], 1e4 * y[1]],
      [0.04, -1e4 * y[2] - 6e7 * y[1], -1e4 * y[1]],
      [0, 6e7 * y[1], 0]
    ]
  ),
  initial: [1, 0, 0],
  end: 1e11,
  expected: [0.2083340149701255e-7, 0.8333360770334713e-13, 0.999999979166505],
  scale: [1e-8, 1e-13, 1]
}

/** Relaxation oscillation, stiffness 1e6 [Hairer & Wanner 1996, IV.10]; end value O05: Bari Test Set for IVP Solvers. */
export const VAN_DER_POL: Problem = {
  name: 'van der Pol',
  system: system(
    2,
    (y) => [y[1], ((1 - y[0] * y[0]) * y[1] - y[0]) / 1e-6],
    (y) => [
      [0, 1],
      [(-2 * y[0] * y[1] - 1) / 1e-6, (1 - y[0] * y[0]) / 1e-6]
    ]
  ),
  initial: [2, 0],
  end: 2,
  expected: [0.1706167732170469e1, -0.8928097010248125],
  scale: [1, 1]
}

/**
 * Belousov-Zhabotinskii reaction, limit cycle over seven powers of ten [Field & Noyes 1974; Hairer & Wanner 1996, IV.10].
 * End value of the test problem "Orego" of Hairer & Wanner, quoted from memory and recomputed to 1e-10 by
 * test/reference/generate/oregonator.py.
 */
export const OREGONATOR: Problem = {
  name: 'Oregonator',
  system: system(
    3,
    (y) => [
      77.27 * (y[1] + y[0] * (1 - 8.375e-6 * y[0] - y[1])),
      (y[2] - (1 + y[0]) * y[1]) / 77.27,
      0.161 * (y[0] - y[2])
    ],
    (y) => [
      [77.27 * (1 - 2 * 8.375e-6 * y[0] - y[1]), 77.27 * (1 - y[0]), 0],
      [-y[1] / 77.27, -(1 + y[0]) / 77.27, 1 / 77.27],
      [0.161, 0, -0.161]
    ]
  ),
  initial: [1, 2, 3],
  end: 360,
  expected: [0.1000814870318523e1, 0.1228178521549917e4, 0.1320554942846706e3],
  scale: [1, 1, 1]
}

/** Solve from 0 to `end`; absolute tolerances are a thousandth of relative x scale. */
export function solve(
  problem: Problem,
  relative: number,
  nonnegative?: readonly boolean[]
): { readonly y: Float64Array; readonly counts: Readonly<RosenbrockCounts>; readonly course: RosenbrockCourse } {
  const absolute = problem.scale.map((size) => 1e-3 * relative * size)
  const solver = new Rosenbrock(problem.system, {
    tolerance: { relative, absoluteInto: (_state, _step, out) => out.set(absolute) },
    ...(nonnegative !== undefined && { nonnegative })
  })
  const y = Float64Array.from(problem.initial)
  const recorder = new RosenbrockRecorder(problem.system.size)
  solver.advance(y, problem.end, recorder)
  return { y, counts: solver.counts, course: recorder.finish(problem.end, y) }
}

/** Largest relative error of any state at the end. */
export function endError(problem: Problem, y: Float64Array): number {
  return Math.max(...problem.expected.map((value, i) => Math.abs(y[i] / value - 1)))
}
