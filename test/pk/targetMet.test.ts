import { describe, expect, test } from 'vitest'
import type { Target } from '../../src/pk/target'
import type { TargetResult } from '../../src/pk/targetMet'
import { expectWithin } from '../expectWithin'
import { type ExposureOptions, exposureFor, target } from './exposures'
import { hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

const exact = { relative: 1e-12 }

// One compartment, 10 L, k 0.1 /h, 100 mg every 10 h: x = e^-1 is left over; troughs 10 x (1 - x^n) / (1 - x) mg/L after n
// doses, peaks 10 more of the trough before; areas by clearance 1 L/h. All values below follow from these by hand.
const subject = subjectOf(oneCompartment({ volume: 10, k: 0.1 }))
const x = Math.exp(-1)
const regimen = [line(100, { every: hours(10) })]
const troughAfter = (n: number) => (10 * x * (1 - x ** n)) / (1 - x)
const steadyTrough = (10 * x) / (1 - x)

function result(given: Partial<Target> & Pick<Target, 'kind'>, options: ExposureOptions = {}): TargetResult {
  const [found] = exposureFor(subject, regimen, 50, { ...options, targets: [target(given)] }).targets
  return found
}

describe('kinds at steady state', () => {
  test.each([
    ['peak', { low: 15 }, 10 / (1 - x), true],
    ['peak', { low: 16 }, 10 / (1 - x), false],
    ['peak', { high: 15 }, 10 / (1 - x), false],
    ['trough', { high: 6 }, steadyTrough, true],
    ['trough', { low: 6 }, steadyTrough, false],
    ['minimum', { low: 5 }, steadyTrough, true],
    ['average', { low: 9.9, high: 10.1 }, 10, true],
    ['auc24', { low: 239, high: 241 }, 240, true],
    ['auc-interval', { low: 99.9 }, 100, true]
  ] as const)('%s %j is %s: met %s', (kind, limits, value, met) => {
    const found = result({ kind, ...limits })
    expect(found.met).toBe(met)
    expectWithin(found.value ?? Number.NaN, value, exact)
  })

  test('a value at its limit is met, on both sides', () => {
    const { value = Number.NaN } = result({ kind: 'peak', low: 1 })
    expect(result({ kind: 'peak', low: value, high: value }).met).toBe(true)
  })

  test('window, time above and below are shares of time against the share asked for', () => {
    // C > 10 until 10 ln((1/(1-x))) h after the dose, as a share of 10 h.
    const above = Math.log(1 / (1 - x))
    const window = result({ kind: 'window', low: 10, high: 100, share: 0.4 })
    expectWithin(window.value ?? Number.NaN, above, exact)
    expect([window.met, window.unit]).toEqual([true, '1'])
    expect(result({ kind: 'window', low: 10, high: 100, share: 0.5 }).met).toBe(false)
    const over = result({ kind: 'time-above', low: 10, share: 0.4 })
    expectWithin(over.value ?? Number.NaN, above, exact)
    expect(over.met).toBe(true)
    const under = result({ kind: 'time-below', high: 10, share: 0.6 })
    expectWithin(under.value ?? Number.NaN, 1 - above, exact)
    expect(under.met).toBe(false)
  })

  test('level: a stated time after the start, and after the end, of a dose', () => {
    const found = result({ kind: 'level', after: 2, from: 'dose start', low: 12 })
    expectWithin(found.value ?? Number.NaN, (10 / (1 - x)) * Math.exp(-0.2), exact)
    expect(found.met).toBe(true)
    const slow = [line(100, { over: 4, every: hours(10) })]
    const after = { kind: 'level', after: 1, from: 'dose end', low: 1 } as const
    const [end] = exposureFor(subject, slow, 50, { targets: [target(after)] }).targets
    const [start] = exposureFor(subject, slow, 50, {
      targets: [target({ ...after, after: 5, from: 'dose start' })]
    }).targets
    expect(end.value).toBe(start.value)
  })

  test('a level that comes after the next dose cannot be evaluated', () => {
    const found = result({ kind: 'level', after: 11, from: 'dose start', low: 1 })
    expect([found.met, found.value]).toEqual([undefined, undefined])
    expect(found.why).toBe('the next dose comes before the level')
  })

  test('a level right after a bolus is the one just after it', () => {
    const found = result({ kind: 'level', after: 0, from: 'dose start', low: 1 })
    expectWithin(found.value ?? Number.NaN, 10 / (1 - x), exact)
  })
})

describe('where it is judged', () => {
  const trough = { kind: 'trough', low: 1 } as const

  test('every complete interval: the worst trough is the first', () => {
    const found = result({ ...trough, when: { kind: 'every-interval' } })
    expectWithin(found.value ?? Number.NaN, troughAfter(1), exact)
    expect([found.worstFrom, found.count]).toEqual([0, 4])
  })

  test('for a high limit the worst is the last', () => {
    const found = result({ kind: 'trough', high: 20, when: { kind: 'every-interval' } })
    expectWithin(found.value ?? Number.NaN, troughAfter(4), exact)
    expect(found.worstFrom).toBe(30)
  })

  test('the last complete interval', () => {
    const found = result({ ...trough, when: { kind: 'last-interval' } })
    expectWithin(found.value ?? Number.NaN, troughAfter(4), exact)
    expect(found.count).toBe(1)
  })

  test('from now on: intervals that start at or after it', () => {
    const found = result({ ...trough, when: { kind: 'from-now' } }, { now: 15 })
    expectWithin(found.value ?? Number.NaN, troughAfter(3), exact)
    expect([found.worstFrom, found.count]).toEqual([20, 2])
    expect(result({ ...trough, when: { kind: 'from-now' } }).why).toBe('the study has no now')
  })

  test('a day: intervals that start in it; a day that is not complete cannot be evaluated', () => {
    const found = result({ ...trough, when: { kind: 'day', day: 2 } })
    expect([found.worstFrom, found.count]).toEqual([30, 1])
    expect(result({ ...trough, when: { kind: 'day', day: 3 } }).why).toMatch(/day 3 is not complete/)
  })

  test('throughout: peak and minimum from the first dose to the end', () => {
    const peak = result({ kind: 'peak', high: 100, when: { kind: 'throughout' } })
    expectWithin(peak.value ?? Number.NaN, 10 + troughAfter(4), exact)
    const minimum = result({ kind: 'minimum', low: 1, when: { kind: 'throughout' } })
    expectWithin(minimum.value ?? Number.NaN, 10 * x, exact)
  })

  test('area over 24 h: every full 24 h from the first dose, every day, every interval scaled', () => {
    const throughout = result({ kind: 'auc24', low: 1, when: { kind: 'throughout' } })
    expect([throughout.count, throughout.worstFrom]).toEqual([2, 0])
    const days = result({ kind: 'auc24', low: 1, when: { kind: 'every-day' } })
    expect(days.value).toBe(throughout.value)
    const intervals = result({ kind: 'auc24', low: 1, when: { kind: 'every-interval' } })
    expectWithin(intervals.value ?? Number.NaN, 2.4 * 100 * (1 - x), exact)
    const short = exposureFor(subject, regimen, 20, {
      targets: [target({ kind: 'auc24', low: 1, when: { kind: 'throughout' } })]
    }).targets[0]
    expect([short.met, short.why]).toEqual([undefined, 'no full 24 h lie in the time that is judged'])
  })

  test('all must meet: one interval below the limit fails the target and is the value reported', () => {
    const found = result({ kind: 'trough', low: 4, when: { kind: 'every-interval' } })
    expect(found.met).toBe(false)
    expectWithin(found.value ?? Number.NaN, troughAfter(1), exact)
  })

  test('without a steady state it is said why', () => {
    const [found] = exposureFor(subject, [line(100)], 50, { targets: [target({ kind: 'auc24', low: 1 })] }).targets
    expect([found.met, found.value, found.why]).toEqual([undefined, undefined, 'no dose repeats at the end'])
  })

  test('an interval without a trough leaves the target open, unless another fails', () => {
    const lines = [line(1000, { over: 30 }), line(50, { at: 10, every: hours(10) })]
    const judge = (low: number) =>
      exposureFor(subject, lines, 60, {
        targets: [target({ kind: 'trough', low, when: { kind: 'every-interval' } })]
      }).targets[0]
    expect(judge(0.1).met).toBeUndefined()
    expect(judge(0.1).why).toBe('an infusion runs through the whole interval')
    expect(judge(1000).met).toBe(false)
  })
})

test('W20: unbound above the MIC for 58.03 %, peak 10.19 and area over 24 h 60 multiples of it (independent code)', () => {
  const fast = subjectOf(oneCompartment({ volume: 20, k: 0.5 }))
  const factor = 0.8 / 4
  const { targets } = exposureFor(fast, [line(1000, { every: hours(8) })], 24, {
    targets: [
      target({ kind: 'time-above', low: 1, factor, share: 0.58, unit: '1' }),
      target({ kind: 'peak', low: 10, factor, unit: '1' }),
      target({ kind: 'auc24', low: 60.1, factor, unit: 'h' })
    ]
  })
  expectWithin(100 * (targets[0].value ?? Number.NaN), 58.0267634955, { relative: 1e-9 })
  expectWithin(targets[1].value ?? Number.NaN, 10.1865736036, { relative: 1e-9 })
  expectWithin(targets[2].value ?? Number.NaN, 60, { relative: 1e-9 })
  expect(targets.map(({ met }) => met)).toEqual([true, true, false])
})

test('a target on an effect site is judged on the effect site', () => {
  const model = mammillary({ volumes: [10], clearance: 1, exchanges: [], ke0: 0.4 })
  const signal = { kind: 'effect-site', index: 0 } as const
  const { targets } = exposureFor(subjectOf(model), [line(100, { every: hours(10) })], 50, {
    targets: [
      target({ kind: 'average', low: 1, signal }),
      target({ kind: 'peak', low: 1, signal }),
      target({ kind: 'trough', low: 1, signal })
    ]
  })
  // In a period the site has the average of its source; Ce = A (e^(-k t)/(1 - e^(-k tau)) - e^(-ke0 t)/(1 - e^(-ke0 tau))).
  expectWithin(targets[0].value ?? Number.NaN, 10, exact)
  const ce = (t: number) =>
    (10 * 0.4 * (Math.exp(-0.1 * t) / (1 - Math.exp(-1)) - Math.exp(-0.4 * t) / (1 - Math.exp(-4)))) / 0.3
  const t = Math.log(0.4 / (1 - Math.exp(-4)) / (0.1 / (1 - Math.exp(-1)))) / 0.3
  expectWithin(targets[1].value ?? Number.NaN, ce(t), exact)
  expectWithin(targets[2].value ?? Number.NaN, ce(10), exact)
})
