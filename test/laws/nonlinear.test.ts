import { expect, test } from 'vitest'
import { extremes, timeAbove } from '../../src/pk/curve'
import type { Dose } from '../../src/pk/dose'
import { integrate, stateAfter } from '../../src/pk/integrate'
import type { Model, Transfer } from '../../src/pk/model'
import { OperatorStore } from '../../src/pk/operatorStore'
import { periodicSegments } from '../../src/pk/periodicSegments'
import type { Segment } from '../../src/pk/segment'
import { periodicSolution } from '../../src/pk/steadySolution'
import { expectWithin } from '../expectWithin'
import { Random } from './random'
import { hourly, type RandomStudy } from './randomModel'
import { randomNonlinear } from './randomNonlinear'
import { course, type Row, rowsOf } from './rowsOf'

/**
 * What a change of nothing but rounding may move a number by, where that moves a step by a little: about the error of a
 * step at 1e-8; below a ten-thousandth of the largest of its kind, relative to that.
 */
const MOVED = 5e-8
/** The same where steps are other ones: what two courses at 1e-8 may differ by. */
const OTHER_STEPS = 1e-6

const seeds = (first: number, count: number): number[] => Array.from({ length: count }, (_, k) => first + k)

function expectRows(actual: readonly Row[], expected: readonly Row[], tolerance: number, what: string): void {
  expect(
    actual.map(({ row }) => row),
    what
  ).toEqual(expected.map(({ row }) => row))
  const largest = expected[0].values.map((_, i) => Math.max(...expected.map(({ values }) => values[i])))
  expected.forEach(({ time, values }, k) => {
    values.forEach((value, i) => {
      const absolute = tolerance * Math.max(value, 1e-4 * largest[i])
      expectWithin(actual[k].values[i], value, { absolute }, `${what}, ${time} h, column ${i}`)
    })
  })
}

test('at every row, drug in the body and drug that left it is what has entered', () => {
  for (const seed of seeds(9001, 40)) {
    const given = course(randomNonlinear(new Random(seed)))
    expect(given.method, `seed ${seed}`).toBe('integrated')
    const doses = given.administrations.flatMap((each) => each.doses)
    const columns = given.segments[0].model.compartments.filter(({ holds }) => holds === 'drug').length
    let largest = 0
    for (const { time, row, values } of rowsOf(given)) {
      const held = values.slice(1, 1 + columns).reduce((sum, amount) => sum + amount, 0)
      const entered = doses.reduce((sum, dose) => {
        if (dose.kind === 'infusion') {
          return sum + (dose.amount * Math.min(dose.duration, Math.max(0, time - dose.start))) / dose.duration
        }
        return dose.start < time || (row === 'after dose' && dose.start === time) ? sum + dose.amount : sum
      }, 0)
      largest = Math.max(largest, entered)
      expectWithin(held + values[values.length - 1], entered, { absolute: 2e-13 * largest }, `seed ${seed}, ${time} h`)
    }
  }
})

test('a target that drug has not met stays where it is', () => {
  let seen = 0
  for (const seed of seeds(9101, 40)) {
    const study = randomNonlinear(new Random(seed))
    const late = { ...study.prescription.lines[0], at: 18, exceptions: [] }
    const given = course({ ...study, sessions: [], prescription: { ...study.prescription, lines: [late] } })
    const { model } = given.segments[0]
    const target = model.compartments.findIndex(({ holds }) => holds === 'target')
    if (target < 0) continue
    seen += 1
    const amounts = new Float64Array(model.compartments.length)
    const piece = given.trajectory.pieces[0]
    piece.amountsInto(piece.segment.duration, amounts)
    expectWithin(amounts[target], given.initial.amounts[target], { relative: 1e-11 }, `seed ${seed}`)
  }
  expect(seen).toBeGreaterThan(10)
})

test('every number is finite and not negative, and an added sample changes no bit of another', () => {
  for (const seed of seeds(9201, 25)) {
    const random = new Random(seed)
    const given = course(randomNonlinear(random))
    const rows = rowsOf(given, { every: hourly(5), also: [] })
    const { peak, minimum } = extremes(given.trajectory, { kind: 'observed' }, 0, given.end)
    const numbers = [...rows.flatMap(({ values }) => values), peak, minimum]
    numbers.push(timeAbove(given.trajectory, { kind: 'observed' }, (peak + minimum) / 2, 0, given.end))
    expect(
      numbers.filter((value) => !(value >= 0 && value < Number.POSITIVE_INFINITY)),
      `seed ${seed}`
    ).toEqual([])
    const finer = rowsOf(given, { every: hourly(1.25), also: [random.between(0, given.end)] })
    const byKey = new Map(finer.map(({ time, row, values }) => [`${time} ${row}`, values]))
    for (const { time, row, values } of rows) expect(byKey.get(`${time} ${row}`), `seed ${seed}`).toEqual(values)
  }
})

test('no sample of a fine grid is above the peak, nor below the minimum, by more than the tolerance', () => {
  for (const seed of seeds(9301, 20)) {
    const given = course(randomNonlinear(new Random(seed)))
    const { peak, minimum } = extremes(given.trajectory, { kind: 'observed' }, 0, given.end)
    for (const { time, values } of rowsOf(given, { every: hourly(0.05), also: [] })) {
      const [level] = values
      expect(level, `seed ${seed}, ${time} h`).toBeLessThanOrEqual(peak * (1 + 1e-12))
      if (time > 0) expect(level, `seed ${seed}, ${time} h`).toBeGreaterThanOrEqual(minimum * (1 - 1e-12))
    }
  }
})

function halved(segments: readonly Segment[], random: Random): Segment[] {
  return segments.flatMap((segment) => {
    const duration = segment.duration * random.between(0.05, 0.95)
    const none = segment.model.compartments.map(() => 0)
    const rest = { start: segment.start + duration, duration: segment.duration - duration, boluses: none }
    return [
      { ...segment, duration },
      { ...segment, ...rest }
    ]
  })
}

test('cutting every segment in two changes nothing beyond the tolerance', () => {
  for (const seed of seeds(9401, 20)) {
    const random = new Random(seed)
    const given = course(randomNonlinear(random))
    const segments = halved(given.segments, random)
    const cut = { ...given, segments, trajectory: integrate(segments, given.initial) }
    expectRows(rowsOf(cut), rowsOf(given), OTHER_STEPS, `seed ${seed}`)
  }
})

/** Every time a day later; all of them on a grid on which sums of times are exact. */
function later(study: RandomStudy, by: number): RandomStudy {
  const onGrid = (value: number): number => Math.max(1, Math.round(value * 64)) / 64
  return {
    until: onGrid(study.until) + by,
    sessions: study.sessions.map((line) => ({
      ...line,
      at: onGrid(line.at) + by,
      duration: onGrid(line.duration),
      ...(line.every && { every: hourly(Math.round(line.every.value)) })
    })),
    stretches: study.stretches.map(({ from, subject }) => ({
      from: from === 0 ? 0 : onGrid(from) + by,
      subject: {
        ...subject,
        routes: subject.routes.map((route) => ({
          ...route,
          lag: route.lag === 0 ? 0 : onGrid(route.lag),
          parts: route.parts.map((part) => ({
            ...part,
            lag: part.lag === 0 ? 0 : onGrid(part.lag),
            ...(part.over !== undefined && { over: onGrid(part.over) })
          }))
        }))
      }
    })),
    prescription: {
      ...study.prescription,
      lines: study.prescription.lines.map((line) => ({
        ...line,
        at: onGrid(line.at) + by,
        ...(line.every && { every: hourly(Math.round(line.every.value)) }),
        ...(line.over !== undefined && { over: onGrid(line.over) }),
        exceptions: []
      }))
    }
  }
}

test('everything a day later is the same, a day later', () => {
  for (const seed of seeds(9501, 20)) {
    const study = randomNonlinear(new Random(seed))
    const rows = rowsOf(course(later(study, 0)), { every: hourly(1000), also: [8, 16.5, 19] })
    const shifted = rowsOf(course(later(study, 24)), { every: hourly(1000), also: [32, 40.5, 43] })
    expectRows(
      shifted.filter(({ time }) => time > 24).map((row) => ({ ...row, time: row.time - 24 })),
      rows.filter(({ time }) => time > 0),
      MOVED,
      `seed ${seed}`
    )
  }
})

function movedTransfer(transfer: Transfer, to: (place: number) => number): Transfer {
  switch (transfer.kind) {
    case 'first-order':
    case 'saturable':
      return {
        ...transfer,
        from: to(transfer.from),
        to: transfer.to === 'eliminated' ? transfer.to : to(transfer.to)
      }
    case 'binding':
      return { ...transfer, drug: to(transfer.drug), target: to(transfer.target), complex: to(transfer.complex) }
    case 'production':
      return { ...transfer, into: to(transfer.into) }
  }
}

/** A model with compartment i at the place `to` gives it. */
function moved(model: Model, to: (place: number) => number): Model {
  const compartments = [...model.compartments]
  model.compartments.forEach((compartment, i) => {
    compartments[to(i)] = compartment
  })
  const transfers = model.transfers.map((transfer) => movedTransfer(transfer, to))
  return {
    compartments,
    transfers,
    observed: to(model.observed),
    effectSites: model.effectSites.map((site) => ({ ...site, source: to(site.source) })),
    observations: model.observations.map((seen) => ({ ...seen, of: seen.of.map(to) }))
  }
}

test('the order of the compartments changes nothing beyond the tolerance', () => {
  for (const seed of seeds(9601, 20)) {
    const study = randomNonlinear(new Random(seed))
    const last = study.stretches[0].subject.model.compartments.length - 1
    const to = (place: number): number => last - place
    const reversed: RandomStudy = {
      ...study,
      stretches: study.stretches.map(({ from, subject }) => ({
        from,
        subject: {
          ...subject,
          model: moved(subject.model, to),
          routes: subject.routes.map((route) => ({
            ...route,
            parts: route.parts.map((part) => ({ ...part, into: to(part.into) }))
          }))
        }
      }))
    }
    const n = study.stretches[0].subject.model.compartments.filter(({ holds }) => holds === 'drug').length
    const inOrder = rowsOf(course(reversed)).map((row) => {
      const { values } = row
      return { ...row, values: [values[0], ...values.slice(1, 1 + n).reverse(), ...values.slice(1 + n)] }
    })
    expectRows(inOrder, rowsOf(course(study)), MOVED, `seed ${seed}`)
  }
})

/** How many new units an old one is. */
interface Units {
  readonly time: number
  readonly amount: number
  readonly volume: number
}

function transferInUnits(transfer: Transfer, { time, amount, volume }: Units): Transfer {
  switch (transfer.kind) {
    case 'first-order':
      return { ...transfer, rate: transfer.rate / time }
    case 'saturable':
      return {
        ...transfer,
        maximumRate: (transfer.maximumRate * amount) / time,
        halfSaturation: (transfer.halfSaturation * amount) / volume
      }
    case 'binding':
      return {
        ...transfer,
        association: (transfer.association * volume) / amount / time,
        dissociation: transfer.dissociation / time
      }
    case 'production':
      return { ...transfer, rate: (transfer.rate * amount) / time }
  }
}

function inUnits(model: Model, units: Units): Model {
  const { time, volume } = units
  return {
    ...model,
    compartments: model.compartments.map((compartment) =>
      compartment.volume === undefined ? compartment : { ...compartment, volume: compartment.volume * volume }
    ),
    transfers: model.transfers.map((transfer) => transferInUnits(transfer, units)),
    effectSites: model.effectSites.map((site) => ({ ...site, rate: site.rate / time })),
    observations: model.observations.map((seen) => ({ ...seen, volume: seen.volume * volume }))
  }
}

/** The segments of a course in other units, and its columns back in the old ones. */
function rowsInUnits(study: RandomStudy, units: Units): Row[] {
  const { time, amount, volume } = units
  const given = course(study)
  const models = new Map<Model, Model>()
  const segments = given.segments.map((segment): Segment => {
    const model = models.get(segment.model) ?? inUnits(segment.model, units)
    models.set(segment.model, model)
    return {
      start: segment.start * time,
      duration: segment.duration * time,
      model,
      boluses: Array.from(segment.boluses, (bolus) => bolus * amount),
      inputs: Array.from(segment.inputs, (rate) => (rate * amount) / time)
    }
  })
  const initial = {
    amounts: Array.from(given.initial.amounts, (each) => each * amount),
    effectSites: Array.from(given.initial.effectSites, (level) => (level * amount) / volume)
  }
  const administrations = given.administrations.map((each) => ({
    ...each,
    at: each.at * time,
    doses: each.doses.map((dose) =>
      dose.kind === 'bolus'
        ? { ...dose, start: dose.start * time }
        : { ...dose, start: dose.start * time, duration: dose.duration * time }
    )
  }))
  const end = given.end * time
  const other = { ...given, segments, initial, administrations, end, trajectory: integrate(segments, initial) }
  const sampling = { every: { ...hourly(2.5), times: time }, also: [0.01 * time, 0.3 * time] }
  const { model } = given.segments[0]
  const drugs = model.compartments.filter(({ holds }) => holds === 'drug').length
  const level = volume / amount
  const levels = model.effectSites.length + model.observations.length
  const factors = [
    level,
    ...new Array<number>(drugs).fill(1 / amount),
    ...new Array<number>(levels).fill(level),
    level / time,
    1 / amount
  ]
  return rowsOf(other, sampling).map((row) => ({
    ...row,
    time: row.time / time,
    values: row.values.map((value, i) => value * factors[i])
  }))
}

test('times, amounts and volumes x powers of 2 change no bit, by other factors nothing beyond the tolerance', () => {
  for (const seed of seeds(9701, 20)) {
    const study = randomNonlinear(new Random(seed))
    const rows = rowsOf(course(study))
    expectRows(rowsInUnits(study, { time: 64, amount: 1024, volume: 2 }), rows, 0, `seed ${seed}`)
    expectRows(rowsInUnits(study, { time: 60, amount: 1000, volume: 1000 }), rows, MOVED, `seed ${seed}`)
  }
})

test('a periodic state comes back after its period, or its dose rate is not below the capacity', () => {
  let solved = 0
  for (const seed of seeds(9801, 60)) {
    const random = new Random(seed)
    const { model } = randomNonlinear(random).stretches[0].subject
    const period = random.logBetween(0.5, 200)
    const places = model.compartments.flatMap(({ name, holds }, i) =>
      holds === 'drug' && name !== 'complex' ? [i] : []
    )
    const doses = Array.from({ length: random.whole(1, 3) }, (): Dose => {
      const start = random.between(0, 2 * period)
      const into = random.pick(places)
      const amount = random.logBetween(1, 1000)
      if (random.chance(0.5)) return { kind: 'bolus', start, into, amount }
      return { kind: 'infusion', start, into, amount, duration: period * random.logBetween(0.01, 5) }
    })
    const segments = periodicSegments({ model, period, doses, sessions: [] })
    const solution = periodicSolution(segments, new OperatorStore())
    if (solution.kind === 'none') {
      expect(solution.why, `seed ${seed}`).toMatch(/^no steady state: the dose rate .* is above the capacity /)
      continue
    }
    solved += 1
    const { state, convergence } = solution
    const entered = doses.reduce((sum, { amount }) => sum + amount, 0)
    const after = stateAfter(segments, state, { relative: 1e-12, floor: 1e-6 })
    for (const i of places) {
      const amount = state.amounts[i]
      expectWithin(after.amounts[i], amount, { absolute: 1e-8 * Math.max(amount, 1e-4 * entered) }, `seed ${seed}`)
    }
    expect(convergence?.periods, `seed ${seed}`).toBeLessThan(40)
  }
  expect(solved).toBeGreaterThan(25)
})
