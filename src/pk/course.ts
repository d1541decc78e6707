import { NumericalFailure } from '../numerics/numericalFailure'
import type { Hours } from '../units/canonical'
import { administrations, withoutRepeats } from './administrations'
import { continuedTrajectory } from './continued'
import type { Administration, Dose } from './dose'
import type { Issue } from './issue'
import { OperatorStore } from './operatorStore'
import type { Prescription, SessionLine } from './prescription'
import { continuedLine, continuedSession, isEndless, prolonged, repeatsAtEnd } from './repeating'
import type { Segment } from './segment'
import { dosesDuringSessions } from './sessionOverlap'
import { type Session, sessionsBefore, tooManySessions } from './sessions'
import { type Beginning, emptyBeginning, steadyBeginning } from './startInSteadyState'
import { type BodyState, emptyState } from './state'
import type { Stretch } from './subject'
import { timeline } from './timeline'
import { isBefore } from './times'
import type { Trajectory } from './trajectory'
import { type Method, methodFor, trajectoryOf } from './trajectoryOf'

export interface CourseRequest {
  readonly prescription: Prescription
  readonly stretches: readonly Stretch[]
  readonly sessions: readonly SessionLine[]
  readonly until: Hours
  /** Where the regimen stands in the file, for issues: `regimens[0]`. */
  readonly path: string
  /** Operators shared with other courses of the same models; changes no number. */
  readonly store?: OperatorStore
}

/** One regimen in one individual, from 0 to `end`. */
export interface Course {
  readonly prescription: Prescription
  readonly administrations: readonly Administration[]
  /** Given before 0 and entering after it, where the regimen starts in steady state. */
  readonly carried: readonly Dose[]
  readonly sessions: readonly Session[]
  readonly segments: readonly Segment[]
  /** At time 0, before anything that enters at that time. */
  readonly initial: BodyState
  readonly trajectory: Trajectory
  /** Exactly, or by the integrator at its working tolerance. */
  readonly method: Method
  readonly end: Hours
  /** What was done with the prescription and a reader must know. */
  readonly notes: readonly string[]
}

export type CourseOutcome =
  | { readonly ok: true; readonly course: Course }
  | { readonly ok: false; readonly issues: readonly Issue[] }

/** A regimen as written, for one individual, up to `until`. Issues where the prescription cannot be written out. */
export function courseOf(request: CourseRequest): CourseOutcome {
  return run(request, request.until)
}

/**
 * The same regimen with what repeats at `until` continued to a later `end`: lines and sessions that repeat go on without
 * their count, an infusion still running at `until` runs on, the person stays as at `until`, all else is as written.
 * Where it has to be integrated, `earlier` is a course of the same regimen whose pieces are used as far as they go.
 */
export function continuedCourse(request: CourseRequest, end: Hours, earlier?: Course): CourseOutcome {
  const { prescription, until } = request
  return run(
    {
      ...request,
      prescription: { ...prescription, lines: prescription.lines.map((line) => continuedLine(line, until)) },
      sessions: request.sessions.map((line) => continuedSession(line, until)),
      stretches: request.stretches.filter((stretch) => !isBefore(until, stretch.from))
    },
    end,
    earlier
  )
}

function run(request: CourseRequest, end: Hours, earlier?: Course): CourseOutcome {
  const { prescription, stretches, until, path } = request
  const store = request.store ?? new OperatorStore()
  const repeats = (line: number): boolean => repeatsAtEnd(prescription.lines[line], until)
  const written = administrations({
    prescription,
    stretches,
    until,
    untilOfLine: (line) => (repeats(line) ? end : until),
    path
  })
  const beginning: Beginning =
    earlier === undefined
      ? beginningOf(request, store)
      : { state: earlier.initial, carried: earlier.carried, issues: [], notes: [] }
  const sessionEnd = (line: SessionLine): Hours => (repeatsAtEnd(line, until) ? end : until)
  const sessionIssues = tooManySessions(request.sessions, end, 'patient.sessions')
  const issues = withoutRepeats([...written.issues, ...beginning.issues, ...sessionIssues])
  if (issues.length > 0) return { ok: false, issues }
  const given = written.administrations.map((administration) =>
    isBefore(until, end) && isEndless(administration, prescription.lines, until)
      ? { ...administration, doses: prolonged(administration.doses, end) }
      : administration
  )
  const sessions = request.sessions.flatMap((line) => sessionsBefore([line], sessionEnd(line)))
  const segments = timeline({
    doses: [...beginning.carried, ...given.flatMap((administration) => administration.doses)],
    models: stretches.map(({ from, subject }) => ({ from, model: subject.model })),
    sessions,
    until: end
  })
  const method = methodFor(segments)
  const solved = solvedOrFailed(() =>
    earlier !== undefined && method === 'integrated'
      ? continuedTrajectory(segments, earlier.trajectory)
      : trajectoryOf(segments, beginning.state, store)
  )
  if (typeof solved === 'string') return { ok: false, issues: [{ path, message: `cannot be computed: ${solved}` }] }
  const course: Course = {
    prescription,
    administrations: given,
    carried: beginning.carried,
    sessions,
    segments,
    initial: beginning.state,
    trajectory: solved,
    method,
    end,
    notes: [...beginning.notes, ...written.notes, ...dosesDuringSessions(prescription.lines, given, sessions)]
  }
  return { ok: true, course }
}

function beginningOf(request: CourseRequest, store: OperatorStore): Beginning {
  const { subject } = request.stretches[0]
  try {
    return request.prescription.start === 'empty'
      ? emptyBeginning(subject)
      : steadyBeginning(request.prescription, subject, request.path, store)
  } catch (failure) {
    if (!(failure instanceof NumericalFailure) || failure.code !== 'no-way-out') throw failure
    const issues = [{ path: `${request.path}.start`, message: failure.message }]
    return { state: emptyState(subject.model), carried: [], issues, notes: [] }
  }
}

/** A trajectory, or in words what the numerics could not do on input that is valid. */
function solvedOrFailed(solve: () => Trajectory): Trajectory | string {
  try {
    return solve()
  } catch (failure) {
    if (!(failure instanceof NumericalFailure)) throw failure
    return failure.message
  }
}
