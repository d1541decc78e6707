import { rootBetween } from '../numerics/root'
import type { Hours, MilligramHoursPerLitre } from '../units/canonical'
import { areaBetween } from './curve'
import { offsetIn, pieceIndexAt } from './locate'
import { isBefore, sameTime } from './times'
import type { Signal, Trajectory } from './trajectory'

/** The largest area over any 24 h of the study. */
export interface RunningAuc24 {
  readonly auc: MilligramHoursPerLitre
  readonly from: Hours
}

/** Areas closer than this, relatively, are one area reached twice; the earlier time is reported. */
const ONE_AREA = 1e-12

/**
 * The largest area under the signal over any 24 h between 0 and the end; undefined where the trajectory is shorter. The
 * area from t to t + 24 h rises while C(t + 24 h) > C(t), so that it is largest at an end, where an event turns the
 * difference from rise to fall, or at a root of the difference.
 */
export function highestRunningAuc24(trajectory: Trajectory, signal: Signal): RunningAuc24 | undefined {
  const { end } = trajectory
  if (isBefore(end, 24)) return undefined
  const last = Math.max(0, end - 24)
  let highest: RunningAuc24 | undefined
  for (const from of candidates(trajectory, signal, last)) {
    const auc = areaBetween(trajectory, signal, from, Math.min(from + 24, end))
    if (highest === undefined || auc > highest.auc * (1 + ONE_AREA)) highest = { auc, from }
  }
  return highest
}

/** Starts of 24 h at which the area may be largest, ascending. */
function candidates(trajectory: Trajectory, signal: Signal, last: Hours): Hours[] {
  const found: Hours[] = [0]
  if (last === 0) return found
  const cuts = cutsOf(trajectory, last)
  let rising = false
  for (let k = 0; k + 1 < cuts.length; k++) {
    const from = cuts[k]
    const to = cuts[k + 1]
    const slope = slopeWithin(trajectory, signal, from, to)
    const times = probesWithin(trajectory, from, to)
    let left = slope(0)
    if (rising && left <= 0) found.push(from)
    for (let i = 1; i < times.length; i++) {
      const right = slope(times[i])
      if (left > 0 && right < 0) found.push(from + rootBetween(slope, times[i - 1], times[i]))
      left = right
    }
    rising = left > 0
  }
  found.push(last)
  return found
}

/** Times from 0 to `last` at which something is switched, there or 24 h later. */
function cutsOf(trajectory: Trajectory, last: Hours): Hours[] {
  const starts = trajectory.pieces.map((piece) => piece.segment.start)
  const all = [...starts, ...starts.map((start) => start - 24)].filter((time) => time > 0 && isBefore(time, last))
  const cuts = [0]
  for (const time of all.sort((a, b) => a - b)) if (!sameTime(time, cuts[cuts.length - 1])) cuts.push(time)
  return [...cuts, last]
}

/** C(t + 24 h) - C(t) by hours since `from`, between two cuts: one piece here and one there. */
function slopeWithin(trajectory: Trajectory, signal: Signal, from: Hours, to: Hours): (offset: Hours) => number {
  const middle = from + (to - from) / 2
  const here = trajectory.pieces[pieceIndexAt(trajectory, middle)]
  const there = trajectory.pieces[pieceIndexAt(trajectory, middle + 24)]
  const hereFrom = offsetIn(here, from)
  const thereFrom = offsetIn(there, from + 24)
  return (offset) =>
    there.concentration(signal, Math.min(thereFrom + offset, there.segment.duration)) -
    here.concentration(signal, Math.min(hereFrom + offset, here.segment.duration))
}

/** Offsets from `from` to `to` at the probes of the pieces in force here and 24 h later, ascending. */
function probesWithin(trajectory: Trajectory, from: Hours, to: Hours): Hours[] {
  const length = to - from
  const middle = from + length / 2
  const here = trajectory.pieces[pieceIndexAt(trajectory, middle)]
  const there = trajectory.pieces[pieceIndexAt(trajectory, middle + 24)]
  const hereFrom = offsetIn(here, from)
  const thereFrom = offsetIn(there, from + 24)
  const merged: Hours[] = [0]
  // Both lists ascend: the next of the two heads is the next probe.
  for (let i = 0, k = 0; i < here.probes.length || k < there.probes.length; ) {
    const a = i < here.probes.length ? here.probes[i] - hereFrom : Number.POSITIVE_INFINITY
    const b = k < there.probes.length ? there.probes[k] - thereFrom : Number.POSITIVE_INFINITY
    const next = Math.min(a, b)
    if (a === next) i++
    if (b === next) k++
    if (next > 0 && next < length) merged.push(next)
  }
  merged.push(length)
  return merged
}
