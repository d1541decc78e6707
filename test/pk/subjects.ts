import { type Course, courseOf } from '../../src/pk/course'
import type { Model } from '../../src/pk/model'
import type { DoseLine } from '../../src/pk/prescription'
import type { Route, Subject } from '../../src/pk/subject'
import type { Spacing } from '../../src/units/spacing'

/** Hours as they were typed. */
export function hours(value: number): Spacing {
  return { value, times: 1, per: 1 }
}

/** One compartment with first-order elimination, and a depot before it where `ka` is given. */
export function oneCompartment(given: { volume: number; k: number; ka?: number }): Model {
  const central = { name: 'central', column: 'central', holds: 'drug', volume: given.volume } as const
  if (given.ka === undefined) {
    return {
      compartments: [central],
      transfers: [{ kind: 'first-order', from: 0, to: 'eliminated', rate: given.k }],
      effectSites: [],
      observed: 0,
      observations: []
    }
  }
  return {
    compartments: [{ name: 'depot', column: 'depot', holds: 'drug' }, central],
    transfers: [
      { kind: 'first-order', from: 0, to: 1, rate: given.ka },
      { kind: 'first-order', from: 1, to: 'eliminated', rate: given.k }
    ],
    effectSites: [],
    observed: 1,
    observations: []
  }
}

/** A central compartment, index 0, with others in exchange by clearances, and an effect site where `ke0` is given. */
export function mammillary(given: {
  volumes: readonly number[]
  clearance: number
  exchanges: readonly number[]
  ke0?: number
}): Model {
  const [central] = given.volumes
  return {
    compartments: given.volumes.map((volume, i) => ({ name: `V${i + 1}`, column: `V${i + 1}`, holds: 'drug', volume })),
    transfers: [
      { kind: 'first-order', from: 0, to: 'eliminated', rate: given.clearance / central },
      ...given.exchanges.flatMap((exchange, i) => [
        { kind: 'first-order' as const, from: 0, to: i + 1, rate: exchange / central },
        { kind: 'first-order' as const, from: i + 1, to: 0, rate: exchange / given.volumes[i + 1] }
      ])
    ],
    effectSites: given.ke0 === undefined ? [] : [{ name: 'effect', source: 0, rate: given.ke0 }],
    observed: 0,
    observations: []
  }
}

/** A person with one route, "in", straight into a compartment. */
export function subjectOf(model: Model, into: number = model.observed, route: Partial<Route> = {}): Subject {
  const parts = [{ into, fraction: 1, lag: 0 }]
  return {
    model,
    routes: [{ name: 'in', input: 'bolus', bioavailability: 1, lag: 0, parts, ...route }],
    weights: { actual: 70 }
  }
}

/** A dose line on the route "in", at 0 unless said otherwise. */
export function line(amount: number, rest: Partial<DoseLine> = {}): DoseLine {
  return { route: 'in', amount: { value: amount, per: 'dose' }, moietyFraction: 1, at: 0, exceptions: [], ...rest }
}

/** The course of these lines in one person who does not change; issues fail the test. */
export function courseFor(
  subject: Subject,
  lines: readonly DoseLine[],
  until: number,
  start: 'empty' | 'steady-state' = 'empty'
): Course {
  const outcome = courseOf({
    prescription: { name: 'regimen', start, lines },
    stretches: [{ from: 0, subject }],
    sessions: [],
    until,
    path: 'regimens[0]'
  })
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return outcome.course
}
