import { expect, test } from 'vitest'
import { dosesOverLimits, type Limit } from '../../src/pk/doseLimits'
import type { DoseLine } from '../../src/pk/prescription'
import { changingCourse } from './exposures'
import { hours, line, oneCompartment, subjectOf } from './subjects'

const subject = subjectOf(oneCompartment({ volume: 10, k: 0.1 }))

function over(limit: Partial<Limit> & Pick<Limit, 'of' | 'value'>, lines: readonly DoseLine[], until = 96) {
  const course = changingCourse(subject, lines, until)
  return dosesOverLimits(course, [{ source: 'the label', ...limit }], ['in']).map(({ at, value }) => [at, value])
}

test('single: each dose over it, and none at it', () => {
  const lines = [line(100, { every: hours(24) }), line(150, { at: 30 })]
  expect(over({ of: 'single', value: 100 }, lines)).toEqual([[30, 150]])
})

test('rate: amount over length; a dose at once on an infusion route is over any rate', () => {
  const lines = [line(100, { over: 2 }), line(100, { over: 0.5, at: 24 }), line(10, { at: 48 })]
  expect(over({ of: 'rate', value: 60 }, lines)).toEqual([
    [24, 200],
    [48, undefined]
  ])
})

test('total: the dose that goes over it and all later ones', () => {
  expect(over({ of: 'total', value: 200 }, [line(100, { every: hours(24) })])).toEqual([
    [48, 300],
    [72, 400]
  ])
})

test('daily: any 24 h, in which two doses 24 h apart do not lie', () => {
  expect(over({ of: 'daily', value: 100 }, [line(100, { every: hours(24) })])).toEqual([])
  expect(over({ of: 'daily', value: 200 }, [line(100, { every: hours(8) })], 40)).toEqual([
    [16, 300],
    [24, 300],
    [32, 300]
  ])
})

test('daily: an infusion counts by what it delivers in the 24 h', () => {
  // 10 mg/h for 48 h: 240 mg in any 24 h.
  expect(over({ of: 'daily', value: 240 }, [line(480, { over: 48 })])).toEqual([])
  expect(over({ of: 'daily', value: 239 }, [line(480, { over: 48 })])).toEqual([[0, 240]])
  // A bolus beside it adds to the 24 h that hold it.
  expect(over({ of: 'daily', value: 250 }, [line(480, { over: 48 }), line(20, { at: 30 })])).toEqual([[30, 260]])
})

test('step: the day that rose; days with a missed dose are not compared with', () => {
  const lines = [line(50, { every: hours(12), count: 4 }), line(100, { at: 48, every: hours(12), count: 4 })]
  expect(over({ of: 'step', value: 60 }, lines)).toEqual([[48, 100]])
  expect(over({ of: 'step', value: 100 }, lines)).toEqual([])
  const missed = line(50, { every: hours(12), exceptions: [{ number: 3, missed: true }] })
  expect(over({ of: 'step', value: 20 }, [missed])).toEqual([])
})

test('step: doses less often than daily are compared interval by interval', () => {
  const lines = [line(100, { every: hours(48), count: 2 }), line(200, { at: 96, every: hours(48), count: 2 })]
  expect(over({ of: 'step', value: 30 }, lines, 192)).toEqual([[96, 50]])
  expect(over({ of: 'step', value: 50 }, lines, 192)).toEqual([])
})

test('a limit of a product judges that product, in its own mass', () => {
  const salt = line(100, { product: 'sodium salt', moietyFraction: 0.92 })
  const lines = [salt, line(100, { at: 24 })]
  expect(over({ of: 'single', value: 95, product: 'sodium salt' }, lines)).toEqual([[0, 100]])
  expect(over({ of: 'single', value: 95 }, lines)).toEqual([[24, 100]])
})

test('what was given counts, not what was ordered', () => {
  const given = line(100, { every: hours(24), exceptions: [{ number: 2, amount: { value: 300, per: 'dose' } }] })
  expect(over({ of: 'single', value: 200 }, [given])).toEqual([[24, 300]])
})
