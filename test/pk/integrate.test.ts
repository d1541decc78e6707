import { describe, expect, test } from 'vitest'
import { RosenbrockFailure } from '../../src/numerics/rosenbrockFailure'
import { extremes } from '../../src/pk/curve'
import type { IntegrationTolerance } from '../../src/pk/fluxTolerance'
import { INTEGRATION_WITNESS, Integrator, integrate, stateAfter, WORKING_TOLERANCE } from '../../src/pk/integrate'
import type { Model, Transfer } from '../../src/pk/model'
import { propagate } from '../../src/pk/propagate'
import type { Segment } from '../../src/pk/segment'
import { type BodyState, emptyState } from '../../src/pk/state'
import type { Signal, Trajectory } from '../../src/pk/trajectory'
import { witness } from '../../src/pk/witness'
import { expectWithin } from '../expectWithin'
import { Random } from '../laws/random'
import { saturableDecline } from '../oracle/lambertW'
import { mixed, repeated, saturable, targetMediated } from './nonlinearModels'
import { oneCompartment } from './subjects'

const observed: Signal = { kind: 'observed' }
const tight: IntegrationTolerance = { relative: 1e-12, floor: 1e-6 }

/** One segment from a state: a bolus or a constant input into a compartment. */
function single(model: Model, duration: number, given: { bolus?: number; rate?: number; into?: number }): Segment[] {
  const { bolus = 0, rate = 0, into = model.observed } = given
  const only = (value: number): number[] => model.compartments.map((_, i) => (i === into ? value : 0))
  return [{ start: 0, duration, model, boluses: only(bolus), inputs: only(rate) }]
}

/** Concentration that a constant input leads to. */
function levelUnder(model: Model, rate: number, duration: number): number {
  const { amounts } = stateAfter(single(model, duration, { rate }), emptyState(model), tight)
  return amounts[model.observed] / (model.compartments[model.observed].volume ?? Number.NaN)
}

const withTarget: BodyState = { amounts: [0, 0, 3, 0], effectSites: [] }

describe('saturable elimination against published values', () => {
  // K26: Grasela, Sheiner et al. 1983, Clin. Pharmacokinet. 8:355 (abstract): 415 mg/d, 5.7 mg/L; levels recomputed with
  // independent code. Times in d here.
  const phenytoin = saturable({ volume: 49, maximumRate: 415, halfSaturation: 5.7 })

  test.each([
    [200, 5.3023255814],
    [250, 8.63636363636],
    [300, 14.8695652174],
    [350, 30.6923076923],
    [400, 152.0]
  ])('K26: %s mg/d leads to %s mg/L', (rate, level) => {
    expectWithin(levelUnder(phenytoin, rate, 50_000), level, { relative: 1e-9 })
  })

  test.each([
    [10, 264.331210191],
    [15, 300.724637681],
    [20, 322.957198444]
  ])('K26: %s mg/L is held by %s mg/d', (level, rate) => {
    expectWithin(levelUnder(phenytoin, rate, 50_000), level, { relative: 1e-9 })
  })

  test('K26: at 415 mg/d the level rises without end', () => {
    const levels = [1000, 10_000, 100_000].map((days) => levelUnder(phenytoin, 415, days))
    // At capacity the level goes with the root of time: 49 C^2 / 2 = 415 x 5.7 t for large C.
    for (const [k, days] of [1000, 10_000, 100_000].entries()) {
      expectWithin(levels[k], Math.sqrt((2 * 415 * 5.7 * days) / 49), { relative: 0.05 })
    }
  })

  // K25: Bauer & Blouin 1983 (paediatric maximum rate and half saturation by age, abstract); per kg and d, target 15 mg/L.
  test.each([
    ['4 to 6 years', 10.93, 6.82, 7.51374885426],
    ['7 to 9 years', 10.05, 6.51, 7.00836820084]
  ])('K25: %s, %s mg/kg/d and %s mg/L: 15 mg/L is held by %s mg/kg/d', (_age, maximumRate, halfSaturation, rate) => {
    expectWithin(levelUnder(saturable({ volume: 0.7, maximumRate, halfSaturation }), rate, 5000), 15, {
      relative: 1e-9
    })
  })

  // K28: Beal 1982, J. Pharmacokinet. Biopharm. 10:109 (from memory); numbers recomputed with independent code.
  test('K28: the decline from 20 mg/L after a bolus, and the area under it', () => {
    const trajectory = integrate(single(phenytoin, 1000, { bolus: 980 }), emptyState(phenytoin), INTEGRATION_WITNESS)
    const [piece] = trajectory.pieces
    const expected = [
      [0.5, 16.769483617],
      [1, 13.6909122474],
      [2, 8.16659897243],
      [3, 3.90404113083],
      [4, 1.37654315978],
      [5, 0.371586390796]
    ]
    for (const [time, level] of expected) {
      expectWithin(piece.concentration(observed, time), level, { relative: 1e-9 }, `at ${time} d`)
      const closed = saturableDecline({ initial: 20, fastest: 415 / 49, half: 5.7, time })
      expectWithin(closed, level, { relative: 1e-10 }, `closed form at ${time} d`)
    }
    expectWithin(piece.area(observed, 1000), 37.0746987952, { relative: 1e-9 })
  })

  // K31: McCune et al. 2014, Clin. Cancer Res. 20:754 (abstract): 12.4 L/h, 770 ng/mL.
  test('K31: 9.548 mg/h into a clearance of 12.4 L/h holds 0.77 mg/L, 4.62 mg.h/L in 6 h', () => {
    const model = oneCompartment({ volume: 40, k: 12.4 / 40 })
    expectWithin(levelUnder(model, 9.548, 300), 0.77, { relative: 1e-9 })
    const steady: BodyState = { amounts: [0.77 * 40], effectSites: [] }
    const [piece] = integrate(single(model, 6, { rate: 9.548 }), steady).pieces
    expectWithin(piece.area(observed, 6), 4.62, { relative: 1e-9 })
  })

  test.each([0.1, 1, 10, 100, 1000])('the Lambert W closed form over the four decades below %s mg/L', (initial) => {
    const fastest = 415 / 49
    const duration = (initial * (1 - 1e-4) + 5.7 * Math.log(1e4)) / fastest
    const bolus = 49 * initial
    const at = (tolerance: IntegrationTolerance, time: number): number =>
      integrate(single(phenytoin, duration, { bolus }), emptyState(phenytoin), tolerance).pieces[0].concentration(
        observed,
        time
      )
    for (const part of [0.1, 0.4, 0.7, 0.85, 1]) {
      const time = part * duration
      const level = saturableDecline({ initial, fastest, half: 5.7, time })
      // An early relative error delays the decline by as much of its length, which the fall at the end multiplies.
      const condition = 1 + initial / 5.7
      expectWithin(at(INTEGRATION_WITNESS, time), level, { relative: 2e-11 * condition }, `tight, ${time} d`)
      expectWithin(at(WORKING_TOLERANCE, time), level, { relative: 2e-8 * condition }, `working, ${time} d`)
    }
  })
})

describe('what a nonlinear model becomes at its limits', () => {
  test('far below half saturation a saturable path is a clearance', () => {
    const one = oneCompartment({ volume: 30, k: 0.2 })
    const limit = saturable({ volume: 30, maximumRate: 0.2 * 30 * 1e9, halfSaturation: 1e9 })
    const times = Array.from({ length: 49 }, (_, k) => k / 2)
    const exact = propagate(repeated(one, { into: 0, amount: 100, every: 8, count: 3 }), emptyState(one))
    const integrated = integrate(
      repeated(limit, { into: 0, amount: 100, every: 8, count: 3 }),
      emptyState(limit),
      tight
    )
    expect(witness(exact, integrated, times).largestRelativeDifference).toBeLessThan(1e-8)
  })

  test('fast binding is its quasi-steady-state approximation', () => {
    const differences = [1, 100, 10_000].map((speed) => {
      const given = { turnover: true, association: 10 * speed, dissociation: 0.5 * speed }
      const full = targetMediated({ ...given, approximation: 'none' })
      const fast = targetMediated({ ...given, approximation: 'quasi-steady-state' })
      const run = (model: Model): Trajectory =>
        integrate(repeated(model, { into: 0, amount: 100, every: 336, count: 3 }), withTarget)
      const times = Array.from({ length: 100 }, (_, k) => 5 + 10 * k)
      return witness(run(full), run(fast), times).largestRelativeDifference
    })
    // The approximation's error falls with the speed of binding.
    expect(differences[1]).toBeLessThan(0.05 * differences[0])
    expect(differences[2]).toBeLessThan(0.05 * differences[1])
  })

  test('a saturable path between compartments moves what it takes', () => {
    const model: Model = {
      ...mixed(),
      transfers: [{ kind: 'saturable', from: 1, to: 2, maximumRate: 4, halfSaturation: 1, hill: 1 }],
      effectSites: []
    }
    const amounts = new Float64Array(3)
    integrate(single(model, 30, { bolus: 200 }), emptyState(model)).pieces[0].amountsInto(30, amounts)
    const level = saturableDecline({ initial: 10, fastest: 4 / 20, half: 1, time: 30 })
    expectWithin(amounts[1], 20 * level, { relative: 1e-6 })
    expectWithin(amounts[1] + amounts[2], 200, { relative: 1e-14 })
  })
})

describe('conservation', () => {
  test.each(['none', 'quasi-steady-state'] as const)(
    'total drug and total target to 1e-13, approximation %s',
    (approximation) => {
      const model = targetMediated({ approximation, turnover: false, association: 1000, dissociation: 50 })
      const amounts = new Float64Array(4)
      for (const relative of [1e-4, 1e-6, 1e-8]) {
        let given = 0
        const segments = repeated(model, { into: 0, amount: 1, every: 336, count: 6 })
        for (const piece of integrate(segments, withTarget, { relative, floor: 1e-4 }).pieces) {
          given += 1
          for (let k = 0; k <= 40; k++) {
            piece.amountsInto((336 * k) / 40, amounts)
            expectWithin(amounts[0] + amounts[1] + amounts[3], given, { relative: 1e-13 }, 'drug')
            expectWithin(amounts[2] + amounts[3], 3, { relative: 1e-13 }, 'target')
          }
        }
      }
    }
  )

  test('mass balance of a saturable model with infusions to 1e-13, whatever the tolerance', () => {
    const model = mixed()
    const segments = repeated(model, { into: 0, amount: 400, every: 12, count: 14, over: 2 })
    for (const relative of [1e-4, 1e-6, 1e-8, 1e-11]) {
      const trajectory = integrate(segments, emptyState(model), { relative, floor: 1e-4 })
      const times = Array.from({ length: 200 }, (_, k) => 0.8 * k)
      expect(witness(trajectory, trajectory, times).massBalance).toBeLessThan(1e-13)
    }
  })
})

describe('the pieces of an integrated trajectory', () => {
  const model = mixed()
  const segments = repeated(model, { into: 1, amount: 300, every: 12, count: 4, over: 1 })
  const reference = integrate(segments, emptyState(model), tight)
  const working = integrate(segments, emptyState(model))
  const signals: readonly Signal[] = [observed, { kind: 'effect-site', index: 0 }, { kind: 'observation', index: 0 }]

  test('every signal, its slope and its area are right within the tolerance', () => {
    for (const [index, piece] of working.pieces.entries()) {
      const exact = reference.pieces[index]
      for (const signal of signals) {
        for (let k = 0; k <= 20; k++) {
          const offset = (piece.segment.duration * k) / 20
          const what = `${signal.kind} of piece ${index} at ${offset}`
          expectWithin(
            piece.concentration(signal, offset),
            exact.concentration(signal, offset),
            { absolute: 1e-6 },
            what
          )
          expectWithin(piece.area(signal, offset), exact.area(signal, offset), { absolute: 1e-6 }, what)
          expectWithin(piece.slope(signal, offset), exact.slope(signal, offset), { absolute: 1e-3 }, what)
          expectWithin(piece.eliminated(offset), exact.eliminated(offset), { absolute: 1e-5 }, what)
        }
      }
    }
  })

  test('the slope is the derivative of the curve and the area its integral', () => {
    const piece = working.pieces[3]
    for (const signal of signals) {
      let area = 0
      const cells = 2000
      const width = piece.segment.duration / cells
      for (let k = 0; k < cells; k++) area += width * piece.concentration(signal, (k + 0.5) * width)
      expectWithin(piece.area(signal, piece.segment.duration), area, { relative: 1e-5 })
      const rise = piece.concentration(signal, 3.001) - piece.concentration(signal, 2.999)
      expectWithin(piece.slope(signal, 3), rise / 0.002, { relative: 1e-5 })
    }
  })

  test('areas between offsets add up and a short one keeps its digits', () => {
    const piece = working.pieces[1]
    for (const signal of signals) {
      const [a, b, c] = [0.3, 4, 9]
      expectWithin(piece.areaBetween(signal, a, b) + piece.areaBetween(signal, b, c), piece.areaBetween(signal, a, c), {
        relative: 1e-14
      })
      const short = piece.areaBetween(signal, 4, 4 + 1e-7)
      expectWithin(short, 1e-7 * piece.concentration(signal, 4), { relative: 1e-6 })
      expect(piece.areaBetween(signal, b, b)).toBe(0)
    }
  })

  test('peaks are found where the slope turns', () => {
    const oral = repeated(model, { into: 0, amount: 300, every: 24, count: 1 })
    const found = extremes(integrate(oral, emptyState(model)), observed, 0, 24)
    const exact = extremes(integrate(oral, emptyState(model), tight), observed, 0, 24)
    expectWithin(found.peak, exact.peak, { relative: 1e-7 })
    expectWithin(found.peakTime, exact.peakTime, { relative: 1e-4 })
    const [piece] = integrate(oral, emptyState(model)).pieces
    const scanned = Math.max(...Array.from({ length: 24_001 }, (_, k) => piece.concentration(observed, k / 1000)))
    expectWithin(found.peak, scanned, { relative: 1e-6 })
  })

  test('the state goes on from segment to segment as `stateAfter` has it, to the bit', () => {
    const last = working.pieces[working.pieces.length - 1]
    const amounts = new Float64Array(3)
    last.amountsInto(last.segment.duration, amounts)
    const after = stateAfter(segments, emptyState(model))
    expect(Array.from(after.amounts)).toEqual(Array.from(amounts))
    expect(Array.from(after.effectSites)).toEqual([
      last.concentration({ kind: 'effect-site', index: 0 }, last.segment.duration)
    ])
  })

  test('no amount is ever negative, at the loosest tolerance and far into washout', () => {
    const amounts = new Float64Array(3)
    for (const hill of [0.6, 1, 3]) {
      const out = mixed(hill)
      const [piece] = integrate(single(out, 5000, { bolus: 1000 }), emptyState(out), {
        relative: 1e-4,
        floor: 1e-3
      }).pieces
      for (let k = 0; k <= 5000; k++) {
        piece.amountsInto(k, amounts)
        for (const amount of amounts) expect(amount).toBeGreaterThanOrEqual(0)
      }
    }
  })
})

describe('laws', () => {
  const times = Array.from({ length: 60 }, (_, k) => 0.8 * k)
  const run = (model: Model, segments: readonly Segment[], initial?: BodyState): Trajectory =>
    integrate(segments, initial ?? emptyState(model))

  test('splitting a segment changes nothing beyond the tolerance', () => {
    const model = mixed()
    const segments = repeated(model, { into: 1, amount: 300, every: 12, count: 4 })
    const split = segments.flatMap((segment): Segment[] => [
      { ...segment, duration: 5 },
      { ...segment, start: segment.start + 5, duration: 7, boluses: [0, 0, 0] }
    ])
    expect(witness(run(model, segments), run(model, split), times).largestRelativeDifference).toBeLessThan(2e-7)
  })

  test('starting later changes no bit of the amounts', () => {
    const model = mixed()
    const segments = repeated(model, { into: 1, amount: 300, every: 16, count: 2 })
    const later = segments.map((segment) => ({ ...segment, start: segment.start + 64 }))
    const [one, two] = [run(model, segments), run(model, later)]
    for (let k = 0; k < 2; k++) {
      expect(two.pieces[k].concentration(observed, 7)).toBe(one.pieces[k].concentration(observed, 7))
    }
  })

  test('the order of the compartments does not matter', () => {
    const model = targetMediated({ approximation: 'none', turnover: true })
    const order = [3, 1, 0, 2]
    const place = (i: number): number => order.indexOf(i)
    const transfers = model.transfers.map((transfer): Transfer => {
      switch (transfer.kind) {
        case 'binding':
          return {
            ...transfer,
            drug: place(transfer.drug),
            target: place(transfer.target),
            complex: place(transfer.complex)
          }
        case 'production':
          return { ...transfer, into: place(transfer.into) }
        default:
          return {
            ...transfer,
            from: place(transfer.from),
            to: transfer.to === 'eliminated' ? 'eliminated' : place(transfer.to)
          }
      }
    })
    const shuffled: Model = {
      ...model,
      compartments: order.map((i) => model.compartments[i]),
      transfers,
      observed: place(0),
      observations: []
    }
    const one = run(model, repeated(model, { into: 0, amount: 100, every: 24, count: 2 }), withTarget)
    const initial = { amounts: order.map((i) => withTarget.amounts[i]), effectSites: [] }
    const two = run(shuffled, repeated(shuffled, { into: place(0), amount: 100, every: 24, count: 2 }), initial)
    expect(witness(one, two, times).largestRelativeDifference).toBeLessThan(1e-7)
  })

  /** The model with its units of time, mass and volume made smaller by these factors. */
  function rescaled(model: Model, time: number, mass: number, volume: number): Model {
    const transfers = model.transfers.map((transfer): Transfer => {
      switch (transfer.kind) {
        case 'first-order':
          return { ...transfer, rate: transfer.rate / time }
        case 'saturable':
          return {
            ...transfer,
            maximumRate: (transfer.maximumRate * mass) / time,
            halfSaturation: (transfer.halfSaturation * mass) / volume
          }
        case 'binding':
          return {
            ...transfer,
            association: (transfer.association * volume) / mass / time,
            dissociation: transfer.dissociation / time
          }
        case 'production':
          return { ...transfer, rate: (transfer.rate * mass) / time }
        default:
          throw new Error('unknown')
      }
    })
    return {
      ...model,
      compartments: model.compartments.map((place) =>
        place.volume === undefined ? place : { ...place, volume: place.volume * volume }
      ),
      observations: model.observations.map((seen) => ({ ...seen, volume: seen.volume * volume })),
      effectSites: model.effectSites.map((site) => ({ ...site, rate: site.rate / time })),
      transfers
    }
  }

  test.each([
    ['saturable', mixed(), undefined],
    ['binding', targetMediated({ approximation: 'none', turnover: true }), withTarget],
    ['quasi-steady-state', targetMediated({ approximation: 'quasi-steady-state', turnover: true }), withTarget]
  ] as const)('a change of units changes no digit by powers of 2 and few otherwise: %s', (_name, model, initial) => {
    const random = new Random(21)
    const compare = (time: number, mass: number, volume: number, exactly: boolean): void => {
      const other = rescaled(model, time, mass, volume)
      const start = initial ?? emptyState(model)
      const moved = { amounts: Array.from(start.amounts, (a) => a * mass), effectSites: Array.from(start.effectSites) }
      const given = { into: 0, amount: 100, every: 24, count: 2, over: 2 }
      const one = run(model, repeated(model, given), start)
      const two = run(other, repeated(other, { ...given, amount: 100 * mass, every: 24 * time, over: 2 * time }), moved)
      for (const [k, piece] of one.pieces.entries()) {
        const offset = piece.segment.duration / 2
        const a = piece.concentration(observed, offset)
        const b = (two.pieces[k].concentration(observed, two.pieces[k].segment.duration / 2) * volume) / mass
        if (exactly) expect(b).toBe(a)
        else expectWithin(b, a, { relative: 1e-9 }, `piece ${k} at ${time} ${mass} ${volume}`)
      }
    }
    for (const [time, mass, volume] of [
      [64, 1, 1],
      [1, 1024, 1],
      [1, 1, 0.125],
      [0.5, 4096, 256]
    ]) {
      compare(time, mass, volume, true)
    }
    compare(60, 1000, 1000, false)
    for (let k = 0; k < 3; k++) {
      compare(random.logBetween(0.01, 100), random.logBetween(1e-6, 1e6), random.logBetween(0.01, 100), false)
    }
  })
})

describe('work and failure', () => {
  // Counted: a quarter above what was seen, so that a worse first step or a lost digit of a Jacobian shows.
  test.each([
    [
      'saturable, 28 infusions',
      mixed(),
      { into: 1, amount: 300, every: 12, count: 28, over: 1 },
      undefined,
      1e-8,
      2600
    ],
    [
      'binding, 6 doses in 12 weeks',
      targetMediated({ approximation: 'none', turnover: true }),
      { into: 0, amount: 300, every: 336, count: 6 },
      withTarget,
      1e-8,
      750
    ],
    [
      'quasi-steady-state, 6 doses in 12 weeks',
      targetMediated({ approximation: 'quasi-steady-state', turnover: true }),
      { into: 0, amount: 300, every: 336, count: 6 },
      withTarget,
      1e-8,
      195
    ]
  ] as const)('%s stays within its budget of steps', (_name, model, given, initial, relative, budget) => {
    const integrator = new Integrator({ relative, floor: 1e-4 })
    integrator.begin(initial ?? emptyState(model))
    for (const segment of repeated(model, given)) integrator.pass(segment)
    expect(integrator.counts.steps).toBeLessThan(budget)
    expect(integrator.counts.rejections).toBeLessThan(0.02 * budget)
  })

  test('a failure names the time since the start', () => {
    const model = saturable({ volume: 1, maximumRate: Number.NaN, halfSaturation: 1 })
    const segments = repeated(model, { into: 0, amount: 10, every: 12, count: 2 })
    const late = segments.map((segment) => ({ ...segment, start: segment.start + 100 }))
    try {
      integrate(late, emptyState(model))
      expect.fail('integrated what is not a number')
    } catch (failure) {
      if (!(failure instanceof RosenbrockFailure)) throw failure
      expect(failure.code).toBe('not-a-number')
      expect(failure.stop.time).toBe(100)
      expect(failure.message).toContain('at time 100')
    }
  })

  test('no segments are refused', () =>
    expect(() => integrate([], { amounts: [], effectSites: [] })).toThrow(RangeError))
})
