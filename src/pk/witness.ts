import type { Hours } from '../units/canonical'
import { valueAt } from './curve'
import { offsetIn, pieceIndexAt } from './locate'
import type { Model } from './model'
import type { Trajectory } from './trajectory'

/** Differences count relative to the value, or to this part of the peak where the value is smaller. */
const WITNESS_FLOOR = 1e-6

/** How far two unrelated methods agree. */
export interface Witness {
  /** Of the observed concentration, relative to the larger of the first method's value and 1e-6 of its peak over the times. */
  readonly largestRelativeDifference: number
  /** The first time at which it is that large [h]. */
  readonly at: Hours
  /**
   * Of the first method: largest difference between what is in the body together with what was eliminated, and what was
   * there at the start together with what entered, relative to the latter.
   */
  readonly massBalance: number
}

/**
 * Compare the observed concentration of two trajectories of one regimen, before and after anything given at each time, and
 * the mass balance of the first. Says that the arithmetic agrees; nothing of how well the model fits. Throws `RangeError`
 * for no times.
 */
export function witness(first: Trajectory, second: Trajectory, times: readonly Hours[]): Witness {
  if (times.length === 0) throw new RangeError('two trajectories are compared at one time at least')
  const samples = times.flatMap((time) =>
    (['before', 'after'] as const).map((side) => ({
      time,
      one: valueAt(first, { kind: 'observed' }, time, side),
      two: valueAt(second, { kind: 'observed' }, time, side)
    }))
  )
  const peak = samples.reduce((highest, { one }) => Math.max(highest, one), 0)
  let largest = 0
  let at = times[0]
  for (const { time, one, two } of samples) {
    const difference = relative(Math.abs(one - two), Math.max(one, WITNESS_FLOOR * peak))
    // Not `difference > largest`: a NaN must show.
    if (!(difference <= largest)) {
      largest = difference
      at = time
      if (Number.isNaN(difference)) break
    }
  }
  return { largestRelativeDifference: largest, at, massBalance: massBalance(first, times) }
}

/** Largest relative imbalance of drug over the times, everything given at each time included. */
function massBalance(trajectory: Trajectory, times: readonly Hours[]): number {
  const { pieces, initial } = trajectory
  const ascending = [...times].sort((a, b) => a - b)
  let entered = drugIn(pieces[0].segment.model, initial.amounts)
  let eliminated = 0
  let largest = 0
  let index = 0
  const amounts = new Float64Array(initial.amounts.length)
  for (const time of ascending) {
    const at = pieceIndexAt(trajectory, time)
    for (; index < at; index++) {
      const { segment } = pieces[index]
      entered += drugIn(segment.model, segment.boluses) + drugIn(segment.model, segment.inputs) * segment.duration
      eliminated += pieces[index].eliminated(segment.duration)
    }
    const piece = pieces[at]
    const { model, boluses, inputs } = piece.segment
    const offset = offsetIn(piece, time)
    piece.amountsInto(offset, amounts)
    const expected = entered + drugIn(model, boluses) + drugIn(model, inputs) * offset
    const found = drugIn(model, amounts) + eliminated + piece.eliminated(offset)
    const imbalance = relative(Math.abs(found - expected), expected)
    if (!(imbalance <= largest)) largest = imbalance
  }
  return largest
}

/** Sum over the compartments that hold drug. */
function drugIn(model: Model, amounts: { readonly [index: number]: number }): number {
  return model.compartments.reduce((sum, { holds }, i) => (holds === 'drug' ? sum + amounts[i] : sum), 0)
}

/** 0 where both are 0. */
function relative(difference: number, size: number): number {
  return difference === 0 ? 0 : difference / size
}
