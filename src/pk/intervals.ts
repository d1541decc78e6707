import type { Hours, MilligramHoursPerLitre, MilligramsPerLitre } from '../units/canonical'
import type { Course } from './course'
import { areaBetween, extremes, valueAt } from './curve'
import type { Administration } from './dose'
import type { Reasons } from './reasons'
import { isBefore, sameTime } from './times'
import type { Signal, Trajectory } from './trajectory'

/** From just after the start of a dose to the start of the next dose actually given. Doses that start together are one. */
export interface IntervalExposure {
  readonly start: Hours
  readonly end: Hours
  /** The last interval: it runs to the end of the study, and its peak and area are those up to there. */
  readonly incomplete: boolean
  /** Given at its start. */
  readonly administrations: readonly Administration[]
  readonly auc: MilligramHoursPerLitre
  readonly peak: MilligramsPerLitre
  /** Elapsed time of the peak. */
  readonly peakTime: Hours
  readonly minimum: MilligramsPerLitre
  readonly minimumTime: Hours
  readonly average: MilligramsPerLitre
  /** Just before the next dose. */
  readonly trough: MilligramsPerLitre | undefined
  readonly why: Reasons
}

export interface IntervalsRequest {
  readonly trajectory: Trajectory
  readonly signal: Signal
  readonly administrations: readonly Administration[]
  /** When infusions run, without lag: an interval that they cover has no trough. */
  readonly infusions: readonly Span[]
  /** Where the last interval ends. */
  readonly end: Hours
  /** Whether the next dose follows at `end`, as in a period that recurs; otherwise the last interval is incomplete. */
  readonly recurs: boolean
}

/** A stretch of time. */
export interface Span {
  readonly from: Hours
  readonly to: Hours
}

/** Why an interval through which an infusion runs has no trough, fluctuation or swing. */
export const INFUSION_THROUGHOUT = 'an infusion runs through the whole interval'

/** The intervals of a regimen as it was given, up to its end. */
export function intervalsOfCourse(course: Course, signal: Signal): IntervalExposure[] {
  const { trajectory, administrations, carried, end } = course
  const running = carried.flatMap((dose) =>
    dose.kind === 'infusion' ? [{ from: dose.start, to: dose.start + dose.duration }] : []
  )
  const infusions = [...running, ...infusionsOf(administrations)]
  return intervalsOf({ trajectory, signal, administrations, infusions, end, recurs: false })
}

/**
 * Every interval between doses, ascending; none where nothing is given. Peak, minimum and their times by root search, the
 * value just after a bolus included.
 */
export function intervalsOf(request: IntervalsRequest): IntervalExposure[] {
  const { end, recurs } = request
  const running = joined(request.infusions)
  const starts = startsOf(request.administrations).filter(({ at }) => isBefore(at, end))
  return starts.map(({ at, together }, i): IntervalExposure => {
    const next = starts.at(i + 1)?.at
    const incomplete = next === undefined && !recurs
    return intervalExposure(request, running, together, { from: at, to: next ?? end }, incomplete)
  })
}

/** When the infusions among these run. */
export function infusionsOf(administrations: readonly Administration[]): Span[] {
  return administrations.flatMap(({ at, duration, missed }) =>
    duration > 0 && !missed ? [{ from: at, to: at + duration }] : []
  )
}

/** Spans that touch or overlap as one, ascending. */
export function joined(spans: readonly Span[]): Span[] {
  const runs: { from: Hours; to: Hours }[] = []
  for (const { from, to } of [...spans].sort((a, b) => a.from - b.from)) {
    const last = runs.at(-1)
    if (last === undefined || isBefore(last.to, from)) runs.push({ from, to })
    else last.to = Math.max(last.to, to)
  }
  return runs
}

/** Whether one of these `joined` spans covers all of [from, to]. */
export function covers(runs: readonly Span[], from: Hours, to: Hours): boolean {
  let low = 0
  let high = runs.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (isBefore(from, runs[middle].from)) high = middle
    else low = middle + 1
  }
  const run = runs.at(low - 1)
  return low > 0 && run !== undefined && !isBefore(run.to, to)
}

interface Start {
  readonly at: Hours
  readonly together: readonly Administration[]
}

/** Dose starts with all that is given at each. A dose that was missed, or of which nothing was given, starts nothing. */
export function startsOf(administrations: readonly Administration[]): Start[] {
  const starts: { at: Hours; together: Administration[] }[] = []
  const given = administrations.filter(({ missed, amount }) => !missed && amount > 0).sort((a, b) => a.at - b.at)
  for (const administration of given) {
    const last = starts.at(-1)
    if (last !== undefined && sameTime(last.at, administration.at)) last.together.push(administration)
    else starts.push({ at: administration.at, together: [administration] })
  }
  return starts
}

function intervalExposure(
  { trajectory, signal }: IntervalsRequest,
  running: readonly Span[],
  administrations: readonly Administration[],
  { from: start, to: end }: Span,
  incomplete: boolean
): IntervalExposure {
  const auc = areaBetween(trajectory, signal, start, end)
  const why = incomplete
    ? 'the last interval runs to the end of the study; no dose follows it'
    : covers(running, start, end)
      ? INFUSION_THROUGHOUT
      : undefined
  return {
    start,
    end,
    incomplete,
    administrations,
    auc,
    ...extremes(trajectory, signal, start, end),
    average: auc / (end - start),
    trough: why === undefined ? valueAt(trajectory, signal, end, 'before') : undefined,
    why: why === undefined ? {} : { trough: why }
  }
}
