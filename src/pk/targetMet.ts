import type { Hours } from '../units/canonical'
import { areaBetween, extremes, valueAt } from './curve'
import type { IntervalExposure } from './intervals'
import type { Target } from './target'
import { type Judged, type Judging, judgedOn, type Stretched } from './targetStretches'
import { timeShares } from './timeShares'
import { isBefore } from './times'
import type { Trajectory } from './trajectory'

/** Whether a regimen meets one target, judged on every stretch that its `when` picks. */
export interface TargetResult {
  /** Position in the study's targets. */
  readonly index: number
  readonly target: Target
  /** Undefined where it cannot be evaluated. */
  readonly met: boolean | undefined
  /** The worst value over the stretches, in the target's unit: a share of time for window, time-above and time-below. */
  readonly value: number | undefined
  readonly unit: string
  /** Start of the stretch or interval that the worst value is from; in the period's own time for steady state. */
  readonly worstFrom: Hours | undefined
  /** Values compared. */
  readonly count: number
  /** Why it cannot be evaluated, at all or on one of its stretches. */
  readonly why?: string
}

/** A limit that a value misses by no more than this, relatively, is met: roots and sums of shares are rounded. */
const ROUNDING = 1e-12

/**
 * One target on one regimen. All values must meet; the one reported is the worst: nearest to a limit or furthest beyond
 * it. Where one of several values is not defined the target is not met if another fails, else it cannot be told.
 */
export function targetResult(judging: Judging, target: Target, index: number): TargetResult {
  const none = { index, target, value: undefined, unit: unitOf(target), worstFrom: undefined, count: 0 }
  const judged = judgedOn(judging, target.when, target.signal)
  if (typeof judged === 'string') return { ...none, met: undefined, why: judged }
  const compared = valuesOf(target, judged)
  if (typeof compared === 'string') return { ...none, met: undefined, why: compared }
  const values = compared.flatMap(({ from, value }) => (typeof value === 'number' ? [{ from, value }] : []))
  const why = compared.map(({ value }) => value).find((value) => typeof value === 'string')
  const margins = values.map(({ value }) => marginOf(target, value))
  const least = Math.min(...margins)
  const worst = values.at(margins.indexOf(least))
  if (worst === undefined) return { ...none, met: undefined, ...(why !== undefined && { why }) }
  const fails = least < -ROUNDING
  return {
    ...none,
    met: fails ? false : why === undefined ? true : undefined,
    value: worst.value,
    worstFrom: worst.from,
    count: values.length,
    ...(why !== undefined && { why })
  }
}

/** Unit of the reported value: shares of time have none. */
function unitOf(target: Target): string {
  const isShare = target.kind === 'window' || target.kind === 'time-above' || target.kind === 'time-below'
  return isShare ? '1' : target.unit
}

/** A value compared, and where it is from; in words where it is not defined. */
interface Compared {
  readonly from: Hours
  readonly value: number | string
}

/** Every value that the target compares, in its own unit; in words where there is none at all. */
function valuesOf(target: Target, judged: Judged): Compared[] | string {
  const { trajectory, stretches, intervals, doses } = judged
  const { signal, factor } = target
  const onStretches = (value: (stretch: Stretched) => number): Compared[] =>
    stretches.map((stretch) => ({ from: stretch.from, value: value(stretch) }))
  switch (target.kind) {
    case 'window':
      return onStretches(({ from, to }) => timeShares(trajectory, target, from, to).timeInWindow)
    case 'time-above': {
      const { high: _high, ...only } = target
      return onStretches(({ from, to }) => shareAbove(trajectory, only, from, to))
    }
    case 'time-below': {
      const { low: _low, ...only } = target
      return onStretches(({ from, to }) => shareBelow(trajectory, only, from, to))
    }
    case 'peak':
      return onStretches(({ from, to }) => factor * extremes(trajectory, signal, from, to).peak)
    case 'minimum':
      return onStretches(({ from, to }) => factor * extremes(trajectory, signal, from, to).minimum)
    case 'average':
      return onStretches(({ from, to }) => (factor * areaBetween(trajectory, signal, from, to)) / (to - from))
    case 'auc24': {
      const days = stretches.flatMap(daysOf)
      if (days.length === 0) return 'no full 24 h lie in the time that is judged'
      return days.map(({ from, to }) => {
        const area = areaBetween(trajectory, signal, from, to)
        return { from, value: (factor * (area * 24)) / (to - from) }
      })
    }
    case 'trough':
      return orNone(
        intervals.map(({ start, trough, why }) => ({
          from: start,
          value: trough === undefined ? why.trough : factor * trough
        }))
      )
    case 'auc-interval':
      return orNone(intervals.map(({ start, auc }) => ({ from: start, value: factor * auc })))
    case 'level':
      return orNone(
        doses.flatMap((interval) => {
          const value = levelAfter(target, trajectory, interval)
          return value === undefined ? [] : [{ from: interval.start, value }]
        })
      )
  }
}

function orNone(values: Compared[]): Compared[] | string {
  return values.length > 0 ? values : 'no complete interval between doses starts in the time that is judged'
}

/** The stretch itself, or every full 24 h of it. */
function daysOf(stretch: Stretched): Stretched[] {
  if (!stretch.inDays) return [stretch]
  const days: Stretched[] = []
  for (let from = stretch.from; !isBefore(stretch.to, from + 24); from += 24) {
    days.push({ from, to: Math.min(from + 24, stretch.to), inDays: true })
  }
  return days
}

/** Share of the time strictly above `low`, or above what is the only limit. */
function shareAbove(trajectory: Trajectory, target: Target, from: Hours, to: Hours): number {
  const { low, ...rest } = target
  return low === undefined ? 1 : timeShares(trajectory, { ...rest, high: low }, from, to).timeAbove
}

function shareBelow(trajectory: Trajectory, target: Target, from: Hours, to: Hours): number {
  const { high, ...rest } = target
  return high === undefined ? 1 : timeShares(trajectory, { ...rest, low: high }, from, to).timeBelow
}

/**
 * The value a stated time after a dose's start or end (the last end of doses that start together). Undefined where the end
 * of the study comes first and the interval is incomplete; in words where the next dose comes first.
 */
function levelAfter(target: Target, trajectory: Trajectory, interval: IntervalExposure): number | string | undefined {
  const { after = 0, from = 'dose start', signal, factor } = target
  const longest = Math.max(...interval.administrations.map(({ duration }) => duration))
  const time = interval.start + (from === 'dose end' ? longest : 0) + after
  if (isBefore(interval.end, time)) return interval.incomplete ? undefined : 'the next dose comes before the level'
  return factor * valueAt(trajectory, signal, time, isBefore(interval.start, time) ? 'before' : 'after')
}

/** How far a value is inside its limits, relative to the limit; negative beyond. */
function marginOf(target: Target, value: number): number {
  const { low, high, share, kind } = target
  if (kind === 'window' || kind === 'time-above' || kind === 'time-below') return value - share
  const above = low === undefined ? Number.POSITIVE_INFINITY : relative(value - low, low)
  const below = high === undefined ? Number.POSITIVE_INFINITY : relative(high - value, high)
  return Math.min(above, below)
}

function relative(distance: number, limit: number): number {
  return limit === 0 ? distance : distance / Math.abs(limit)
}
