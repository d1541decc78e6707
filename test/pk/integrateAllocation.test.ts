import { expect, test } from 'vitest'
import { Rosenbrock } from '../../src/numerics/rosenbrock'
import { Flux } from '../../src/pk/flux'
import { FluxTolerance } from '../../src/pk/fluxTolerance'
import { mixed } from './nonlinearModels'

// Alone in its file: where many models have passed through the same code, the engine boxes what it could keep in registers.
test('a step of a nonlinear model allocates less than 64 bytes', () => {
  if (globalThis.gc === undefined) throw new Error('run with --expose-gc')
  const flux = new Flux(mixed())
  const tolerance = new FluxTolerance({ relative: 1e-8, floor: 1e-4 }, flux, { drug: 0, target: 0 })
  const method = new Rosenbrock(flux, { tolerance, nonnegative: new Array<boolean>(flux.size).fill(true) })
  const state = new Float64Array(flux.size)
  const day = (): void => {
    state[0] += 300
    method.advance(state, 24)
  }
  for (let k = 0; k < 1500; k++) day()
  const before = method.counts.steps
  globalThis.gc()
  const heap = process.memoryUsage().heapUsed
  for (let k = 0; k < 300; k++) day()
  const bytes = process.memoryUsage().heapUsed - heap
  const steps = method.counts.steps - before
  expect(steps).toBeGreaterThan(2000)
  expect(bytes / steps).toBeLessThan(64)
})
