import { expect, test } from 'vitest'
import { valueAt } from '../../src/pk/curve'
import { sampledSeries } from '../../src/report/series'
import { editedStudy, resultOf } from './studyResult'

const OBSERVED = { kind: 'observed' } as const

test('every point of a drawn curve lies on the curve, and times ascend', () => {
  for (const { course } of resultOf(editedStudy('choosing-the-interval')).regimens) {
    const { times, values } = sampledSeries(course.trajectory, OBSERVED, 400)
    expect(times.length).toBeGreaterThan(200)
    expect(times.length).toBeLessThanOrEqual(402)
    for (let k = 0; k < times.length; k++) {
      if (k > 0) expect(times[k]).toBeGreaterThanOrEqual(times[k - 1]!)
      const sides = (['before', 'after'] as const).map((side) => valueAt(course.trajectory, OBSERVED, times[k]!, side))
      const off = Math.min(...sides.map((side) => Math.abs(side - values[k]!)))
      expect(off).toBeLessThanOrEqual(1e-9 * Math.max(1, values[k]!))
    }
  }
})

test('straight lines between the points leave the curve by less than a pixel of 500', () => {
  for (const { course } of resultOf(editedStudy('choosing-the-interval')).regimens) {
    const { times, values } = sampledSeries(course.trajectory, OBSERVED, 400)
    const top = values.reduce((a, b) => Math.max(a, b))
    let worst = 0
    for (let k = 1; k < times.length; k++) {
      for (const share of [0.25, 0.5, 0.75]) {
        const time = times[k - 1]! + share * (times[k]! - times[k - 1]!)
        if (time <= times[k - 1]! || time >= times[k]!) continue
        const chord = values[k - 1]! + share * (values[k]! - values[k - 1]!)
        worst = Math.max(worst, Math.abs(chord - valueAt(course.trajectory, OBSERVED, time, 'after')) / top)
      }
    }
    expect(worst).toBeLessThan(1 / 500)
  }
})

test('the level before a bolus and the one after it stand at one time', () => {
  const study = editedStudy('choosing-the-interval', (edited) => {
    edited.regimens = [
      {
        name: 'bolus',
        doses: [
          {
            route: 'intravenous',
            bolus: true,
            amount: { value: 500, unit: 'mg' },
            at: { value: 24, unit: 'h' },
            every: { value: 24, unit: 'h' }
          }
        ]
      }
    ]
  })
  const [regimen] = resultOf(study).regimens
  const { times, values } = sampledSeries(regimen!.course.trajectory, OBSERVED, 400)
  const at = [...times.keys()].filter((k) => times[k] === 24)
  expect(at).toHaveLength(2)
  expect(values[at[0]!]).toBe(0)
  // 500 mg over V1 = 21 L x 58/70.
  expect(values[at[1]!]).toBeCloseTo(500 / ((21 * 58) / 70), 9)
})

test('a course of thousands of doses is drawn with no more points than the budget', () => {
  const study = editedStudy('choosing-the-interval', (edited) => {
    edited.regimens = [
      {
        name: 'many',
        doses: [
          {
            route: 'oral',
            amount: { value: 10, unit: 'mg' },
            at: { value: 0, unit: 'h' },
            every: { value: 0.1, unit: 'h' }
          }
        ]
      }
    ]
    edited.targets = []
  })
  const [regimen] = resultOf(study).regimens
  const { times } = sampledSeries(regimen!.course.trajectory, OBSERVED, 400)
  expect(times.length).toBeLessThanOrEqual(402)
  expect(times.at(-1)).toBeCloseTo(168, 9)
})
