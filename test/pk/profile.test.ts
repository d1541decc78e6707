import { describe, expect, test } from 'vitest'
import { type Course, courseOf } from '../../src/pk/course'
import type { Model } from '../../src/pk/model'
import { profileColumns, profileRows } from '../../src/pk/profile'
import { type SamplingTimes, tooManyRows } from '../../src/pk/profileTimes'
import { expectWithin } from '../expectWithin'
import { courseFor, hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

function rows(course: Course, sampling: SamplingTimes): (number | string)[][] {
  return Array.from(profileRows(course, sampling), ({ time, row }) => [time, row])
}

const depot = oneCompartment({ volume: 10, k: 0.1, ka: 1 })

describe('rows', () => {
  test('are the grid, the times typed, 0 and the end, in order', () => {
    const course = courseFor(subjectOf(depot), [], 5)
    expect(rows(course, { every: hours(2), also: [0.05, 3, 4] })).toEqual([
      [0, 'sample'],
      [0.05, 'sample'],
      [2, 'sample'],
      [3, 'sample'],
      [4, 'sample'],
      [5, 'sample']
    ])
  })

  test('hold the level before and after a bolus into the observed compartment, one row for any other dose', () => {
    const bolus = courseFor(subjectOf(depot), [line(10, { at: 2 })], 4)
    expect(rows(bolus, { every: hours(4), also: [] })).toEqual([
      [0, 'sample'],
      [2, 'before dose'],
      [2, 'after dose'],
      [4, 'sample']
    ])
    const oral = courseFor(subjectOf(depot, 0), [line(10, { at: 2 })], 4)
    expect(rows(oral, { every: hours(4), also: [] })).toEqual([
      [0, 'sample'],
      [2, 'before dose'],
      [4, 'sample']
    ])
  })

  test('of one time are one, named before dose over end of infusion over sample', () => {
    const course = courseFor(subjectOf(depot), [line(10, { over: 1, every: hours(2) }), line(5, { at: 3, over: 1 })], 6)
    expect(rows(course, { every: hours(1), also: [] })).toEqual([
      [0, 'before dose'],
      [1, 'end of infusion'],
      [2, 'before dose'],
      [3, 'before dose'],
      [4, 'before dose'],
      [5, 'end of infusion'],
      [6, 'sample']
    ])
  })

  test('are at the time of giving for doses, lag included for the ends of infusions and releases', () => {
    const subject = subjectOf(depot, 0, {
      lag: 0.5,
      parts: [
        { into: 0, fraction: 0.5, lag: 0 },
        { into: 1, fraction: 0.5, lag: 1, over: 3 }
      ]
    })
    expect(rows(courseFor(subject, [line(10, { at: 1 })], 8), { every: hours(8), also: [] })).toEqual([
      [0, 'sample'],
      [1, 'before dose'],
      [5.5, 'end of infusion'],
      [8, 'sample']
    ])
    // A lagged bolus reaches the observed compartment with no row of its own.
    const lagged = courseFor(subjectOf(depot, 1, { lag: 0.5 }), [line(10, { at: 1 })], 8)
    expect(rows(lagged, { every: hours(8), also: [] })).toEqual([
      [0, 'sample'],
      [1, 'before dose'],
      [8, 'sample']
    ])
  })

  test('are none for missed doses, changes of the person and sessions, and an infusion stopped early ends there', () => {
    const outcome = courseOf({
      prescription: {
        name: 'regimen',
        start: 'empty',
        lines: [
          line(10, {
            over: 1,
            at: 1,
            every: hours(3),
            exceptions: [
              { number: 1, missed: true },
              { number: 2, stoppedAfter: 0.25 }
            ]
          })
        ]
      },
      stretches: [
        { from: 0, subject: subjectOf(depot) },
        { from: 2.5, subject: subjectOf({ ...depot }) }
      ],
      sessions: [{ at: 3, duration: 0.3, clearance: 2 }],
      until: 6,
      path: 'regimens[0]'
    })
    if (!outcome.ok) throw new Error('not written')
    expect(rows(outcome.course, { every: hours(6), also: [] })).toEqual([
      [0, 'sample'],
      [4, 'before dose'],
      [4.25, 'end of infusion'],
      [6, 'sample']
    ])
  })

  test('keep the own time of a dose that is within 1e-12 of the grid', () => {
    const course = courseFor(subjectOf(depot), [line(10, { at: 0.1 + 0.2 })], 1)
    const times = rows(course, { every: { value: 0.1, times: 1, per: 1 }, also: [] }).map(([time]) => time)
    expect(times).toEqual([0, 0.1, 0.2, 0.1 + 0.2, 0.1 + 0.2, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1])
  })

  test('of a grid in minutes are at exact thirds of an hour', () => {
    const course = courseFor(subjectOf(depot), [], 24)
    const times = rows(course, { every: { value: 20, times: 1, per: 60 }, also: [] }).map(([time]) => time)
    expect(times).toEqual(Array.from({ length: 73 }, (_, k) => k / 3))
  })

  test('of more than 5,000,000 sampling times are refused before any is computed', () => {
    expect(tooManyRows({ every: hours(0.001), also: [] }, 5001)?.path).toBe('sampling.every')
    expect(tooManyRows({ every: hours(0.001), also: [] }, 4999)).toBeUndefined()
  })

  test('show the end of an infusion that was begun before 0 in a steady state', () => {
    const course = courseFor(subjectOf(depot), [line(10, { at: 5, over: 3, every: hours(6) })], 6, 'steady-state')
    expect(rows(course, { every: hours(6), also: [] })).toEqual([
      [0, 'sample'],
      [2, 'end of infusion'],
      [5, 'before dose'],
      [6, 'sample']
    ])
  })
})

describe('values', () => {
  const chain: Model = {
    compartments: [
      { name: 'depot', column: 'depot', holds: 'drug' },
      { name: 'stage 1', column: 'depot_central_transit', holds: 'drug' },
      { name: 'stage 2', column: 'depot_central_transit', holds: 'drug' },
      { name: 'central', column: 'central', holds: 'drug', volume: 10 },
      { name: 'tissue', column: 'tissue', holds: 'drug', volume: 10 }
    ],
    transfers: [
      ...[0, 1, 2].map((from) => ({ kind: 'first-order' as const, from, to: from + 1, rate: 2 })),
      { kind: 'first-order', from: 3, to: 4, rate: 0.5 },
      { kind: 'first-order', from: 4, to: 3, rate: 0.25 },
      { kind: 'first-order', from: 3, to: 'eliminated', rate: 0.1 }
    ],
    effectSites: [{ name: 'brain', source: 3, rate: 0.3 }],
    observed: 3,
    observations: [{ name: 'total', of: [3, 4], volume: 10 }]
  }

  test('have one amount column for the stages of a transit, then sites, observations, area and eliminated', () => {
    expect(profileColumns(chain)).toEqual([
      { kind: 'concentration' },
      { kind: 'amount', name: 'depot' },
      { kind: 'amount', name: 'depot_central_transit' },
      { kind: 'amount', name: 'central' },
      { kind: 'amount', name: 'tissue' },
      { kind: 'effect-site', name: 'brain' },
      { kind: 'observation', name: 'total' },
      { kind: 'auc' },
      { kind: 'eliminated' }
    ])
    const course = courseFor(subjectOf(chain, 0), [line(100)], 40)
    for (const { values } of profileRows(course, { every: hours(1), also: [] })) {
      expectWithin(values[0], values[3] / 10, { relative: 1e-15 })
      expectWithin(values[6], (values[3] + values[4]) / 10, { relative: 1e-15 })
      const total = values[1] + values[2] + values[3] + values[4] + values[8]
      if (values[8] > 0) expectWithin(total, 100, { relative: 1e-14 })
    }
  })

  test('of a one-compartment infusion are those of the textbook formula', () => {
    const course = courseFor(subjectOf(oneCompartment({ volume: 10, k: 0.2 })), [line(60, { over: 2 })], 10)
    for (const { time, values } of profileRows(course, { every: hours(0.5), also: [] })) {
      const during = (30 / (0.2 * 10)) * -Math.expm1(-0.2 * Math.min(time, 2))
      const expected = during * Math.exp(-0.2 * Math.max(0, time - 2))
      expectWithin(values[0], expected, { relative: 1e-14 }, `${time} h`)
      const entered = 30 * Math.min(time, 2)
      expectWithin(values[3], entered - expected * 10, { absolute: 1e-13 }, `eliminated by ${time} h`)
    }
  })

  test('at time 0 of a start in steady state are what the body holds, and area and eliminated are 0', () => {
    const model = mammillary({ volumes: [12, 30], clearance: 4, exchanges: [9], ke0: 0.4 })
    const course = courseFor(subjectOf(model), [line(100, { every: hours(6) })], 6, 'steady-state')
    const [first] = Array.from(profileRows(course, { every: hours(6), also: [] }), ({ values }) => [...values])
    expect(first.slice(1, 4)).toEqual([...Array.from(course.initial.amounts), course.initial.effectSites[0]])
    expect(first.slice(4)).toEqual([0, 0])
  })
})
