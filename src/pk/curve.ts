import { rootBetween } from '../numerics/root'
import type { Hours, MilligramHoursPerLitre, MilligramsPerLitre } from '../units/canonical'
import { volumeOf } from './linearRates'
import { offsetIn, type Portion, pieceIndexAt, portions } from './locate'
import type { Model } from './model'
import { type OutlinePoint, outline } from './outline'
import type { Signal, Trajectory } from './trajectory'

/** Which side of a time: just before, or just after, what is given at it. */
export type Side = 'before' | 'after'

export interface Extremes {
  readonly peak: MilligramsPerLitre
  readonly peakTime: Hours
  readonly minimum: MilligramsPerLitre
  readonly minimumTime: Hours
}

export interface Crossing {
  readonly time: Hours
  /** `up`: from below the level to it or above; `down`: to below it. */
  readonly direction: 'up' | 'down'
}

/** Values closer than this, relative to the larger, are one value reached twice; the earlier time is reported. */
const ONE_VALUE = 4e-15

/**
 * Concentration at a time. `before` is before anything given at that time but after a change of the person at it, so that
 * amounts already stand over the new volume; the two differ where a bolus enters at that very time.
 */
export function valueAt(trajectory: Trajectory, signal: Signal, time: Hours, side: Side): MilligramsPerLitre {
  const index = pieceIndexAt(trajectory, time)
  const piece = trajectory.pieces[index]
  const offset = offsetIn(piece, time)
  if (offset > 0 || side === 'after') return piece.concentration(signal, offset)
  if (index === 0)
    return readFrom(piece.segment.model, signal, trajectory.initial.amounts, trajectory.initial.effectSites)
  const previous = trajectory.pieces[index - 1]
  const { duration } = previous.segment
  if (signal.kind === 'effect-site' || previous.segment.model === piece.segment.model) {
    return previous.concentration(signal, duration)
  }
  const amounts = new Float64Array(piece.segment.model.compartments.length)
  previous.amountsInto(duration, amounts)
  return readFrom(piece.segment.model, signal, amounts, [])
}

/** Area under the signal between two times [mg.h/L]: a sum over pieces, never a difference of areas since 0. */
export function areaBetween(trajectory: Trajectory, signal: Signal, from: Hours, to: Hours): MilligramHoursPerLitre {
  let area = 0
  for (const portion of portions(trajectory, from, to))
    area += portion.piece.areaBetween(signal, portion.from, portion.to)
  return area
}

/**
 * Highest and lowest value from just after what is given at `from` to just before what is given at `to`, with the earliest
 * time of each. Turning points are roots of the slope; the values on both sides of a bolus or of a change of volume count.
 * The two times must not be one (`RangeError`).
 */
export function extremes(trajectory: Trajectory, signal: Signal, from: Hours, to: Hours): Extremes {
  let found: Extremes | undefined
  const take = (time: Hours, value: MilligramsPerLitre): void => {
    if (found === undefined) found = { peak: value, peakTime: time, minimum: value, minimumTime: time }
    else if (value - found.peak > ONE_VALUE * Math.abs(found.peak)) found = { ...found, peak: value, peakTime: time }
    else if (found.minimum - value > ONE_VALUE * Math.abs(found.minimum)) {
      found = { ...found, minimum: value, minimumTime: time }
    }
  }
  for (const { piece, from: first, to: last, end } of portions(trajectory, from, to)) {
    for (const point of outline(piece, signal, first, last)) {
      if (point.turn) take(point.offset === last ? end : piece.segment.start + point.offset, point.value)
    }
    if (last === piece.segment.duration) take(end, valueAt(trajectory, signal, end, 'before'))
  }
  if (found === undefined) throw new RangeError(`no time between ${from} h and ${to} h`)
  return found
}

/**
 * Every time at which the signal passes a level, ascending: what is given at `from` counts, what is given at `to` does not.
 * A jump through the level is a crossing at its time; a curve that only touches the level from above does not cross it.
 */
export function crossings(
  trajectory: Trajectory,
  signal: Signal,
  level: MilligramsPerLitre,
  from: Hours,
  to: Hours
): Crossing[] {
  const found: Crossing[] = []
  let below = from <= trajectory.end && valueAt(trajectory, signal, from, 'before') < level
  const pass = (time: Hours, isBelow: boolean): void => {
    if (isBelow !== below) found.push({ time, direction: isBelow ? 'down' : 'up' })
    below = isBelow
  }
  for (const portion of portions(trajectory, from, to)) {
    const { start } = portion.piece.segment
    const points = outline(portion.piece, signal, portion.from, portion.to)
    pass(start + points[0].offset, points[0].value < level)
    for (let k = 1; k < points.length; k++) {
      const isBelow = points[k].value < level
      if (isBelow !== below) pass(start + levelOffset(portion, signal, level, points[k - 1], points[k]), isBelow)
    }
  }
  return found
}

/** Length of time for which the signal is above a level, and not at it. */
export function timeAbove(trajectory: Trajectory, signal: Signal, level: number, from: Hours, to: Hours): Hours {
  return timeOnSide(trajectory, signal, level, from, to, 1)
}

/** Length of time for which the signal is below a level, and not at it. */
export function timeBelow(trajectory: Trajectory, signal: Signal, level: number, from: Hours, to: Hours): Hours {
  return timeOnSide(trajectory, signal, level, from, to, -1)
}

function timeOnSide(
  trajectory: Trajectory,
  signal: Signal,
  level: MilligramsPerLitre,
  from: Hours,
  to: Hours,
  side: 1 | -1
): Hours {
  let sum = 0
  for (const portion of portions(trajectory, from, to)) {
    const points = outline(portion.piece, signal, portion.from, portion.to)
    let since = points[0].offset
    let on = side * (points[0].value - level) > 0
    for (let k = 1; k < points.length; k++) {
      const beyond = side * (points[k].value - level)
      if (on === beyond > 0) continue
      const at = levelOffset(portion, signal, level, points[k - 1], points[k])
      if (on) sum += at - since
      since = at
      on = beyond > 0
    }
    if (on) sum += portion.to - since
  }
  return sum
}

/** Where, between two points on either side of a level, the curve is at it. */
function levelOffset(
  portion: Portion,
  signal: Signal,
  level: MilligramsPerLitre,
  left: OutlinePoint,
  right: OutlinePoint
): Hours {
  return rootBetween((at) => portion.piece.concentration(signal, at) - level, left.offset, right.offset)
}

function readFrom(
  model: Model,
  signal: Signal,
  amounts: { readonly [index: number]: number },
  effectSites: { readonly [index: number]: number }
): MilligramsPerLitre {
  switch (signal.kind) {
    case 'observed':
      return amounts[model.observed] / volumeOf(model, model.observed)
    case 'observation': {
      const { of, volume } = model.observations[signal.index]
      return of.reduce((sum, i) => sum + amounts[i], 0) / volume
    }
    case 'effect-site':
      return effectSites[signal.index]
  }
}
