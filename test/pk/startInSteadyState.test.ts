import { describe, expect, test } from 'vitest'
import { type Course, courseOf } from '../../src/pk/course'
import { valueAt } from '../../src/pk/curve'
import type { DoseLine } from '../../src/pk/prescription'
import type { Route, Subject } from '../../src/pk/subject'
import type { Signal } from '../../src/pk/trajectory'
import { expectWithin } from '../expectWithin'
import { courseFor, hours, line, mammillary, subjectOf } from './subjects'

const model = mammillary({ volumes: [12, 30], clearance: 4, exchanges: [9], ke0: 0.4 })
const signals: Signal[] = [{ kind: 'observed' }, { kind: 'effect-site', index: 0 }]

/** The same lines given for 400 intervals before. */
function longBefore(
  subject: Subject,
  lines: readonly DoseLine[],
  interval: number,
  until: number
): { course: Course; zero: number } {
  const zero = 400 * interval
  return { course: courseFor(subject, lines, zero + until), zero }
}

describe('a start in steady state', () => {
  const cases: [string, Partial<Route>, Partial<DoseLine>][] = [
    ['boluses', {}, { at: 2 }],
    ['a lag within the interval', { lag: 1.5 }, {}],
    ['a lag that reaches over two later doses', { lag: 13 }, { at: 1 }],
    ['a bolus whose lag is the interval', { lag: 6 }, {}],
    ['infusions that run into the next interval', {}, { at: 5, over: 2.5 }],
    ['infusions that overlap three times', {}, { at: 1, over: 16.25 }],
    ['infusions of two intervals', {}, { over: 12 }],
    [
      'a release that outlasts the interval, after its lag, beside a part at once',
      {
        bioavailability: 0.7,
        parts: [
          { into: 0, fraction: 0.25, lag: 0 },
          { into: 1, fraction: 0.75, lag: 4.5, over: 20 }
        ]
      },
      { at: 0.5 }
    ]
  ]
  test.each(cases)('with %s is where 400 earlier intervals lead, and goes on the same', (_, route, rest) => {
    const subject = subjectOf(model, 0, route)
    const lines = [line(100, { ...rest, every: hours(6) })]
    const steady = courseFor(subject, lines, 20, 'steady-state')
    const { course, zero } = longBefore(subject, lines, 6, 20)
    for (const signal of signals) {
      for (const at of [0, 0.4, 1, 3.3, 6.7, 12.9, 20]) {
        for (const side of ['before', 'after'] as const) {
          // Time 0 of the explicit course is 2400 h, where times have 12 digits after the decimal point.
          const expected = valueAt(course.trajectory, signal, zero + at, side)
          expectWithin(valueAt(steady.trajectory, signal, at, side), expected, { relative: 2e-12 }, `${at} h ${side}`)
        }
      }
    }
  })

  test('leaves exceptions, single doses and lines that begin later than an interval out of what came before', () => {
    const subject = subjectOf(model)
    const exceptions = [{ number: 1, missed: true }]
    const repeating = line(100, { every: hours(6) })
    const steady = courseFor(
      subject,
      [{ ...repeating, exceptions }, line(50), line(70, { at: 6, every: hours(6) })],
      5,
      'steady-state'
    )
    const alone = courseFor(subject, [repeating], 5, 'steady-state')
    expect(steady.initial).toEqual(alone.initial)
    expect(steady.notes).toEqual([expect.stringContaining('dose line 3')])
    const [missed] = steady.administrations
    expect(missed.missed).toBe(true)
    // Only the single 50 mg enters at 0.
    const rise =
      valueAt(steady.trajectory, signals[0], 0, 'after') - valueAt(steady.trajectory, signals[0], 0, 'before')
    expectWithin(rise, 50 / 12, { relative: 1e-14 })
  })

  test('adds lines with intervals that have no common multiple', () => {
    const subject = subjectOf(model)
    const a = line(100, { every: hours(6) })
    const b = line(40, { every: hours(7.3), over: 1 })
    const both = courseFor(subject, [a, b], 5, 'steady-state').initial.amounts
    const alone = [a, b].map((one) => courseFor(subject, [one], 5, 'steady-state').initial.amounts)
    expectWithin(both[0], alone[0][0] + alone[1][0], { relative: 1e-15 })
  })

  test('is refused by name where drug can never leave', () => {
    const trapped = { ...model, transfers: [] }
    const outcome = courseOf({
      prescription: { name: 'regimen', start: 'steady-state', lines: [line(10, { every: hours(12) })] },
      stretches: [{ from: 0, subject: subjectOf(trapped) }],
      sessions: [],
      until: 24,
      path: 'regimens[0]'
    })
    expect(outcome).toEqual({
      ok: false,
      issues: [{ path: 'regimens[0].start', message: expect.stringContaining('"V1" never leaves') }]
    })
  })
})
