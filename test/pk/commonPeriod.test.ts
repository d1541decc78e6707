import { expect, test } from 'vitest'
import { commonPeriod } from '../../src/pk/commonPeriod'
import type { Spacing } from '../../src/units/spacing'

const h = (value: number): Spacing => ({ value, times: 1, per: 1 })
const minutes = (value: number): Spacing => ({ value, times: 1, per: 60 })
const days = (value: number): Spacing => ({ value, times: 24, per: 1 })

test.each([
  [[h(12)], [], 12],
  [[h(12), h(8)], [], 24],
  [[h(6), days(1)], [], 24],
  [[h(0.1), h(0.3)], [], 0.3],
  [[minutes(20), h(1.5)], [], 3],
  [[minutes(50), minutes(75)], [], 2.5],
  [[h(12)], [h(44)], 132],
  [[days(7), days(2)], [], 336],
  [[h(2.4), h(3.6)], [], 7.2]
])('%j and sessions %j recur together after %s h', (doses, sessions, expected) => {
  expect(commonPeriod(doses, sessions)).toEqual({ kind: 'period', hours: expected })
})

test('a single line is its own period, however long', () => {
  expect(commonPeriod([days(365)], [])).toEqual({ kind: 'period', hours: 8760 })
  expect(commonPeriod([minutes(1)], [])).toEqual({ kind: 'period', hours: 1 / 60 })
})

test('more than 1,000 doses in the period are no common period', () => {
  expect(commonPeriod([h(1.001), h(24)], []).kind).toBe('none')
  // 2 days hold 960 doses every 3 minutes, and 1,440 every 2.
  expect(commonPeriod([minutes(3), days(2)], [])).toEqual({ kind: 'period', hours: 48 })
  expect(commonPeriod([minutes(2), days(2)], [])).toEqual({
    kind: 'none',
    why: 'no common period: it would hold more than 1000 doses'
  })
})

test('a period longer than 8 weeks needs a line that is given that seldom', () => {
  expect(commonPeriod([days(19), days(4)], []).kind).toBe('none')
  expect(commonPeriod([days(14), days(4)], [])).toEqual({ kind: 'period', hours: 28 * 24 })
  expect(commonPeriod([days(90), days(30)], [])).toEqual({ kind: 'period', hours: 90 * 24 })
  expect(commonPeriod([days(90), days(60)], []).kind).toBe('none')
})

test('numbers that share no divisor for as far as doubles go are no common period, not an error', () => {
  const odd = [1.00000000000001, 1.00000000000003, 1.00000000000007, 1.00000000000009, 1.00000000000013].map(h)
  expect(commonPeriod(odd, []).kind).toBe('none')
})

test('without anything that repeats there is a mistake of ours', () => {
  expect(() => commonPeriod([], [])).toThrow(RangeError)
})
