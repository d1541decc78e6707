import { describe, expect, test } from 'vitest'
import type { Administration, Dose } from '../../src/pk/dose'
import { dosesDuringSessions } from '../../src/pk/sessionOverlap'
import { type Session, sessionsBefore, tooManySessions } from '../../src/pk/sessions'
import { type ModelStretch, timeline } from '../../src/pk/timeline'
import { expectWithin } from '../expectWithin'
import { hours, line, oneCompartment } from './subjects'

const model = oneCompartment({ volume: 10, k: 0.1, ka: 1 })
const other = oneCompartment({ volume: 20, k: 0.2, ka: 1 })
const models: ModelStretch[] = [{ from: 0, model }]

function bolus(start: number, amount = 1, into = 0): Dose {
  return { kind: 'bolus', start, into, amount }
}

function infusion(start: number, duration: number, amount = 12, into = 1): Dose {
  return { kind: 'infusion', start, into, amount, duration }
}

describe('segments', () => {
  test('run without a gap from 0 to the end, cut where an input starts or ends', () => {
    const segments = timeline({ doses: [bolus(2), infusion(3, 4), infusion(5, 6)], models, sessions: [], until: 10 })
    expect(segments.map(({ start, duration }) => [start, duration])).toEqual([
      [0, 2],
      [2, 1],
      [3, 2],
      [5, 2],
      [7, 3]
    ])
    expect(segments.map(({ boluses }) => boluses[0])).toEqual([0, 1, 0, 0, 0])
    expect(segments.map(({ inputs }) => inputs[1])).toEqual([0, 0, 3, 5, 2])
  })

  test('end inputs at exactly nothing, whatever was added before', () => {
    const doses = [infusion(0, 3, 0.1), infusion(1, 1, 0.7), infusion(1.5, 1, 1e9)]
    const last = timeline({ doses, models, sessions: [], until: 10 }).at(-1)
    expect(last?.inputs).toEqual([0, 0])
  })

  test('leave out what enters at or after the end', () => {
    const segments = timeline({ doses: [bolus(10), infusion(10, 1), infusion(12, 1)], models, sessions: [], until: 10 })
    expect(segments).toHaveLength(1)
    expect([segments[0].boluses[0], segments[0].inputs[1]]).toEqual([0, 0])
  })

  test('hold one cut for times within 1e-12, and two for times further apart', () => {
    const thirds = [bolus(0.1 + 0.2), infusion(0.3, 1)]
    expect(timeline({ doses: thirds, models, sessions: [], until: 10 }).map(({ start }) => start)).toEqual([
      0, 0.3, 1.3
    ])
    const apart = [bolus(100), bolus(100 + 1e-9)]
    expect(timeline({ doses: apart, models, sessions: [], until: 200 })).toHaveLength(3)
  })

  test('let exactly the amount of an infusion enter, however its times are rounded', () => {
    const doses = [infusion(1000.1, 1 / 3, 7)]
    const segments = timeline({ doses, models, sessions: [], until: 2000 })
    const entered = segments.reduce((sum, { inputs, duration }) => sum + inputs[1] * duration, 0)
    expectWithin(entered, 7, { relative: 3e-16 })
  })

  test('let an infusion that is too short for two cuts enter at once', () => {
    const segments = timeline({ doses: [infusion(1e6, 1e-8, 5)], models, sessions: [], until: 2e6 })
    expect(segments).toHaveLength(2)
    expect([segments[1].boluses[1], segments[1].inputs[1]]).toEqual([5, 0])
  })

  test('have the model of the person at their start: a change acts before a dose at its time, a running infusion goes on', () => {
    const changing = [...models, { from: 4, model: other }]
    const segments = timeline({ doses: [bolus(4), infusion(3, 2, 8)], models: changing, sessions: [], until: 6 })
    expect(segments.map((segment) => segment.model === other)).toEqual([false, false, true, true])
    expect(segments.map(({ inputs }) => inputs[1])).toEqual([0, 4, 4, 0])
    expect(segments[2].boluses[0]).toBe(1)
  })
})

describe('sessions', () => {
  test('repeat like dose lines, up to the end', () => {
    const lines = [
      { at: 20, duration: 4, clearance: 6, every: hours(48), count: 3 },
      { at: 5, duration: 4, clearance: 6, every: hours(24) }
    ]
    expect(sessionsBefore(lines, 70).map(({ start }) => start)).toEqual([5, 20, 29, 53, 68])
  })

  test('add clearance / volume of the observed compartment while they last; overlapping ones add', () => {
    const sessions = [
      { start: 2, duration: 4, clearance: 5 },
      { start: 4, duration: 4, clearance: 3 }
    ]
    const segments = timeline({ doses: [], models, sessions, until: 10 })
    const added = segments.map((segment) =>
      segment.model.transfers
        .slice(model.transfers.length)
        .reduce(
          (sum, transfer) => sum + (transfer.kind === 'first-order' && transfer.from === 1 ? transfer.rate : 0),
          0
        )
    )
    expect(segments.map(({ start }) => start)).toEqual([0, 2, 4, 6, 8])
    expect(added).toEqual([0, 0.5, 0.8, 0.3, 0])
    expect(segments[0].model).toBe(segments[4].model)
  })

  test('take the volume of the person at the time', () => {
    const changing = [...models, { from: 4, model: other }]
    const sessions = [{ start: 2, duration: 4, clearance: 5 }]
    const segments = timeline({ doses: [], models: changing, sessions, until: 10 })
    const rates = segments.map(({ model: of }) =>
      of.transfers.slice(2).map((transfer) => 'rate' in transfer && transfer.rate)
    )
    expect(rates).toEqual([[], [0.5], [0.25], []])
  })
})

describe('doses during a session', () => {
  const given = (at: number, duration: number, number: number): Administration => ({
    line: 0,
    number,
    at,
    duration,
    route: 'in',
    amount: 1,
    productAmount: 1,
    doses: [],
    missed: false
  })
  const notes = (administrations: readonly Administration[], sessions: readonly Session[]): string[] =>
    dosesDuringSessions([line(1)], administrations, sessions)
  const session = { start: 10, duration: 4, clearance: 5 }

  test('are named by line; those that end as it starts or start as it ends are none', () => {
    expect(
      notes([given(9, 1, 1), given(9.5, 1, 2), given(10, 0, 3), given(13.9, 0, 4), given(14, 2, 5)], [session])
    ).toEqual(['dose line 1 (in): doses 2, 3, 4 overlap a dialysis session'])
    expect(notes([given(8, 1, 1), given(14, 0, 2)], [session])).toEqual([])
    expect(notes([given(12, 0, 7)], [{ ...session, start: 1, duration: 20 }, session])).toEqual([
      'dose line 1 (in): dose 7 overlaps a dialysis session'
    ])
  })
})

test('more than 100,000 sessions are an issue before they are written', () => {
  const often = { at: 0, duration: 0.001, clearance: 1, every: { value: 1, times: 1, per: 3600 } }
  expect(tooManySessions([often], 1000, 'patient.sessions')).toEqual([
    { path: 'patient.sessions[0].every', message: expect.stringContaining('at most 100000') }
  ])
  expect(tooManySessions([{ ...often, count: 3 }], 1000, 'patient.sessions')).toEqual([])
})
