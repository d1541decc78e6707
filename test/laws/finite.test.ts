import { expect, test } from 'vitest'
import { areaBetween, extremes, timeAbove } from '../../src/pk/curve'
import type { Signal } from '../../src/pk/trajectory'
import { Random } from './random'
import { randomStudy } from './randomModel'
import { course, rowsOf } from './rowsOf'

test('every number of every table, and every reading of a curve, is finite and not negative', () => {
  let steady = 0
  for (let seed = 1001; seed <= 1100; seed++) {
    const study = randomStudy(new Random(seed))
    if (study.prescription.start === 'steady-state') steady += 1
    const given = course(study)
    const signals: Signal[] = [
      { kind: 'observed' },
      ...given.segments[0].model.effectSites.map((_, index): Signal => ({ kind: 'effect-site', index }))
    ]
    const numbers = rowsOf(given).flatMap(({ time, values }) => [time, ...values])
    for (const signal of signals) {
      const { peak, peakTime, minimum, minimumTime } = extremes(given.trajectory, signal, 0, given.end)
      const above = timeAbove(given.trajectory, signal, (peak + minimum) / 2, 0, given.end)
      numbers.push(peak, peakTime, minimum, minimumTime, above, areaBetween(given.trajectory, signal, 0, given.end))
    }
    expect(
      numbers.filter((value) => !(value >= 0 && value < Number.POSITIVE_INFINITY)),
      `seed ${seed}`
    ).toEqual([])
  }
  expect(steady).toBeGreaterThan(15)
})
