import { expect, test } from 'vitest'
import { Rosenbrock } from '../../src/numerics/rosenbrock'
import type { RosenbrockSystem } from '../../src/numerics/rosenbrockSystem'

// Alone in its file: where many systems have passed through the same code, the engine boxes what it could keep in registers.
test('a step allocates less than 64 bytes', () => {
  if (globalThis.gc === undefined) throw new Error('run with --expose-gc')
  const system: RosenbrockSystem = {
    size: 2,
    coupled: 2,
    derivativeInto(y, out) {
      out[0] = y[1]
      out[1] = ((1 - y[0] * y[0]) * y[1] - y[0]) * 1e3
    },
    jacobianInto(y, out) {
      out[0] = 0
      out[1] = 1
      out[2] = (-2 * y[0] * y[1] - 1) * 1e3
      out[3] = (1 - y[0] * y[0]) * 1e3
    }
  }
  const solver = new Rosenbrock(system, {
    tolerance: { relative: 1e-8, absoluteInto: (_state, _step, out) => out.fill(1e-11) }
  })
  const y = Float64Array.from([2, 0])
  for (let k = 0; k < 400; k++) solver.advance(y, 2)
  const before = solver.counts.steps
  globalThis.gc()
  const heap = process.memoryUsage().heapUsed
  for (let k = 0; k < 100; k++) solver.advance(y, 2)
  const bytes = process.memoryUsage().heapUsed - heap
  const steps = solver.counts.steps - before
  expect(steps).toBeGreaterThan(2000)
  expect(bytes / steps).toBeLessThan(64)
})
