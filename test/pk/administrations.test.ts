import { describe, expect, test } from 'vitest'
import { type AdministrationsRequest, administrations, type WrittenOut } from '../../src/pk/administrations'
import type { DoseLine } from '../../src/pk/prescription'
import type { Route, Stretch, Subject } from '../../src/pk/subject'
import { expectWithin } from '../expectWithin'
import { hours, line, mammillary, subjectOf } from './subjects'

const model = mammillary({ volumes: [12, 30], clearance: 4, exchanges: [9] })

function write(
  lines: readonly DoseLine[],
  rest: Partial<AdministrationsRequest> & { subject?: Subject } = {}
): WrittenOut {
  const stretches: readonly Stretch[] = [{ from: 0, subject: rest.subject ?? subjectOf(model) }]
  const prescription = { name: 'regimen', start: 'empty' as const, lines }
  return administrations({ prescription, stretches, until: 168, path: 'regimens[0]', ...rest })
}

function amountsOf(written: WrittenOut): number[] {
  return written.administrations.map(({ amount }) => amount)
}

function timesOf(written: WrittenOut): number[] {
  return written.administrations.map(({ at }) => at)
}

function subjectWith(rest: Partial<Subject>, route: Partial<Route> = {}): Subject {
  return { ...subjectOf(model, 0, route), ...rest }
}

describe('amounts', () => {
  const weights = { actual: 90, ideal: 60, lean: 55 }
  const perKg = line(0, { amount: { value: 20, per: 'kg' } })

  test('per kg use the named weight, else the dosing weight, else the actual weight', () => {
    expect(
      amountsOf(write([{ ...perKg, by: 'ideal' }], { subject: subjectWith({ weights, dosingWeight: 70 }) }))
    ).toEqual([1200])
    expect(amountsOf(write([perKg], { subject: subjectWith({ weights, dosingWeight: 70 }) }))).toEqual([1400])
    expect(amountsOf(write([perKg], { subject: subjectWith({ weights }) }))).toEqual([1800])
  })

  test('per kg use the weight at the time at which the dose is really given', () => {
    const stretches = [
      { from: 0, subject: subjectWith({ weights: { actual: 80 } }) },
      { from: 24, subject: subjectWith({ weights: { actual: 82 } }) }
    ]
    const exceptions = [{ number: 2, lateBy: -1 }]
    const written = write([{ ...perKg, every: hours(24), count: 3, exceptions }], { stretches })
    expect(timesOf(written)).toEqual([0, 23, 48])
    expect(amountsOf(written)).toEqual([1600, 1600, 1640])
    const punctual = write([{ ...perKg, every: hours(24), count: 2 }], { stretches })
    expect(amountsOf(punctual), 'a change acts before a dose at its time').toEqual([1600, 1640])
  })

  test('per m2 use the body surface area', () => {
    const perM2 = line(0, { amount: { value: 75, per: 'm2' } })
    expect(amountsOf(write([perM2], { subject: subjectWith({ surfaceArea: 1.8 }) }))).toEqual([135])
  })

  test('that cannot be reckoned are one issue a line, naming what is missing', () => {
    const lines = [
      { ...perKg, by: 'adjusted' as const, every: hours(12) },
      line(0, { amount: { value: 75, per: 'm2' } }),
      line(0, { rate: { value: 1, per: 'kg' }, over: 2 })
    ].map((one, i) => {
      const { amount, ...rest } = one
      return i === 2 ? rest : { ...rest, ...(amount && { amount }) }
    })
    const { issues } = write(lines, { subject: subjectWith({ weights: {} }) })
    expect(issues.map(({ path }) => path)).toEqual([
      'regimens[0].doses[0].amount',
      'regimens[0].doses[1].amount',
      'regimens[0].doses[2].rate'
    ])
    expect(issues[0].message).toContain('adjusted weight')
    expect(issues[1].message).toContain('body surface area')
  })

  test('of a rate are rate x length, capped with the length kept', () => {
    const { amount: _, ...rated } = line(0, { rate: { value: 0.5, per: 'kg' }, over: 4 })
    const written = write([rated], { subject: subjectWith({ weights }) })
    expect(amountsOf(written)).toEqual([180])
    const capped = write([{ ...rated, atMost: 100 }], { subject: subjectWith({ weights }) })
    expect(capped.administrations[0]).toMatchObject({ amount: 100, duration: 4 })
    expect(capped.notes).toEqual([expect.stringContaining('180 mg capped at 100 mg')])
  })

  test('are capped in the mass of the product, and enter as moiety', () => {
    const written = write([{ ...perKg, atMost: 1500, moietyFraction: 0.9, product: 'salt' }], {
      subject: subjectWith({ weights })
    })
    expect(written.administrations[0]).toMatchObject({ productAmount: 1500, amount: 1350 })
    expect(written.administrations[0].doses).toEqual([{ kind: 'bolus', start: 0, into: 0, amount: 1350 }])
  })

  test('under the cap carry no note', () => {
    expect(write([{ ...perKg, atMost: 2000 }], { subject: subjectWith({ weights }) }).notes).toEqual([])
  })
})

describe('repeats', () => {
  test('without a count go on while they are before the end', () => {
    const written = write([line(100, { at: 24, every: hours(48) })])
    expect(timesOf(written)).toEqual([24, 72, 120])
    expect(written.notes).toEqual([])
  })

  test('are multiples in the unit typed: every 20 min for a day has 72 doses, each at its third of an hour', () => {
    const written = write([line(1, { every: { value: 20, times: 1, per: 60 } })], { until: 24 })
    expect(timesOf(written)).toEqual(Array.from({ length: 72 }, (_, k) => k / 3))
  })

  test('with a count stop there; those at or after the end are not given, and that is said', () => {
    const written = write([line(100, { every: hours(24), count: 10 })], { until: 72 })
    expect(timesOf(written)).toEqual([0, 24, 48])
    expect(written.notes).toEqual([expect.stringContaining('7 of 10 doses would come at or after 72 h')])
    expect(write([line(100, { at: 72 })], { until: 72 }).notes).toEqual([expect.stringContaining('1 of 1 dose would')])
  })

  test('of several lines come in the order of time, those of one time in the order of the lines', () => {
    const written = write([line(1, { every: hours(12) }), line(2, { at: 6 }), line(3, { at: 12 })], { until: 24 })
    expect(amountsOf(written)).toEqual([1, 2, 1, 3])
  })

  test('of more than 100,000 doses are refused before they are written', () => {
    const { issues, administrations: none } = write([line(1, { every: { value: 1, times: 1, per: 3600 } })], {
      until: 1e9
    })
    expect(issues).toEqual([{ path: 'regimens[0].doses', message: expect.stringContaining('at most 100000') }])
    expect(none).toEqual([])
    expect(write([line(1, { every: hours(1) })], { until: 100_000 }).administrations).toHaveLength(100_000)
  })
})

describe('exceptions', () => {
  const repeated = line(120, { over: 2, every: hours(24), count: 4 })
  const withOne = (exception: DoseLine['exceptions'][number], of: DoseLine = repeated): WrittenOut =>
    write([{ ...of, exceptions: [exception] }])

  test('a missed dose stays in the list and enters nothing', () => {
    const written = withOne({ number: 2, missed: true })
    expect(written.administrations).toHaveLength(4)
    expect(written.administrations[1]).toMatchObject({ missed: true, amount: 0, doses: [], at: 24 })
    expect(written.administrations[1].departure).toBe('missed: 120 mg at 24 h')
  })

  test('a late dose moves alone, unless it shifts the later ones', () => {
    expect(timesOf(withOne({ number: 2, lateBy: 3 }))).toEqual([0, 27, 48, 72])
    expect(timesOf(withOne({ number: 2, lateBy: 3, shiftsLater: true }))).toEqual([0, 27, 51, 75])
    expect(withOne({ number: 2, lateBy: 3 }).administrations[1].departure).toBe('3 h late')
    expect(withOne({ number: 2, lateBy: -1.5 }).administrations[1].departure).toBe('1.5 h early')
  })

  test('a dose may be early, but not before 0', () => {
    expect(timesOf(withOne({ number: 2, lateBy: -24 }))).toEqual([0, 0, 48, 72])
    expect(withOne({ number: 1, lateBy: -1 }).issues).toEqual([
      { path: 'regimens[0].doses[0].exceptions[0].lateBy', message: expect.stringContaining('-1 h') }
    ])
  })

  test('another amount is what was given: not capped, and the length stays', () => {
    const written = withOne({ number: 1, amount: { value: 500, per: 'dose' } }, { ...repeated, atMost: 130 })
    expect(written.administrations[0]).toMatchObject({
      amount: 500,
      duration: 2,
      departure: '500 mg instead of 120 mg'
    })
    expect(written.notes).toEqual([])
  })

  test('another length keeps the amount', () => {
    expect(withOne({ number: 1, over: 3 }).administrations[0]).toMatchObject({ amount: 120, duration: 3 })
  })

  test('an infusion that is stopped keeps its rate and drops the rest', () => {
    expect(withOne({ number: 1, stoppedAfter: 0.5 }).administrations[0]).toMatchObject({ amount: 30, duration: 0.5 })
    expect(withOne({ number: 1, over: 4, stoppedAfter: 1 }).administrations[0]).toMatchObject({
      amount: 30,
      duration: 1
    })
    expect(withOne({ number: 1, stoppedAfter: 3 }).issues[0].path).toBe(
      'regimens[0].doses[0].exceptions[0].stoppedAfter'
    )
    expect(withOne({ number: 1, stoppedAfter: 1 }, line(5)).issues[0].message).toContain(
      'only an infusion can be stopped'
    )
  })

  test('a fraction taken multiplies the amount', () => {
    expect(withOne({ number: 3, fractionTaken: 0.25 }).administrations[2].amount).toBe(30)
  })

  test('beyond the doses, twice for one dose, or beside a missed one are issues at their place', () => {
    const paths = (exceptions: DoseLine['exceptions'], of: DoseLine = repeated): string[] =>
      write([{ ...of, exceptions }]).issues.map(({ path }) => path)
    expect(paths([{ number: 5, missed: true }])).toEqual(['regimens[0].doses[0].exceptions[0].number'])
    expect(paths([{ number: 2, missed: true }], line(5))).toEqual(['regimens[0].doses[0].exceptions[0].number'])
    expect(
      paths([
        { number: 1, lateBy: 1 },
        { number: 1, missed: true }
      ])
    ).toEqual(['regimens[0].doses[0].exceptions[1].number'])
    expect(paths([{ number: 1, missed: true, lateBy: 1 }])).toEqual(['regimens[0].doses[0].exceptions[0].missed'])
    const { count: _, ...endless } = repeated
    expect(paths([{ number: 8, missed: true }], endless)).toEqual(['regimens[0].doses[0].exceptions[0].number'])
    expect(paths([{ number: 7, missed: true }], endless)).toEqual([])
  })

  test('a dose brought forward to before the end is given, one delayed to after it is not', () => {
    const { count: _, ...endless } = repeated
    const early = write([{ ...endless, exceptions: [{ number: 8, lateBy: -2 }] }])
    expect(early.issues).toEqual([])
    expect(timesOf(early).at(-1)).toBe(166)
    const late = write([{ ...endless, exceptions: [{ number: 7, lateBy: 24 }] }])
    expect(late.administrations).toHaveLength(6)
    expect(late.notes).toEqual([expect.stringContaining('1 dose would come at or after 168 h and is not given')])
  })
})

describe('routes', () => {
  test('a dose enters by parts, each after the lags of route and part, times the bioavailability', () => {
    const subject = subjectWith(
      {},
      {
        bioavailability: 0.8,
        lag: 0.5,
        parts: [
          { into: 0, fraction: 0.25, lag: 0 },
          { into: 1, fraction: 0.75, lag: 2, over: 12 }
        ]
      }
    )
    const [given] = write([line(100, { at: 10 })], { subject }).administrations
    expect(given).toMatchObject({ at: 10, duration: 0, amount: 100 })
    expect(given.doses).toEqual([
      { kind: 'bolus', start: 10.5, into: 0, amount: 20 },
      { kind: 'infusion', start: 12.5, into: 1, amount: expect.closeTo(60, 12), duration: 12 }
    ])
    const infused = write([line(100, { over: 1 })], { subject })
    expect(infused.issues).toEqual([{ path: 'regimens[0].doses[0].over', message: expect.stringContaining('12 h') }])
  })

  test('lag and bioavailability are those at the time of the dose', () => {
    const stretches = [
      { from: 0, subject: subjectWith({}, { bioavailability: 0.5, lag: 1 }) },
      { from: 24, subject: subjectWith({}, { bioavailability: 0.9, lag: 2 }) }
    ]
    const written = write([line(100, { at: 23.5, every: hours(1), over: 3, count: 2 })], { stretches })
    const doses = written.administrations.flatMap((administration) => administration.doses)
    expect(doses.map(({ start }) => start)).toEqual([24.5, 26.5])
    expectWithin(doses[0].amount, 50, { relative: 1e-15 })
    expectWithin(doses[1].amount, 90, { relative: 1e-15 })
  })

  test('an unknown one is an issue', () => {
    expect(write([line(100, { route: 'elsewhere' })]).issues).toEqual([
      { path: 'regimens[0].doses[0].route', message: expect.stringContaining('elsewhere') }
    ])
  })
})
