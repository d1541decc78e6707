import { expect, test } from 'vitest'
import { brief, percent, shownUnit, significant, typed, withUnit } from '../../../src/report/page/number'

test('a computed number has three significant figures, zeros at its end included', () => {
  expect(significant(17.4)).toBe('17.4')
  expect(significant(9)).toBe('9.00')
  expect(significant(0.85049)).toBe('0.850')
  expect(significant(505.49)).toBe('505')
  expect(significant(0.0000351)).toBe('0.0000351')
  expect(significant(0)).toBe('0')
  expect(significant(-2.5)).toBe('−2.50')
})

test('rounding up to a new decade does not add a figure', () => {
  expect(significant(9.996)).toBe('10.0')
  expect(significant(99.96)).toBe('100')
  expect(significant(999.6)).toBe('1\u202f000')
})

test('thousands are grouped, very large and very small numbers are powers of ten', () => {
  expect(significant(1093)).toBe('1\u202f090')
  expect(significant(1234567)).toBe('1\u202f230\u202f000')
  expect(significant(1.5e12)).toBe('1.50e12')
  expect(significant(2.5e-9)).toBe('2.50e-9')
})

test('a typed number keeps every digit and gains none', () => {
  expect(typed(0.1 + 0.2)).toBe('0.3')
  expect(typed(1160)).toBe('1\u202f160')
  expect(typed(1e-7)).toBe('0.0000001')
  expect(brief(0.62)).toBe('0.62')
  expect(brief(1.5016)).toBe('1.50')
})

test('a share that is not whole is never shown as 100 %, nor one that is not none as 0 %', () => {
  expect(percent(1)).toBe('100\u00a0%')
  expect(percent(0)).toBe('0\u00a0%')
  expect(percent(0.99999)).toBe('over\u00a099.9\u00a0%')
  expect(percent(0.00001)).toBe('under\u00a00.1\u00a0%')
  expect(percent(0.967)).toBe('96.7\u00a0%')
  expect(percent(0.9)).toBe('90\u00a0%')
})

test('what is not a number is refused, not shown', () => {
  for (const x of [Number.NaN, Number.POSITIVE_INFINITY]) expect(() => significant(x)).toThrow(RangeError)
})

test('units are written as people write them and stay with their number', () => {
  expect(shownUnit('mg.h/L')).toBe('mg·h/L')
  expect(shownUnit('mL/min/{1.73_m2}')).toBe('mL/min/1.73\u00a0m²')
  expect(shownUnit('ug/L')).toBe('µg/L')
  expect(withUnit('0.62', '1')).toBe('0.62')
  expect(withUnit('1.5', 'L/h')).toBe('1.5\u00a0L/h')
})
