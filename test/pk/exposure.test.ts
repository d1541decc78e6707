import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { expectWithin } from '../expectWithin'
import { exposureFor, target } from './exposures'
import { hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

// Sums of exponentials in 32-digit arithmetic, by test/reference/generate/pk_exposure.py: the woman of 71 years of the
// PW-101 model (invented), a regimen with a load, a missed dose and a late one.
const { given } = JSON.parse(readFileSync('test/reference/pk/exposure.json', 'utf8')).cases
const exact = { relative: 1e-12 }
const rooted = { relative: 1e-11 }

const pw101 = subjectOf(mammillary({ volumes: [17.4, 38], clearance: 1.5016171875, exchanges: [9] }))
const window = target({ kind: 'window', when: { kind: 'throughout' }, low: 20, high: 40, share: 0.9 })
const load = line(1500, { over: 2 })
const maintenance = line(750, {
  over: 1,
  at: 12,
  every: hours(12),
  count: 5,
  exceptions: [
    { number: 2, missed: true },
    { number: 4, lateBy: 2 }
  ]
})

describe('a regimen as it was given', () => {
  const found = exposureFor(pw101, [load, maintenance], 72, { targets: [window], now: 40 })

  test('a missed dose lengthens its interval, a late one moves its ends', () => {
    expect(found.intervals.map(({ start, end, incomplete }) => [start, end, incomplete])).toEqual([
      [0, 12, false],
      [12, 36, false],
      [36, 50, false],
      [50, 60, false],
      [60, 72, true]
    ])
  })

  test('area, peak, minimum, trough and average of every interval', () => {
    found.intervals.forEach((interval, i) => {
      const expected = given.intervals[i]
      expectWithin(interval.auc, expected.auc, exact, `area ${i}`)
      expectWithin(interval.peak, expected.peak, exact, `peak ${i}`)
      expect(interval.peakTime).toBe(expected.peakTime)
      expectWithin(interval.minimum, expected.minimum, exact, `minimum ${i}`)
      expectWithin(interval.average * (interval.end - interval.start), expected.auc, exact, `average ${i}`)
      if (expected.trough === null) {
        expect(interval.trough).toBeUndefined()
        expect(interval.why.trough).toMatch(/no dose follows/)
      } else expectWithin(interval.trough ?? Number.NaN, expected.trough, exact, `trough ${i}`)
    })
  })

  test('area and time shares of every day', () => {
    expect(found.days).toHaveLength(3)
    found.days.forEach((day, i) => {
      const expected = given.days[i]
      expectWithin(day.auc ?? Number.NaN, expected.auc, exact, `area of day ${i + 1}`)
      expectWithin(day.timeAbove ?? Number.NaN, expected.timeAbove, rooted, `above on day ${i + 1}`)
      expectWithin(day.timeBelow ?? Number.NaN, expected.timeBelow, rooted, `below on day ${i + 1}`)
      const inside = 1 - expected.timeAbove - expected.timeBelow
      expectWithin(day.timeInWindow ?? Number.NaN, inside, rooted, `inside on day ${i + 1}`)
    })
  })

  test('time in, above and below the window from the first dose to the end, and time to reach it', () => {
    expectWithin(found.timeAbove ?? Number.NaN, given.timeAbove, rooted)
    expectWithin(found.timeBelow ?? Number.NaN, given.timeBelow, rooted)
    expectWithin(found.timeInWindow ?? Number.NaN, 1 - given.timeAbove - given.timeBelow, rooted)
    expectWithin(found.timeToReach ?? Number.NaN, given.timeToReach, rooted)
    expect(found.timeToLeave).toBeUndefined()
    expect(found.why.timeToLeave).toMatch(/does not fall below/)
  })

  test('the highest running area over 24 h', () => {
    expectWithin(found.highestRunningAuc24?.auc ?? Number.NaN, given.highestRunningAuc24.auc, exact)
    expect(found.highestRunningAuc24?.from).toBe(given.highestRunningAuc24.from)
  })

  test('area of the 24 h before and after now', () => {
    const before = exposureFor(pw101, [load, maintenance], 40)
    const sum = before.intervals.reduce((total, { auc }) => total + auc, 0)
    const early = exposureFor(pw101, [load, maintenance], 16).intervals.reduce((total, { auc }) => total + auc, 0)
    expectWithin(found.aucLast24 ?? Number.NaN, sum - early, exact)
    const late = exposureFor(pw101, [load, maintenance], 64).intervals.reduce((total, { auc }) => total + auc, 0)
    expectWithin(found.aucNext24 ?? Number.NaN, late - sum, exact)
  })
})

describe('what is not defined says why', () => {
  test('a study without a window, a now, or 24 h', () => {
    const found = exposureFor(pw101, [line(750)], 20)
    expect(found.timeInWindow).toBeUndefined()
    expect(found.highestRunningAuc24).toBeUndefined()
    for (const name of ['timeInWindow', 'timeAbove', 'timeBelow', 'timeToReach', 'timeToLeave']) {
      expect(found.why[name], name).toBe('no target is a window')
    }
    expect(found.why.aucLast24).toBe('the study has no now')
    expect(found.why.highestRunningAuc24).toBe('the study is shorter than 24 h')
  })

  test('a day that is not complete has no numbers', () => {
    const [first, second] = exposureFor(pw101, [line(750)], 40, { targets: [window] }).days
    expect(first.complete).toBe(true)
    expect(first.why).toEqual({})
    expect([second.complete, second.auc, second.timeInWindow, second.timeAbove, second.timeBelow]).toEqual([
      false,
      undefined,
      undefined,
      undefined,
      undefined
    ])
    expect(second.why.auc).toMatch(/not complete/)
  })

  test('an interval through which an infusion runs has peak and minimum but no trough', () => {
    const found = exposureFor(pw101, [line(1000, { over: 30 }), line(500, { at: 6, over: 1, every: hours(8) })], 30)
    expect(found.intervals.map(({ trough }) => trough)).toEqual([undefined, undefined, undefined, undefined])
    expect(found.intervals[1].why.trough).toBe('an infusion runs through the whole interval')
    expect(found.intervals[1].minimum).toBeGreaterThan(0)
  })

  test('a window that is left says when', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: 0.1 }))
    const found = exposureFor(subject, [line(400), line(400, { at: 10 })], 48, { targets: [window] })
    // C = 40 (1 + e) e^(-0.1 t) after the second dose falls to 20 at 10 ln(2 (1 + e)).
    expectWithin(found.timeToLeave ?? Number.NaN, 10 * Math.log(2 * (1 + Math.E)), exact)
    expect(found.timeToReach).toBe(0)
  })
})

test('doses that start together are one', () => {
  const found = exposureFor(pw101, [line(300, { every: hours(12) }), line(450, { over: 1, every: hours(12) })], 36)
  expect(found.intervals.map(({ start, administrations }) => [start, administrations.length])).toEqual([
    [0, 2],
    [12, 2],
    [24, 2]
  ])
  expect(found.steadyState.intervals).toHaveLength(1)
  expect(found.steadyState.effectiveHalfLife).toBeGreaterThan(0)
})

test('a dose of which nothing was given starts no interval', () => {
  const taken = line(300, { every: hours(12), exceptions: [{ number: 2, fractionTaken: 0 }] })
  expect(exposureFor(pw101, [taken], 36).intervals.map(({ start }) => start)).toEqual([0, 24])
})

test('the highest running area of one oral dose ends where the level is back at that of 24 h before', () => {
  const subject = subjectOf(oneCompartment({ volume: 30, k: 0.15, ka: 1 }), 0)
  const found = exposureFor(subject, [line(600, { at: 30 })], 96).highestRunningAuc24
  const level = (t: number) => (20 / 0.85) * (Math.exp(-0.15 * t) - Math.exp(-t))
  const from = (found?.from ?? Number.NaN) - 30
  expectWithin(level(from + 24), level(from), { relative: 1e-11 })
  expect(from).toBeGreaterThan(0)
  const area = (t: number) => (20 / 0.85) * ((1 - Math.exp(-0.15 * t)) / 0.15 - (1 - Math.exp(-t)))
  expectWithin(found?.auc ?? Number.NaN, area(from + 24) - area(from), exact)
})
