import { describe, expect, test } from 'vitest'
import { areaBetween, crossings, extremes, timeAbove, valueAt } from '../../src/pk/curve'
import { constantState, periodicState } from '../../src/pk/periodic'
import { periodicSegments } from '../../src/pk/periodicSegments'
import { propagate } from '../../src/pk/propagate'
import type { Signal } from '../../src/pk/trajectory'
import { expectWithin } from '../expectWithin'
import { courseFor, hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

// Bourne: Bourne DWA, "A First Course in Pharmacokinetics and Biopharmaceutics" (PHAR 7633 on-line course text, 2001-).
// Numbers to more digits than the text prints were recomputed from its inputs with independent arbitrary-precision code.

const observed: Signal = { kind: 'observed' }
const site: Signal = { kind: 'effect-site', index: 0 }
const precise = { relative: 1e-9 }

describe('one compartment, boluses', () => {
  test('K01: plateau of 100 mg every 6 h, half-life 4 h, 10 L (Bourne ch. 14.6)', () => {
    const model = oneCompartment({ volume: 10, k: Math.LN2 / 4 })
    const segments = periodicSegments({
      model,
      period: 6,
      doses: [{ kind: 'bolus', start: 0, into: 0, amount: 100 }],
      sessions: []
    })
    const steady = propagate(segments, periodicState(segments))
    const { peak, minimum, peakTime } = extremes(steady, observed, 0, 6)
    expectWithin(peak, 15.5, { absolute: 0.05 }, 'printed peak')
    expectWithin(minimum, 5.48, { absolute: 0.02 }, 'printed trough')
    expectWithin(peak, 15.4691816068, precise)
    expectWithin(minimum, 5.46918160678, precise)
    expectWithin(minimum / peak, 0.353553390593, precise, 'R')
    expect(peakTime).toBe(0)
  })

  test('K02: a loading dose of 155 mg starts that regimen at its plateau (Bourne ch. 14.7)', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: Math.LN2 / 4 }))
    const steady = courseFor(subject, [line(100, { every: hours(6) })], 6, 'steady-state').trajectory
    const load = valueAt(steady, observed, 0, 'after') * 10
    expectWithin(load, 155, { absolute: 0.5 }, 'printed')
    expectWithin(load, 154.691816068, precise)
    const course = courseFor(subject, [line(load), line(100, { at: 6, every: hours(6) })], 60)
    for (const at of [6, 12, 54]) {
      expectWithin(
        valueAt(course.trajectory, observed, at, 'after'),
        15.4691816068,
        precise,
        `after the dose at ${at} h`
      )
    }
  })

  test('K04: 800 mg, then 600 mg every 8 h, k 0.15 /h, 25 L (Bourne ch. 14.7)', () => {
    const subject = subjectOf(oneCompartment({ volume: 25, k: 0.15 }))
    const { trajectory } = courseFor(subject, [line(800), line(600, { at: 8, every: hours(8) })], 400)
    expectWithin(valueAt(trajectory, observed, 0, 'after'), 32, precise)
    expectWithin(valueAt(trajectory, observed, 8, 'before'), 9.63821478119, precise)
    expectWithin(valueAt(trajectory, observed, 8, 'after'), 33.6382147812, precise, 'second peak')
    expectWithin(valueAt(trajectory, observed, 16, 'after'), 34.1316355912, precise, 'third peak')
    const { peak, minimum } = extremes(trajectory, observed, 384, 392)
    expectWithin(peak, 34.3443062566, precise, 'plateau')
    expectWithin(minimum, 10.3443062566, precise, 'plateau')
  })

  test('W20: time above 4 mg/L unbound of 1000 mg every 8 h, 20 L, k 0.5 /h, fu 0.8 (computed by independent code)', () => {
    const subject = subjectOf(oneCompartment({ volume: 20, k: 0.5 }))
    const { trajectory } = courseFor(subject, [line(1000, { every: hours(8) })], 80, 'steady-state')
    const unbound = 0.8
    const above = timeAbove(trajectory, observed, 4 / unbound, 8, 16)
    expectWithin(above, 4.64214107964, precise)
    expectWithin((100 * above) / 8, 58.0267634955, precise)
    expectWithin((extremes(trajectory, observed, 8, 16).peak * unbound) / 4, 10.1865736036, precise)
    expectWithin((3 * areaBetween(trajectory, observed, 8, 16) * unbound) / 4, 60, precise)
  })
})

describe('constant infusion', () => {
  test('K05: 60 mg/h, k 0.17 /h, 25 L: plateau, and the time to 10 mg/L (Bourne ch. 6.4)', () => {
    const model = oneCompartment({ volume: 25, k: 0.17 })
    const plateau = constantState(model, [60]).amounts[0] / 25
    expectWithin(plateau, 14.1, { absolute: 0.05 }, 'printed')
    expectWithin(plateau, 14.1176470588, precise)
    const { trajectory } = courseFor(subjectOf(model), [line(60 * 48, { over: 48 })], 48)
    const [first, ...rest] = crossings(trajectory, observed, 10, 0, 48)
    expectWithin(first.time, 7.24, { absolute: 0.01 }, 'printed')
    expectWithin(first.time, 7.2479040076, precise)
    expect(first.direction).toBe('up')
    expect(rest).toEqual([])
  })

  test('K06: after 1, 2, 3, 4 half-lives an infusion is at 50, 75, 87.5, 93.75 % of its plateau (Bourne ch. 6)', () => {
    const model = oneCompartment({ volume: 25, k: Math.LN2 / 5 })
    const { trajectory } = courseFor(subjectOf(model), [line(1000, { over: 100 })], 100)
    const plateau = constantState(model, [10]).amounts[0] / 25
    ;[50, 75, 87.5, 93.75].forEach((percent, i) => {
      expectWithin((100 * valueAt(trajectory, observed, 5 * (i + 1), 'before')) / plateau, percent, { relative: 1e-13 })
    })
  })

  test('K07: 90 mg/h holds 30 mg/L, and a bolus of 450 mg starts there, 15 L, k 0.2 /h (Bourne ch. 19.6)', () => {
    const model = mammillary({ volumes: [15, 30], clearance: 3, exchanges: [4] })
    expectWithin(constantState(model, [90, 0]).amounts[0] / 15, 30, { relative: 1e-15 })
    const { trajectory } = courseFor(subjectOf(model), [line(450)], 1)
    expect(valueAt(trajectory, observed, 0, 'after')).toBe(30)
  })

  test('K09: 500 mg into 16 L start at 31.25 mg/L, printed as 31.3 (Bourne ch. 19.6)', () => {
    const model = mammillary({ volumes: [16, 20], clearance: 2, exchanges: [5] })
    const { trajectory } = courseFor(subjectOf(model), [line(500)], 1)
    expect(valueAt(trajectory, observed, 0, 'before')).toBe(0)
    expect(valueAt(trajectory, observed, 0, 'after')).toBe(31.25)
  })
})

describe('absorption', () => {
  test('K10: F 0.9, 600 mg, ka 1, k 0.15 /h, 30 L: peak, area, plateau every 8 h (Bourne ch. 8, 17)', () => {
    const subject = subjectOf(oneCompartment({ volume: 30, k: 0.15, ka: 1 }), 0, { bioavailability: 0.9 })
    const single = courseFor(subject, [line(600)], 400).trajectory
    const { peak, peakTime } = extremes(single, observed, 0, 400)
    expectWithin(peakTime, 2.23190586457, precise)
    expectWithin(peak, 12.878842881, precise)
    expectWithin(areaBetween(single, observed, 0, 400), 120, precise)
    const steady = courseFor(subject, [line(600, { every: hours(8) })], 24, 'steady-state').trajectory
    const plateau = extremes(steady, observed, 8, 16)
    expectWithin(plateau.peakTime - 8, 1.81067421875, precise)
    expectWithin(plateau.peak, 19.6318459871, precise)
    expectWithin(valueAt(steady, observed, 16, 'before'), 9.12022275161, precise, 'trough')
    expectWithin(areaBetween(steady, observed, 8, 16) / 8, 15, precise, 'average')
  })

  test.each([1, 1 + 1e-9, 1 - 1e-12])(
    'K12: ka = k x %s needs no difference of rates (Garrett 1994 J Pharmacokinet Biopharm 22:103, eqs 25-27; Bialer 1980 ibid. 8:111)',
    (ratio) => {
      const subject = subjectOf(oneCompartment({ volume: 30, k: 0.15, ka: 0.15 * ratio }), 0, { bioavailability: 0.9 })
      const { trajectory } = courseFor(subject, [line(600)], 48)
      const { peak, peakTime } = extremes(trajectory, observed, 0, 48)
      expectWithin(peakTime, 6.66666666667, precise)
      expectWithin(peak, 6.62182994109, precise)
      expectWithin(valueAt(trajectory, observed, 3, 'before'), 5.16478802814, precise)
    }
  )
})

// Minto CF et al. 1997 Anesthesiology 86:10 (abstract: parameters of the simple model); numbers recomputed from them with
// independent code. Times in minutes, which the arithmetic does not mind.
describe('K17: remifentanil, three compartments and an effect site', () => {
  const model = mammillary({ volumes: [4.98, 9.01, 6.54], clearance: 2.46, exchanges: [1.69, 0.065], ke0: 0.516 })

  test('peak at the effect site after a bolus', () => {
    const { trajectory } = courseFor(subjectOf(model), [line(1)], 60)
    const { peak, peakTime } = extremes(trajectory, site, 0, 60)
    expectWithin(peakTime, 1.59911012311, precise)
    expectWithin(peak / valueAt(trajectory, observed, 0, 'after'), 0.289711203233, precise)
    expectWithin(1 / peak, 17.1895320044, precise, 'volume at peak effect')
  })

  test.each([
    [1, 0.903777699938],
    [10, 1.46169279805],
    [60, 1.98235118637],
    [180, 2.03409946907],
    [240, 2.04404861726],
    [480, 2.05553060831]
  ])('after a constant-rate infusion of %s min the concentration halves in %s min', (length, half) => {
    const { trajectory } = courseFor(subjectOf(model), [line(length, { over: length })], length + 30)
    const level = valueAt(trajectory, observed, length, 'before') / 2
    const [crossing] = crossings(trajectory, observed, level, length, length + 30)
    expect(crossing.direction).toBe('down')
    expectWithin(crossing.time - length, half, precise)
  })
})
