import type { ReadonlyVector } from '../numerics/vector'
import type { Hours } from '../units/canonical'
import { multipleOf, type Spacing } from '../units/spacing'
import { administrations, subjectAt } from './administrations'
import { commonPeriod } from './commonPeriod'
import type { Course, CourseRequest } from './course'
import type { Administration, Dose } from './dose'
import type { Model } from './model'
import { OperatorStore } from './operatorStore'
import type { Convergence } from './periodicIntegrated'
import { periodicSegments } from './periodicSegments'
import type { DoseLine } from './prescription'
import { propagate } from './propagate'
import { isEndless, repeatsAtEnd } from './repeating'
import type { Segment } from './segment'
import type { Session } from './sessions'
import type { BodyState } from './state'
import { constantSolution, periodicSolution } from './steadySolution'
import { timeline } from './timeline'
import { isBefore, sameTime } from './times'
import type { Trajectory } from './trajectory'

/** What repeats at the end of a regimen, over one period of its own time: from 0, at the first dose of what repeats. */
export interface RepeatingPeriod {
  readonly kind: 'period'
  readonly period: Hours
  /** Elapsed time of the first dose of the lines that repeat (of the first session, where no line does). */
  readonly origin: Hours
  /** Positions of the lines that repeat. */
  readonly lines: readonly number[]
  readonly model: Model
  /** The doses that start in one period. */
  readonly administrations: readonly Administration[]
  readonly endless: ReadonlyVector | undefined
  /** Sessions of one period, and those of earlier periods that still run in it. */
  readonly sessions: readonly Session[]
  /** One of the periods that have always recurred, in segments. */
  readonly segments: readonly Segment[]
}

/** A period with its steady state. */
export interface SteadyPeriod extends RepeatingPeriod {
  /** The periodic state at the start of a period, before anything given at that time. */
  readonly state: BodyState
  /** One period at steady state. */
  readonly course: Trajectory
  /** How the iteration for the state ended; undefined for a linear model, whose state is solved for at once. */
  readonly convergence?: Convergence
}

/** An endless infusion alone. */
export interface ConstantInput {
  readonly kind: 'constant'
  readonly model: Model
  readonly endless: ReadonlyVector
}

/** Nothing changes any more. */
export interface ConstantLevel extends ConstantInput {
  readonly course: Trajectory
}

/** What repeats at the end of a regimen, whether it has a steady state or not. */
export type RepeatingOutcome = RepeatingPeriod | ConstantInput | { readonly kind: 'none'; readonly why: string }

export type SteadyOutcome = SteadyPeriod | ConstantLevel | { readonly kind: 'none'; readonly why: string }

/** How long the constant solution is written out; it is the same at any length. */
const CONSTANT_FOR: Hours = 24

/**
 * The periodic solution of the lines and sessions that repeat at the end, exceptions and single doses left out, with an
 * infusion still running at the end as endless, and the person as at the end.
 */
export function steadyPeriodOf(course: Course, request: CourseRequest): SteadyOutcome {
  const store = request.store ?? new OperatorStore()
  const repeating = repeatingAtEnd(course, request)
  switch (repeating.kind) {
    case 'none':
      return repeating
    case 'constant': {
      const solution = constantSolution(repeating.model, repeating.endless, CONSTANT_FOR, store)
      return solution.kind === 'none' ? solution : { ...repeating, course: solution.course }
    }
    case 'period': {
      const solution = periodicSolution(repeating.segments, store)
      if (solution.kind === 'none') return solution
      const { state, course: once, convergence } = solution
      return { ...repeating, state, course: once, ...(convergence !== undefined && { convergence }) }
    }
  }
}

/** What repeats at the end, exceptions and single doses left out, to the person as at the end. */
export function repeatingAtEnd(course: Course, request: CourseRequest): RepeatingOutcome {
  const { until, prescription, stretches } = request
  const subject = subjectAt(stretches, until)
  const { model } = subject
  const lines = prescription.lines.flatMap((line, i) => (repeatsAtEnd(line, until) ? [i] : []))
  const sessionLines = request.sessions.filter((line) => repeatsAtEnd(line, until))
  const endless = endlessInputs(course, until, model)
  if (lines.length === 0 && endless === undefined) return { kind: 'none', why: 'no dose repeats at the end' }
  if (lines.length + sessionLines.length === 0 && endless !== undefined) {
    return { kind: 'constant', model, endless }
  }
  const repeating = lines.map((i) => prescription.lines[i])
  const common = commonPeriod(repeating.flatMap(spacingOf), sessionLines.flatMap(spacingOf))
  if (common.kind === 'none') return common
  const period = common.hours
  const first = repeating.length > 0 ? repeating : sessionLines
  const origin = Math.min(...first.map((line) => line.at))
  const moved = prescription.lines.map((line) => withinPeriod(line, origin))
  const written = administrations({
    prescription: {
      ...prescription,
      lines: moved.filter((_, i) => lines.includes(i))
    },
    stretches: [{ from: 0, subject }],
    until: period,
    path: request.path
  })
  const [issue] = written.issues
  if (issue !== undefined) return { kind: 'none', why: issue.message }
  const given = written.administrations.map((each) => ({ ...each, line: lines[each.line] }))
  const sessions = sessionLines.flatMap((line): Session[] => {
    const { every, duration, clearance } = line
    if (every === undefined) return []
    const start = phaseOf(line.at - origin, multipleOf(every, 1))
    return repeatsWithin(start, every, period).map((each) => ({ start: each, duration, clearance }))
  })
  const doses = given.flatMap((each) => each.doses)
  const segments = periodicSegments({ model, period, doses, sessions, ...(endless !== undefined && { endless }) })
  return {
    ...{ kind: 'period', period, origin, lines, model, endless, segments },
    administrations: given,
    sessions: sessions.flatMap((session) => [...earlier(session, period), session])
  }
}

/** The first period of the same doses from an empty body, with sessions as at steady state. */
export function firstPeriod(steady: SteadyPeriod, store: OperatorStore): Trajectory {
  const doses = steady.administrations.flatMap((each) => each.doses)
  return over(steady, [...doses, ...endlessDoses(steady)], undefined, store)
}

/** What one period at steady state holds beyond the first: what earlier periods left in the body and still put into it. */
export function carriedPart(steady: SteadyPeriod, store: OperatorStore): Trajectory {
  const doses = steady.administrations.flatMap((each) => each.doses)
  return over(
    steady,
    doses.flatMap((dose) => enteringLater(dose, steady.period)),
    steady.state,
    store
  )
}

function over(
  steady: SteadyPeriod,
  doses: readonly Dose[],
  from: BodyState | undefined,
  store: OperatorStore
): Trajectory {
  const { model, sessions, period, state } = steady
  const segments = timeline({ doses, models: [{ from: 0, model }], sessions, until: period })
  const empty: BodyState = { amounts: zerosLike(state.amounts), effectSites: zerosLike(state.effectSites) }
  return propagate(segments, from ?? empty, store)
}

function endlessDoses({ endless, period, model }: SteadyPeriod): Dose[] {
  if (endless === undefined) return []
  return model.compartments.flatMap((_, into): Dose[] =>
    endless[into] > 0 ? [{ kind: 'infusion', start: 0, into, amount: endless[into] * period, duration: period }] : []
  )
}

/** What a dose of each earlier period puts into this one. */
function enteringLater(dose: Dose, period: Hours): Dose[] {
  const entering: Dose[] = []
  const finish = dose.kind === 'bolus' ? dose.start : dose.start + dose.duration
  for (let k = 1; !isBefore(finish, k * period); k++) {
    const start = dose.start - k * period
    if (start >= 0 || sameTime(dose.start, k * period)) entering.push({ ...dose, start: Math.max(0, start) })
    else if (dose.kind === 'infusion' && isBefore(k * period, finish)) {
      const duration = finish - k * period
      entering.push({ ...dose, start: 0, duration, amount: (dose.amount / dose.duration) * duration })
    }
  }
  return entering
}

/** The same session in the periods before, as far as it still runs at the start of this one. */
function earlier(session: Session, period: Hours): Session[] {
  const before: Session[] = []
  for (let start = session.start - period; isBefore(0, start + session.duration); start -= period) {
    before.push({ ...session, start })
  }
  return before
}

/** A line as it repeats within a period that starts at `origin`: without count and exceptions. */
function withinPeriod(line: DoseLine, origin: Hours): DoseLine {
  if (line.every === undefined) return line
  const { count: _count, ...rest } = line
  return { ...rest, at: phaseOf(line.at - origin, multipleOf(line.every, 1)), exceptions: [] }
}

/** Times from `start` on, `every` apart, before the end of the period. */
function repeatsWithin(start: Hours, every: Spacing, period: Hours): Hours[] {
  const times: Hours[] = []
  for (let k = 0; ; k++) {
    const time = start + multipleOf(every, k)
    if (!isBefore(time, period)) return times
    times.push(time)
  }
}

/** Time since the last multiple of `every`, 0 where it is one within 1e-12. */
function phaseOf(time: Hours, every: Hours): Hours {
  const nearest = Math.round(time / every)
  if (sameTime(time, nearest * every)) return 0
  return time - Math.floor(time / every) * every
}

/** Rates of what counts as endless, one a compartment; undefined where nothing does. */
function endlessInputs(course: Course, until: Hours, model: Model): ReadonlyVector | undefined {
  const endless = course.administrations.filter((each) => isEndless(each, course.prescription.lines, until))
  if (endless.length === 0) return undefined
  const inputs = model.compartments.map(() => 0)
  for (const dose of endless.flatMap((each) => each.doses)) {
    if (dose.kind === 'infusion') inputs[dose.into] += dose.amount / dose.duration
  }
  return inputs
}

function spacingOf({ every }: { readonly every?: Spacing }): Spacing[] {
  return every === undefined ? [] : [every]
}

function zerosLike(vector: ReadonlyVector): ReadonlyVector {
  return Array.from(vector, () => 0)
}
