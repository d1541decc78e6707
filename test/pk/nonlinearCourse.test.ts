import { describe, expect, test } from 'vitest'
import { courseOf } from '../../src/pk/course'
import { areaBetween, crossings, extremes, valueAt } from '../../src/pk/curve'
import { drugFreeState } from '../../src/pk/drugFree'
import type { Model } from '../../src/pk/model'
import { phasesOf } from '../../src/pk/phases'
import type { DoseLine } from '../../src/pk/prescription'
import { profileColumns, profileRows } from '../../src/pk/profile'
import type { Subject } from '../../src/pk/subject'
import type { Signal } from '../../src/pk/trajectory'
import { expectWithin } from '../expectWithin'
import { saturableDecline } from '../oracle/lambertW'
import { exposureFor } from './exposures'
import { mixed, saturable, targetMediated } from './nonlinearModels'
import { courseFor, hours, line, oneCompartment, subjectOf } from './subjects'

const observed: Signal = { kind: 'observed' }
const volume = 49
const fastest = 415 / 24 / volume
const half = 5.7
const phenytoin = saturable({ volume, maximumRate: 415 / 24, halfSaturation: half })

describe('the course of a regimen', () => {
  test('says by which method it was computed', () => {
    expect(courseFor(subjectOf(oneCompartment({ volume: 20, k: 0.1 })), [line(100)], 24).method).toBe('exact')
    expect(courseFor(subjectOf(phenytoin), [line(100)], 24).method).toBe('integrated')
  })

  test('of daily doses is the Lambert W closed form from dose to dose', () => {
    const { trajectory } = courseFor(subjectOf(phenytoin), [line(300, { every: hours(24) })], 10 * 24)
    let level = 0
    for (let day = 0; day < 10; day++) {
      level += 300 / volume
      const initial = level
      for (const time of [2, 11, 24]) {
        level = saturableDecline({ initial, fastest, half, time })
        expectWithin(valueAt(trajectory, observed, 24 * day + time, 'before'), level, { relative: 1e-7 }, `day ${day}`)
      }
    }
  })

  test('crosses a level when the integrated Michaelis-Menten equation says', () => {
    const { trajectory } = courseFor(subjectOf(phenytoin), [line(980)], 120)
    for (const level of [15, 10, 2]) {
      const time = (20 - level + half * Math.log(20 / level)) / fastest
      const [up, down, ...others] = crossings(trajectory, observed, level, 0, 120)
      expect([up, others]).toEqual([{ time: 0, direction: 'up' }, []])
      expectWithin(down.time, time, { relative: 1e-7 })
    }
  })

  test('turns where what enters is what leaves', () => {
    const subject = subjectOf(mixed(), 0)
    const { trajectory } = courseFor(subject, [line(200, { every: hours(12) })], 48)
    for (const from of [0, 12, 24, 36]) {
      const { peak, peakTime, minimum } = extremes(trajectory, observed, from, from + 12)
      const at = (time: number): number => valueAt(trajectory, observed, time, 'before')
      for (let k = 1; k < 200; k++) expect(at(from + k * 0.06)).toBeLessThanOrEqual(peak * (1 + 1e-12))
      expectWithin(at(peakTime), peak, { relative: 1e-13 })
      expect(minimum).toBeLessThanOrEqual(at(from + 12))
      // A parabola at its top: as far down on one side as on the other.
      const [before, after] = [peakTime - 0.001, peakTime + 0.001].map((time) => peak - at(time))
      expect(before).toBeGreaterThan(0)
      expectWithin(after, before, { relative: 0.02 })
    }
  })
})

describe('a body that makes a target', () => {
  const model = targetMediated({ approximation: 'none', turnover: true })

  test('starts with it at production over loss, and stays so without drug', () => {
    expect(Array.from(drugFreeState(model).amounts)).toEqual([0, 0, 3, 0])
    const course = courseFor(subjectOf(model), [line(10, { at: 500 })], 501)
    expect(Array.from(course.initial.amounts)).toEqual([0, 0, 3, 0])
    const amounts = new Float64Array(4)
    course.trajectory.pieces[0].amountsInto(500, amounts)
    expectWithin(amounts[2], 3, { relative: 1e-13 })
    expect([amounts[0], amounts[1], amounts[3]]).toEqual([0, 0, 0])
  })

  test('has no amount column for it, and the drug in the others balances at every row', () => {
    const course = courseFor(subjectOf(model), [line(10, { every: hours(100) })], 1000)
    expect(profileColumns(model).flatMap((column) => (column.kind === 'amount' ? [column.name] : []))).toEqual([
      'drug',
      'peripheral',
      'complex'
    ])
    for (const { time, row, values } of profileRows(course, { every: hours(7), also: [] })) {
      const doses = Math.ceil(time / 100 - 1e-9) + (row === 'after dose' ? 1 : 0)
      const held = values[1] + values[2] + values[3] + values[values.length - 1]
      expectWithin(held, 10 * Math.min(doses, 10), { absolute: 1e-12 * 100 }, `${time} h ${row}`)
    }
  })

  test('keeps drug and target to 1e-13 where nothing leaves', () => {
    const closed = targetMediated({ approximation: 'none', turnover: false })
    const transfers: Model['transfers'] = [...closed.transfers, { kind: 'production', into: 2, rate: 0.06 }]
    const outcome = courseOf({
      prescription: { name: 'regimen', start: 'empty', lines: [line(10)] },
      stretches: [{ from: 0, subject: subjectOf({ ...closed, transfers }) }],
      sessions: [],
      until: 10,
      path: 'regimens[0]'
    })
    expect(outcome).toEqual({
      ok: false,
      issues: [
        { path: 'regimens[0].start', message: 'no steady state: target that enters compartment "target" never leaves' }
      ]
    })
  })
})

describe('a start in steady state', () => {
  const cases: [string, Subject, readonly DoseLine[]][] = [
    ['one line', subjectOf(mixed(), 0, { lag: 1.5 }), [line(150, { at: 2, every: hours(12) })]],
    [
      'two lines with a common period, infusions that run into the next interval',
      subjectOf(mixed(), 1),
      [line(60, { every: hours(6), over: 7 }), line(100, { at: 3, every: hours(8) })]
    ],
    [
      'a target',
      subjectOf(targetMediated({ approximation: 'none', turnover: true })),
      [line(20, { every: hours(336), over: 1 })]
    ]
  ]
  test.each(cases)('with %s is where 100 earlier periods lead, and goes on the same', (_, subject, lines) => {
    const period = lines.length > 1 ? 24 : (lines[0].every?.value ?? Number.NaN)
    const until = 2.5 * period
    const steady = courseFor(subject, lines, until, 'steady-state')
    const zero = 100 * period
    const long = courseFor(subject, lines, zero + until)
    for (const share of [0, 0.1, 0.4, 0.99, 1.3, 2.2, 2.5]) {
      const value = valueAt(steady.trajectory, observed, share * period, 'before')
      expectWithin(value, valueAt(long.trajectory, observed, zero + share * period, 'before'), { relative: 1e-6 })
    }
  })

  const startOf = (lines: readonly DoseLine[], model: Model = phenytoin): unknown =>
    courseOf({
      prescription: { name: 'regimen', start: 'steady-state', lines },
      stretches: [{ from: 0, subject: subjectOf(model) }],
      sessions: [],
      until: 48,
      path: 'regimens[0]'
    })

  test('is refused above capacity', () => {
    expect(startOf([line(430, { every: hours(24) })])).toEqual({
      ok: false,
      issues: [
        {
          path: 'regimens[0].start',
          message: 'no steady state: the dose rate 430 mg/d is above the capacity 415 mg/d'
        }
      ]
    })
  })

  test('is refused without a common period', () => {
    const outcome = startOf([line(10, { every: hours(24) }), line(10, { every: hours(23.999) })])
    expect(JSON.stringify(outcome)).toContain(
      'no common period: it would hold more than 1000 doses; a model that is not linear has a steady state only for all doses together'
    )
  })

  test('without a line that repeats is a body without drug, and says so', () => {
    const course = courseFor(
      subjectOf(targetMediated({ approximation: 'none', turnover: true })),
      [line(10)],
      48,
      'steady-state'
    )
    expect(Array.from(course.initial.amounts)).toEqual([0, 0, 3, 0])
    expect(course.notes).toContain('no dose line repeats from the start on: the body has no drug at 0 h')
  })
})

describe('the exposure of a model that is not linear', () => {
  /** Levels and areas of daily boluses by the closed forms, until they are steady. */
  function windows(dose: number, count: number): { areas: number[]; troughs: number[] } {
    const areas: number[] = []
    const troughs: number[] = []
    let trough = 0
    for (let k = 0; k < count; k++) {
      const initial = trough + dose / volume
      trough = saturableDecline({ initial, fastest, half, time: 24 })
      areas.push(((initial - trough) * (half + (initial + trough) / 2)) / fastest)
      troughs.push(trough)
    }
    return { areas, troughs }
  }

  /** Time from which on all are within 10 % of the goal. */
  function reached(values: readonly number[], goal: number): number {
    let first = values.length
    while (first > 0 && Math.abs(values[first - 1] - goal) <= 0.1 * goal) first -= 1
    return 24 * (first + 1)
  }

  test.each([100, 300, 350, 400])('%s mg a day: steady state and the time until it is near', (dose) => {
    const { steadyState } = exposureFor(subjectOf(phenytoin), [line(dose, { every: hours(24) })], 28 * 24)
    const rise = dose / volume
    const trough = rise / Math.expm1((415 - dose) / (volume * half))
    const auc = (rise * (half + trough + rise / 2)) / fastest
    expectWithin(steadyState.auc ?? Number.NaN, auc, { relative: 1e-6 })
    expectWithin(steadyState.average ?? Number.NaN, auc / 24, { relative: 1e-6 })
    expectWithin(steadyState.trough ?? Number.NaN, trough, { relative: 1e-6 })
    expectWithin(steadyState.peak ?? Number.NaN, trough + rise, { relative: 1e-6 })
    expectWithin(steadyState.fluctuation ?? Number.NaN, (24 * rise) / auc, { relative: 1e-6 })
    const { areas, troughs } = windows(dose, 6000)
    expectWithin(areas[5999], auc, { relative: 1e-3 })
    expect(steadyState.reached90).toBe(reached(areas, auc))
    expect(steadyState.reached90ByTrough).toBe(reached(troughs, trough))
  })

  test('a change of dose: 90 % of the change', () => {
    const lines = [line(200, { every: hours(24), count: 20 }), line(300, { at: 480, every: hours(24) })]
    const { steadyState } = exposureFor(subjectOf(phenytoin), lines, 28 * 24)
    const before = windows(200, 20)
    let trough = before.troughs[19]
    const rise = 300 / volume
    const goalTrough = rise / Math.expm1(115 / (volume * half))
    const goal = (rise * (half + goalTrough + rise / 2)) / fastest
    let last = 0
    for (let k = 0; k < 300; k++) {
      const initial = trough + rise
      trough = saturableDecline({ initial, fastest, half, time: 24 })
      const area = ((initial - trough) * (half + (initial + trough) / 2)) / fastest
      if (Math.abs(area - goal) > 0.1 * Math.abs(goal - before.areas[19])) last = k + 1
    }
    expect(steadyState.reached90OfChange).toBe(480 + 24 * (last + 1))
  })

  test('what belongs to linear models is not defined, and says what is shown instead', () => {
    const { steadyState } = exposureFor(subjectOf(phenytoin), [line(300, { every: hours(24) })], 28 * 24)
    const { why, accumulationRatio, peakRatio, troughRatio, effectiveHalfLife, operationalHalfLife } = steadyState
    for (const value of [accumulationRatio, peakRatio, troughRatio, effectiveHalfLife, operationalHalfLife]) {
      expect(value).toBeUndefined()
    }
    for (const name of ['accumulationRatio', 'peakRatio', 'troughRatio']) {
      expect(why[name]).toContain('the steady-state average against the dose rate is shown instead')
    }
    for (const name of ['effectiveHalfLife', 'operationalHalfLife']) {
      expect(why[name]).toContain('the time to 90 % of steady state from the actual curve is shown instead')
    }
    const phases = phasesOf({ model: phenytoin, from: 0, to: 10, until: 10, periods: [24], infusions: [1] })
    for (const name of ['phases', 'rulingPhase', 'stiffness', 'vss', 'vz', 'mrt', 'clearance', 'terminalHalfLife']) {
      expect(phases.why[name]).toContain('the instantaneous half-life at a level is shown instead')
    }
  })

  test('above capacity everything of the steady state is not defined for that reason', () => {
    const { steadyState } = exposureFor(subjectOf(phenytoin), [line(430, { every: hours(24) })], 28 * 24)
    for (const [name, reason] of Object.entries(steadyState.why)) {
      expect(reason, name).toBe('no steady state: the dose rate 430 mg/d is above the capacity 415 mg/d')
    }
    expect(Object.keys(steadyState.why).length).toBeGreaterThan(15)
  })

  test('the capacity is compared with what enters: product fraction and bioavailability', () => {
    const subject = subjectOf(phenytoin, 0, { bioavailability: 0.8 })
    const given = (amount: number): number | undefined =>
      exposureFor(subject, [line(amount, { every: hours(24), moietyFraction: 0.92 })], 48).steadyState.average
    expect(given(563)).toBeGreaterThan(100)
    expect(given(564)).toBeUndefined()
  })

  test('an endless infusion: the constant level, and when it is near', () => {
    const { steadyState } = exposureFor(subjectOf(phenytoin), [line(300 * 28, { over: 28 * 24 })], 28 * 24)
    expectWithin(steadyState.average ?? Number.NaN, 14.8695652174, { relative: 1e-9 })
    expectWithin(steadyState.auc24 ?? Number.NaN, 24 * 14.8695652174, { relative: 1e-9 })
    // V dC/dt = R - Vm C / (K + C), by the integral of V (K + C) / (R K - (Vm - R) C) from 0 to 90 % of the level.
    const rate = 300 / 24
    const left = 415 / 24 - rate
    const level = 0.9 * 14.8695652174
    const time = (volume / left) * (-level + (half + (rate * half) / left) * Math.log(1 / (1 - 0.9)))
    expectWithin(steadyState.reached90ByLevel ?? Number.NaN, time, { relative: 1e-6 })
  })

  test('areas under an observation and an effect site', () => {
    const { trajectory } = courseFor(subjectOf(mixed(), 0), [line(200)], 2000)
    const site = areaBetween(trajectory, { kind: 'effect-site', index: 0 }, 0, 2000)
    expectWithin(site, areaBetween(trajectory, observed, 0, 2000), { relative: 1e-6 })
    const both = areaBetween(trajectory, { kind: 'observation', index: 0 }, 0, 2000)
    // Over all time the peripheral compartment has 0.6 / 0.25 of the area of the central one.
    expectWithin(both, 3.4 * site, { relative: 1e-6 })
  })
})
