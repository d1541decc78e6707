import type { ReadonlyVector } from '../numerics/vector'
import type { Hours } from '../units/canonical'
import type { Dose } from './dose'
import type { Model } from './model'
import type { Segment } from './segment'
import type { Session } from './sessions'
import { timeline } from './timeline'
import { sameTime } from './times'

export interface PeriodicRequest {
  readonly model: Model
  readonly period: Hours
  /** What enters once in every period, at its start plus any number of periods. */
  readonly doses: readonly Dose[]
  /** Sessions that recur in every period. */
  readonly sessions: readonly Session[]
  /** Inputs that never stop, one a compartment [mg/h]. */
  readonly endless?: ReadonlyVector
}

/**
 * One period of what has always recurred and always will, as segments from 0 to `period`. An infusion or a session of
 * length L is in force floor(L / period) times at every moment, and once more over the rest, which may wrap around the
 * period's end. `periodicState` gives the state to start them from.
 */
export function periodicSegments(request: PeriodicRequest): Segment[] {
  const { model, period, endless } = request
  const doses = request.doses.flatMap((dose) => wrapDose(dose, period))
  if (endless !== undefined) {
    model.compartments.forEach((_, into) => {
      if (endless[into] > 0) doses.push(throughout(into, endless[into], period))
    })
  }
  const sessions = request.sessions.flatMap((session) => wrapSession(session, period))
  return timeline({ doses, models: [{ from: 0, model }], sessions, until: period })
}

interface Window {
  readonly start: Hours
  readonly duration: Hours
}

function wrapDose(dose: Dose, period: Hours): Dose[] {
  if (dose.kind === 'bolus') return [{ ...dose, start: phaseOf(dose.start, period) }]
  const { into } = dose
  const rate = dose.amount / dose.duration
  const { full, rest } = wrapped(dose.start, dose.duration, period)
  const windows = rest.map(
    ({ start, duration }): Dose => ({ kind: 'infusion', start, into, amount: rate * duration, duration })
  )
  return full === 0 ? windows : [throughout(into, rate * full, period), ...windows]
}

function throughout(into: number, rate: number, period: Hours): Dose {
  return { kind: 'infusion', start: 0, into, amount: rate * period, duration: period }
}

function wrapSession(session: Session, period: Hours): Session[] {
  const { clearance } = session
  const { full, rest } = wrapped(session.start, session.duration, period)
  const windows = rest.map((window): Session => ({ ...window, clearance }))
  return full === 0 ? windows : [{ start: 0, duration: period, clearance: clearance * full }, ...windows]
}

/** How often a window that recurs is in force at every moment, and the rest of it within one period. */
function wrapped(
  start: Hours,
  length: Hours,
  period: Hours
): { readonly full: number; readonly rest: readonly Window[] } {
  const nearest = Math.round(length / period)
  const whole = nearest > 0 && sameTime(length, nearest * period)
  const full = whole ? nearest : Math.floor(length / period)
  if (whole) return { full, rest: [] }
  const remaining = length - full * period
  const phase = phaseOf(start, period)
  const beyond = phase + remaining - period
  if (beyond <= 0 || sameTime(phase + remaining, period)) return { full, rest: [{ start: phase, duration: remaining }] }
  return {
    full,
    rest: [
      { start: 0, duration: beyond },
      { start: phase, duration: period - phase }
    ]
  }
}

/** Time within the period, from 0 to less than `period`; a time within 1e-12 of a multiple of the period is at 0. */
function phaseOf(time: Hours, period: Hours): Hours {
  const nearest = Math.round(time / period)
  if (time === 0 || (nearest > 0 && sameTime(time, nearest * period))) return 0
  return time - Math.floor(time / period) * period
}
