import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { effectiveHalfLife, operationalHalfLife } from '../../src/pk/halfLives'
import { expectWithin } from '../expectWithin'
import { exposureFor, number, target } from './exposures'
import { hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

const precise = { relative: 1e-9 }
const exact = { relative: 1e-12 }

// The woman of 71 years of the PW-101 model (invented): CL 1.5016, V1 17.4, Q 9, V2 38. Values to 9 digits were computed
// from exponential sums with independent code; those of the file by test/reference/generate/pk_exposure.py.
const { cases } = JSON.parse(readFileSync('test/reference/pk/exposure.json', 'utf8'))
const disposition = { volumes: [17.4, 38], clearance: 1.5016171875, exchanges: [9] }
const pw101 = subjectOf(mammillary(disposition))

describe('two compartments, 750 mg over 1 h', () => {
  test.each([
    [24, 2.04848505, 24.8382647],
    [12, 3.24134975, 22.5467743]
  ])('every %s h: ratio %s, effective half-life %s h, operational 11.8489555 h', (interval, ratio, half) => {
    const { steadyState } = exposureFor(pw101, [line(750, { over: 1, every: hours(interval) })], 168)
    const { accumulationRatio, effectiveHalfLife: effective, operationalHalfLife: operational, why } = steadyState
    expectWithin(number(accumulationRatio, why.accumulationRatio), ratio, { relative: 5e-9 })
    expectWithin(number(effective, why.effectiveHalfLife), half, { relative: 5e-9 })
    expectWithin(number(operational, why.operationalHalfLife), 11.8489555, { relative: 5e-9 })
    expectWithin(number(operational, undefined), cases.operationalHalfLife.infusion, { relative: 1e-11 })
  })

  test.each([0, 1])('every quantity of the period, case %s', (index) => {
    const expected = cases.steadyState[index]
    const { steadyState } = exposureFor(pw101, [line(750, { over: 1, every: hours(expected.period) })], 100)
    const { why } = steadyState
    const names = [
      'auc',
      'peak',
      'trough',
      'average',
      'fluctuation',
      'swing',
      'accumulationRatio',
      'peakRatio',
      'troughRatio',
      'effectiveHalfLife'
    ] as const
    for (const name of names) expectWithin(number(steadyState[name], why[name]), expected[name], exact, name)
    expectWithin(number(steadyState.auc24, why.auc24), (750 * 24) / expected.period / 1.5016171875, exact)
    expectWithin(number(steadyState.minimum, why.minimum), expected.trough, exact)
    expect(steadyState.period).toBe(expected.period)
    expect(steadyState.peakTime).toBe(1)
    expect(steadyState.reached90).toBe(expected.reached90)
    expect(steadyState.reached90ByTrough).toBe(expected.reached90ByTrough)
  })

  test('neither the end of the study nor a first dose that comes late changes the steady state', () => {
    const lines = (at: number) => [line(750, { over: 1, at, every: hours(12) })]
    const a = exposureFor(pw101, lines(0), 60).steadyState
    const b = exposureFor(pw101, lines(7), 500).steadyState
    for (const name of ['auc24', 'peak', 'trough', 'accumulationRatio', 'operationalHalfLife'] as const) {
      expect(b[name], name).toBe(a[name])
    }
    expectWithin(number(b.reached90, b.why.reached90), number(a.reached90, a.why.reached90) + 7, exact)
  })

  test('exceptions and single doses are left out', () => {
    const plain = exposureFor(pw101, [line(750, { over: 1, every: hours(12) })], 60).steadyState
    const lines = [
      line(3000, { over: 2 }),
      line(750, { over: 1, every: hours(12), exceptions: [{ number: 3, missed: true }] })
    ]
    const { auc24, peak, trough } = exposureFor(pw101, lines, 60).steadyState
    expect([auc24, peak, trough]).toEqual([plain.auc24, plain.peak, plain.trough])
  })

  // R comes from areas at steady state and of the first period, the half-life from what earlier periods leave in this one.
  test.each([
    [0.5, 0],
    [8, 6],
    [30, 0],
    [3, 17]
  ])('an infusion of %s h with a lag of %s h every 12 h: what is carried over is R - 1 parts of R', (over, lag) => {
    const late = subjectOf(mammillary(disposition), 0, { lag })
    const { steadyState } = exposureFor(late, [line(750, { over, every: hours(12) })], 100)
    const ratio = steadyState.accumulationRatio
    if (lag >= 12) {
      expect(steadyState.why.accumulationRatio).toMatch(/^nothing has entered/)
      return
    }
    const expected = (12 * Math.LN2) / Math.log(number(ratio, 'ratio') / (number(ratio, 'ratio') - 1))
    expectWithin(number(steadyState.effectiveHalfLife, steadyState.why.effectiveHalfLife), expected, exact)
  })

  test('oral: the operational half-life by sums of exponentials', () => {
    const model = mammillary(disposition)
    const oral = {
      ...model,
      compartments: [...model.compartments, { name: 'depot', column: 'depot', holds: 'drug' as const }],
      transfers: [...model.transfers, { kind: 'first-order' as const, from: 2, to: 0, rate: 0.9 }]
    }
    const half = operationalHalfLife(oral, [{ kind: 'bolus', start: 0.25, into: 2, amount: 310 }], 24)
    expectWithin(number(half, 'oral'), cases.operationalHalfLife.oral, { relative: 1e-11 })
  })
})

// Bourne DWA, "A First Course in Pharmacokinetics and Biopharmaceutics" (PHAR 7633 on-line course text, 2001-), ch. 14.6,
// ch. 8/17 (inputs printed); digits beyond the printed ones by independent code.
describe('one compartment', () => {
  test('K01, X02, X03: the accumulation factor is 1.54691816068 and the half-lives are the half-life', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: Math.LN2 / 4 }))
    const { steadyState } = exposureFor(subject, [line(100, { every: hours(6) })], 48)
    const { why } = steadyState
    expectWithin(number(steadyState.accumulationRatio, why.accumulationRatio), 1.54691816068, precise)
    expectWithin(number(steadyState.peakRatio, why.peakRatio), 1.54691816068, precise)
    expectWithin(number(steadyState.troughRatio, why.troughRatio), 1.54691816068, precise)
    expectWithin(number(steadyState.effectiveHalfLife, why.effectiveHalfLife), 4, exact)
    expectWithin(number(steadyState.operationalHalfLife, why.operationalHalfLife), 4, exact)
  })

  test('K10, X01: oral plateau every 8 h with fluctuation and swing (CDISC C85581, C161416)', () => {
    const subject = subjectOf(oneCompartment({ volume: 30, k: 0.15, ka: 1 }), 0, { bioavailability: 0.9 })
    const { steadyState } = exposureFor(subject, [line(600, { every: hours(8) })], 48)
    const { why } = steadyState
    expectWithin(number(steadyState.peakTime, why.peakTime), 1.81067421875, precise)
    expectWithin(number(steadyState.peak, why.peak), 19.6318459871, precise)
    expectWithin(number(steadyState.minimum, why.minimum), 9.12022275161, precise)
    expectWithin(number(steadyState.average, why.average), 15, exact)
    expectWithin(100 * number(steadyState.fluctuation, why.fluctuation), 70.0774882366, precise)
    expectWithin(number(steadyState.swing, why.swing), 1.15256211627, precise)
  })

  // CDISC C95007; Boxenbaum & Battle 1995 J Clin Pharmacol 35:763, from memory. 24 ln 2 / ln(5/3) in 30-digit arithmetic
  // (mpmath) is 32.5659707725614; the list that the check is from has 32.5659706728, which differs in the ninth digit.
  test('X02: a ratio of 2.5 over 24 h is an effective half-life of 32.5659707725614 h', () => {
    const half = number(effectiveHalfLife(24, 1, 1.5), undefined)
    expectWithin(half, 32.5659707725614, { relative: 1e-14 })
    expectWithin(half, 32.5659706728, { relative: 5e-9 })
  })

  test('an effective half-life keeps its digits where nearly nothing accumulates', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: 1.25 }))
    const { steadyState } = exposureFor(subject, [line(100, { every: hours(24) })], 48)
    expectWithin(number(steadyState.effectiveHalfLife, steadyState.why.effectiveHalfLife), Math.LN2 / 1.25, exact)
  })

  // One compartment: R = 1 / (1 - e^-k tau), so that the effective half-life is ln 2 / k, however slow.
  test.each([1e-4, 1e-8, 1e-12])(
    'an effective half-life keeps its digits where k is %s /h and nearly all accumulates',
    (k) => {
      const subject = subjectOf(oneCompartment({ volume: 10, k }))
      const { steadyState } = exposureFor(subject, [line(100, { every: hours(24) })], 48)
      expectWithin(number(steadyState.effectiveHalfLife, steadyState.why.effectiveHalfLife), Math.LN2 / k, exact)
    }
  )

  // Sahin S, Benet LZ 2008 Pharm Res 25:2869-2877: for a bolus into one compartment it is ln 2 / k.
  test.each([1e-3, 0.07, 3])('X03: the operational half-life of a bolus is ln 2 / %s', (k) => {
    const model = oneCompartment({ volume: 10, k })
    const half = operationalHalfLife(model, [{ kind: 'bolus', start: 0, into: 0, amount: 100 }], 24)
    expectWithin(number(half, 'bolus'), Math.LN2 / k, { relative: 1e-8 })
  })
})

describe('lines together', () => {
  const model = mammillary(disposition)
  const subject = {
    ...subjectOf({
      ...model,
      compartments: [...model.compartments, { name: 'depot', column: 'depot', holds: 'drug' }],
      transfers: [...model.transfers, { kind: 'first-order', from: 2, to: 0, rate: 0.9 }]
    }),
    routes: [
      ...pw101.routes,
      {
        ...{ name: 'oral', input: 'bolus' as const, bioavailability: 0.62, lag: 0 },
        parts: [{ into: 2, fraction: 1, lag: 0 }]
      }
    ]
  }
  const lines = [line(500, { over: 1, every: hours(12) }), line(300, { route: 'oral', at: 2, every: hours(8) })]

  test('every 12 h and every 8 h recur after 24 h; the lowest trough is that of the period', () => {
    const { steadyState } = exposureFor(subject, lines, 48)
    const expected = cases.together
    expect(steadyState.period).toBe(24)
    expectWithin(number(steadyState.auc, 'auc'), expected.auc, exact)
    expectWithin(number(steadyState.peak, 'peak'), expected.peak, exact)
    expect(steadyState.peakTime).toBe(expected.peakTime)
    expectWithin(number(steadyState.minimum, 'minimum'), expected.minimum, exact)
    steadyState.intervals.forEach(({ trough }, i) => {
      expectWithin(number(trough, 'trough'), expected.troughs[i], exact)
    })
    expectWithin(number(steadyState.trough, 'trough'), Math.min(...expected.troughs), exact)
    expect(steadyState.effectiveHalfLife).toBeUndefined()
    expect(steadyState.why.effectiveHalfLife).toBe('the period holds 5 doses; defined for one')
    expect(steadyState.why.operationalHalfLife).toBe('the period holds 5 doses; defined for one')
  })

  test('lines that do not recur together have no common period', () => {
    const { steadyState } = exposureFor(
      subject,
      [line(500, { every: hours(7.001) }), line(300, { route: 'oral', every: hours(11.003) })],
      48
    )
    expect(steadyState.period).toBeUndefined()
    expect(steadyState.why.auc24).toMatch(/^no common period/)
  })
})

describe('infusions', () => {
  test('an infusion that still runs at the end is endless: constant level, no period', () => {
    const subject = subjectOf(oneCompartment({ volume: 25, k: 0.17 }))
    const { steadyState } = exposureFor(subject, [line(60 * 48, { over: 48 })], 48)
    expectWithin(number(steadyState.average, 'average'), 60 / (0.17 * 25), exact)
    expectWithin(number(steadyState.auc24, 'auc24'), (24 * 60) / (0.17 * 25), exact)
    expect(steadyState.peak).toBe(steadyState.minimum)
    for (const name of ['period', 'trough', 'fluctuation', 'swing', 'accumulationRatio'] as const) {
      expect(steadyState[name], name).toBeUndefined()
      expect(steadyState.why[name], name).toBe('an infusion without end alone has no period')
    }
    // 90 % of the plateau: 1 - e^(-k t) = 0.9.
    expectWithin(number(steadyState.reached90ByLevel, 'level'), Math.log(10) / 0.17, exact)
  })

  test('an infusion that ended before the end of the study is no steady state', () => {
    const { steadyState } = exposureFor(pw101, [line(1000, { over: 20 })], 48)
    expect(steadyState.auc24).toBeUndefined()
    expect(steadyState.why.auc24).toBe('no dose repeats at the end')
    expect(steadyState.course).toBeUndefined()
  })

  test('infusions back to back run through: no trough, fluctuation or swing', () => {
    const { steadyState } = exposureFor(pw101, [line(750, { over: 12, every: hours(12) })], 60)
    for (const name of ['trough', 'fluctuation', 'swing', 'troughRatio', 'reached90ByTrough'] as const) {
      expect(steadyState.why[name], name).toBe('an infusion runs through the whole interval')
    }
    expectWithin(number(steadyState.peak, 'peak'), 750 / 12 / 1.5016171875, { relative: 1e-13 })
    expectWithin(number(steadyState.minimum, 'minimum'), 750 / 12 / 1.5016171875, { relative: 1e-13 })
  })

  test('an infusion without end beside a repeated bolus adds its level', () => {
    const lines = [line(100 * 48, { over: 48 }), line(750, { every: hours(12) })]
    const { steadyState } = exposureFor(pw101, lines, 48)
    expectWithin(number(steadyState.auc24, 'auc24'), (24 * 100 + 1500) / 1.5016171875, exact)
    expect(steadyState.why.trough).toBe('an infusion runs through the whole interval')
    expect(steadyState.why.effectiveHalfLife).toBe('an infusion without end runs beside the doses')
  })
})

describe('90 % of the steady state', () => {
  // One compartment, bolus: the area of period n over that of the plateau is 1 - e^(-n k tau).
  test.each([0.05, 0.02, 0.2])('k %s /h every 8 h: the first period with 1 - e^(-n k tau) of at least 0.9', (k) => {
    const subject = subjectOf(oneCompartment({ volume: 10, k }))
    const { steadyState } = exposureFor(subject, [line(100, { every: hours(8) })], 24)
    const n = Math.ceil(Math.log(10) / (8 * k))
    expect(steadyState.reached90).toBe(8 * n)
    expect(steadyState.reached90ByTrough).toBe(8 * n)
    expect(steadyState.reached90OfChange).toBeUndefined()
  })

  test('a regimen that starts at its steady state is there after its first period', () => {
    const { steadyState } = exposureFor(pw101, [line(750, { every: hours(12) })], 24, { start: 'steady-state' })
    expect(steadyState.reached90).toBe(12)
  })

  test('a load that overshoots counts only once the areas are back within 10 %', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: 0.05 }))
    const { steadyState } = exposureFor(subject, [line(1000), line(100, { every: hours(8) })], 24)
    // What is over after n periods: (1000 - 100 e^(-k tau) / (1 - e^(-k tau))) e^(-n k tau), against 100 / (1 - e^(-k tau)).
    const x = Math.exp(-0.4)
    const excess = (1000 - (100 * x) / (1 - x)) / (100 / (1 - x))
    expect(steadyState.reached90).toBe(8 * (Math.ceil(Math.log(10 * excess) / 0.4) + 1))
  })

  test('after a change of dose, 90 % of the change', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: 0.05 }))
    const lines = [line(100, { every: hours(8), count: 30 }), line(105, { at: 240, every: hours(8) })]
    const { steadyState } = exposureFor(subject, lines, 300)
    expect(steadyState.reached90).toBe(248)
    expect(steadyState.reached90OfChange).toBe(240 + 8 * Math.ceil(Math.log(10) / 0.4))
  })

  test('a late dose that moves the later ones: the windows stay, the steady state comes in its own rhythm', () => {
    const k = 0.05
    const subject = subjectOf(oneCompartment({ volume: 10, k }))
    const late = line(100, { every: hours(8), exceptions: [{ number: 2, lateBy: 3, shiftsLater: true }] })
    const { steadyState } = exposureFor(subject, [late], 48)
    const times = [0, ...Array.from({ length: 200 }, (_, i) => 11 + 8 * i)]
    const given = (to: number) =>
      times.filter((t) => t < to).reduce((sum, t) => sum + (10 / k) * (1 - Math.exp(-k * (to - t))), 0)
    const off = Array.from({ length: 100 }, (_, n) => given(8 * (n + 1)) - given(8 * n)).map(
      (area) => Math.abs(area - 10 / k) > 1 / k
    )
    expect(steadyState.reached90).toBe(8 * (off.lastIndexOf(true) + 2))
    const troughs = Array.from({ length: 100 }, (_, n) =>
      times.slice(0, n + 1).reduce((sum, t) => sum + 10 * Math.exp(-k * (times[n + 1] - t)), 0)
    )
    const goal = 10 / Math.expm1(8 * k)
    const last = troughs.findLastIndex((trough) => Math.abs(trough - goal) > 0.1 * goal)
    expect(steadyState.reached90ByTrough).toBe(8 * Math.ceil(times[last + 2] / 8))
  })

  test('a patient whose elimination is too slow for 1,000 periods has none', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: 1e-5 }))
    const { steadyState } = exposureFor(subject, [line(1, { every: hours(1) })], 24)
    expect(steadyState.reached90).toBeUndefined()
    expect(steadyState.why.reached90).toBe('not within 1000 periods')
    expectWithin(number(steadyState.auc24, 'auc24'), 24 / (1e-5 * 10), exact)
  })
})

describe('the person of the steady state', () => {
  test('is the one at the end', () => {
    const changed = subjectOf(mammillary({ ...disposition, clearance: 0.75 }))
    const { steadyState } = exposureFor(pw101, [line(750, { every: hours(12) })], 60, {
      changes: [{ from: 48, subject: changed }]
    })
    expectWithin(number(steadyState.auc24, 'auc24'), 1500 / 0.75, exact)
  })

  test('has the sessions that repeat: their clearance holds while they run', () => {
    const subject = subjectOf(oneCompartment({ volume: 20, k: 0.02 }))
    const { steadyState } = exposureFor(subject, [line(500, { every: hours(24) })], 96, {
      sessions: [{ at: 20, duration: 4, clearance: 5, every: hours(48) }]
    })
    expect(steadyState.period).toBe(48)
    // Two doses: x -> (x + 500) e^(-24 k), once with 4 h of 5 / 20 /h more, in the first day of the period.
    const [a, s] = [Math.exp(-24 * 0.02), Math.exp(-4 * 0.25)]
    const x = (500 * (a * s * a + a)) / (1 - a * a * s)
    expectWithin(number(steadyState.intervals.at(-1)?.trough, 'trough'), x / 20, exact)
    expect(steadyState.why.operationalHalfLife).toMatch(/holds 2 doses/)
  })

  test('under an endless infusion with sessions that repeat: a period without doses', () => {
    const subject = subjectOf(oneCompartment({ volume: 20, k: 0.02 }))
    const { steadyState } = exposureFor(subject, [line(960, { over: 96 })], 96, {
      sessions: [{ at: 20, duration: 4, clearance: 5, every: hours(24) }]
    })
    expect([steadyState.period, steadyState.origin]).toEqual([24, 20])
    // 10 mg/h against k = 0.27 /h for 4 h and 0.02 /h for 20 h: the highest level is where a session starts.
    const [a, b] = [Math.exp(-4 * 0.27), Math.exp(-20 * 0.02)]
    const x = ((10 / 0.27) * (1 - a) * b + (10 / 0.02) * (1 - b)) / (1 - a * b)
    expectWithin(number(steadyState.peak, 'peak'), x / 20, exact)
    expect(steadyState.peakTime).toBe(0)
    expect(steadyState.why.accumulationRatio).toMatch(/^no dose line repeats/)
    expect(steadyState.why.trough).toBe('an infusion runs through the whole interval')
    expect(steadyState.intervals).toEqual([])
  })

  test('in whom drug never leaves has none, with the reason', () => {
    const subject = subjectOf(mammillary({ volumes: [10, 20], clearance: 0, exchanges: [1] }))
    const { steadyState } = exposureFor(subject, [line(10, { every: hours(24) })], 48)
    expect(steadyState.auc24).toBeUndefined()
    expect(steadyState.why.auc24).toMatch(
      /^no steady state: drug that enters compartment "V1" never leaves|never leaves/
    )
  })
})

test('time shares of the period are those of the first window', () => {
  const subject = subjectOf(oneCompartment({ volume: 20, k: 0.5 }))
  // W20: 1000 mg every 8 h, unbound 0.8, above 4 mg/L for 58.0267634955 % of the time (independent code).
  const window = target({ kind: 'window', low: 4, high: 1000, factor: 0.8 })
  const { steadyState } = exposureFor(subject, [line(1000, { every: hours(8) })], 24, { targets: [window] })
  expectWithin(100 * number(steadyState.timeInWindow, 'share'), 58.0267634955, precise)
  expect(steadyState.timeAbove).toBe(0)
})
