import { rootBetween } from '../numerics/root'
import type { Hours } from '../units/canonical'
import type { Course } from './course'
import { type IntervalExposure, intervalsOfCourse } from './intervals'
import { offsetIn, pieceIndexAt } from './locate'
import { isLinear } from './model'
import { NO_END_OF_DISTRIBUTION } from './nonlinearWords'
import { type PartsPiece, phaseParts } from './phaseParts'
import { rulingPhase } from './phases'
import { isBefore } from './times'

/** When, in one interval, a concentration is no longer that of drug on its way into the tissues. */
export interface DistributionOver {
  /** Position of the interval. */
  readonly interval: number
  /** Elapsed end of the interval's input: infusion end or bolus, lag included; the last one if several. */
  readonly endOfInput: Hours
  /** After the end of the input; by the model's own rule where that is later. */
  readonly over: Hours | undefined
  /** By the phases alone, without the model's own rule. */
  readonly byPhases: Hours | undefined
  /** Elapsed time from which a sample may be compared with a window, by the phases or else by the model's own rule. */
  readonly readableFrom: Hours | undefined
  /** Elapsed end of the interval: the time up to which such a sample may be taken. */
  readonly readableTo: Hours
  /**
   * Whether the model has a phase for distribution, so that any accurately timed sample may serve to estimate the patient;
   * without one only a sample after distribution may.
   */
  readonly describesDistribution: boolean
  readonly why?: string
}

/** A model's own rule for the earliest sample. */
export interface SampleAfter {
  readonly delay: Hours
  readonly from: 'dose start' | 'dose end'
}

/** Distribution counts as over once the faster phases have less than this share of the concentration. */
const STILL_DISTRIBUTING = 0.05

const NOT_DESCRIBED = 'this model does not describe distribution; follow the local sampling rule'
const NEVER = 'never within this interval'

/**
 * For every interval of a course, when distribution is over: from then to the end of the interval the parts of the phases
 * faster than the ruling one stay below 5 % of the concentration, everything given before included. By root search on the
 * parts, which have about 1e-14 of the concentration as their error.
 */
export function distributionOver(course: Course, sampleAfter: SampleAfter | undefined): DistributionOver[] {
  const intervals = intervalsOfCourse(course, { kind: 'observed' })
  const linear = course.segments.every(({ model }) => isLinear(model))
  const parts = linear ? phaseParts(course.trajectory) : NO_END_OF_DISTRIBUTION
  return intervals.map((interval, index) => inInterval(course, parts, interval, index, sampleAfter))
}

function inInterval(
  course: Course,
  parts: readonly PartsPiece[] | string,
  interval: IntervalExposure,
  index: number,
  sampleAfter: SampleAfter | undefined
): DistributionOver {
  const endOfInput = endOfInputs(interval)
  const found = typeof parts === 'string' ? parts : overAt(course, parts, interval, endOfInput)
  const byPhases = typeof found === 'number' ? Math.max(0, found - endOfInput) : undefined
  const rule = sampleAfter === undefined ? undefined : ruleTime(interval, sampleAfter) - endOfInput
  const over = byPhases === undefined || rule === undefined ? byPhases : Math.max(byPhases, rule)
  const readable = byPhases === undefined && found === NEVER ? undefined : (over ?? rule)
  const readableFrom = readable === undefined ? undefined : endOfInput + readable
  const late = readableFrom !== undefined && !isBefore(readableFrom, interval.end)
  const why = typeof found === 'string' ? found : late ? NEVER : undefined
  return {
    interval: index,
    endOfInput,
    over: late ? undefined : over,
    byPhases,
    readableFrom: late ? undefined : readableFrom,
    readableTo: interval.end,
    describesDistribution: typeof parts !== 'string' && found !== NOT_DESCRIBED,
    ...(why !== undefined && { why })
  }
}

/** When the last input of the interval's own doses ends. */
function endOfInputs({ administrations }: IntervalExposure): Hours {
  return Math.max(
    ...administrations.flatMap(({ doses }) =>
      doses.map((dose) => (dose.kind === 'bolus' ? dose.start : dose.start + dose.duration))
    )
  )
}

/** The earliest time for a sample by the model's own rule. */
function ruleTime({ start, administrations }: IntervalExposure, { delay, from }: SampleAfter): Hours {
  if (from === 'dose start') return start + delay
  return start + Math.max(...administrations.map(({ duration }) => duration)) + delay
}

/** Elapsed time from which on the faster phases stay small; in words where there is none. */
function overAt(
  { trajectory }: Course,
  parts: readonly PartsPiece[],
  interval: IntervalExposure,
  endOfInput: Hours
): Hours | string {
  if (!isBefore(endOfInput, interval.end)) return NEVER
  const first = pieceIndexAt(trajectory, endOfInput)
  let last = pieceIndexAt(trajectory, interval.end)
  if (!isBefore(parts[last].piece.segment.start, interval.end)) last -= 1
  const within = parts.slice(first, last + 1)
  if (within.some(({ phases }) => !((rulingPhase(phases) ?? 0) > 0))) return NOT_DESCRIBED
  for (let k = within.length - 1; k >= 0; k--) {
    const { segment } = within[k].piece
    const from = offsetIn(within[k].piece, endOfInput)
    const to = offsetIn(within[k].piece, interval.end)
    const settled = settledFrom(within[k], from, to)
    if (settled === undefined) return k === within.length - 1 ? NEVER : segment.start + segment.duration
    if (settled > from) return segment.start + settled
  }
  return endOfInput
}

/**
 * Offset in a piece from which on, up to `to`, the faster phases have less than their share; undefined where they have it
 * at `to`. `from` where they have less all the way.
 */
function settledFrom(parts: PartsPiece, from: Hours, to: Hours): Hours | undefined {
  const { piece, phases } = parts
  const ruling = rulingPhase(phases) ?? 0
  const excess = (offset: Hours): number => {
    const level = piece.concentration({ kind: 'observed' }, offset)
    const faster = parts.at(offset).slice(0, ruling)
    return faster.reduce((sum, part) => sum + Math.abs(part), 0) - STILL_DISTRIBUTING * level
  }
  if (!(excess(to) < 0)) return undefined
  let right = to
  for (let k = piece.probes.length - 1; k >= 0; k--) {
    const probe = piece.probes[k]
    if (probe >= right) continue
    const left = Math.max(probe, from)
    if (excess(left) >= 0) return rootBetween(excess, left, right)
    if (left === from) return from
    right = left
  }
  return from
}
