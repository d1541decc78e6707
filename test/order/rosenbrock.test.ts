import { describe, expect, test } from 'vitest'
import { RosenbrockRecorder } from '../../src/numerics/rosenbrockCourse'
import { RosenbrockStep } from '../../src/numerics/rosenbrockStep'
import type { RosenbrockSystem } from '../../src/numerics/rosenbrockSystem'

/** Rotation at a speed that depends on the radius: on the unit circle y = (sin t, cos t), with a Jacobian that is not constant. */
const ROTATION: RosenbrockSystem = {
  size: 2,
  coupled: 2,
  derivativeInto(y, out) {
    const square = y[0] * y[0] + y[1] * y[1]
    out[0] = y[1] * square
    out[1] = -y[0] * square
  },
  jacobianInto(y, out) {
    const [a, b] = [y[0], y[1]]
    out[0] = 2 * a * b
    out[1] = a * a + 3 * b * b
    out[2] = -3 * a * a - b * b
    out[3] = -2 * a * b
  }
}
const START = 0.3

/** Distance from the solution after equal steps of length h, and the largest distance within the steps. */
function errors(h: number, steps: number): { readonly end: number; readonly within: number } {
  const step = new RosenbrockStep(ROTATION)
  const y = Float64Array.from([Math.sin(START), Math.cos(START)])
  const recorder = new RosenbrockRecorder(2)
  let within = 0
  for (let k = 0; k < steps; k++) {
    step.prepare(y)
    step.h = h
    expect(step.factor()).toBe(true)
    step.take(y)
    recorder.begin()
    recorder.add(0, y)
    step.extensionInto(recorder.rows, recorder.at + 2)
    recorder.keep()
    const course = recorder.finish(h, step.next)
    for (const theta of [0.1, 0.3, 0.5, 0.7, 0.9]) {
      const t = START + (k + theta) * h
      const distance = Math.hypot(course.value(0, theta * h) - Math.sin(t), course.value(1, theta * h) - Math.cos(t))
      within = Math.max(within, distance)
    }
    y.set(step.next)
  }
  const end = START + steps * h
  return { end: Math.hypot(y[0] - Math.sin(end), y[1] - Math.cos(end)), within }
}

describe('observed order', () => {
  test.each([64, 128])('5 at the end of a stretch, from %i steps to twice as many', (steps) => {
    const order = Math.log2(errors(2 / steps, steps).end / errors(1 / steps, 2 * steps).end)
    expect(Math.abs(order - 5)).toBeLessThan(0.2)
  })

  test.each([0.05, 0.025])('5 + 1 for one step of %s: the error of one step is one power smaller', (h) => {
    expect(Math.abs(Math.log2(errors(h, 1).end / errors(h / 2, 1).end) - 6)).toBeLessThan(0.2)
  })

  test.each([0.05, 0.025])('4 for the dense output: its error within one step of %s goes with the power 4 + 1', (h) => {
    expect(Math.abs(Math.log2(errors(h, 1).within / errors(h / 2, 1).within) - 5)).toBeLessThan(0.2)
  })
})
