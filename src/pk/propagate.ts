import type { ReadonlyVector } from '../numerics/vector'
import { IntegratedPiece } from './integratedPiece'
import { LinearPiece } from './linearPiece'
import { isLinear, type Model } from './model'
import { OperatorStore } from './operatorStore'
import type { Segment } from './segment'
import type { BodyState } from './state'
import type { Trajectory } from './trajectory'

/**
 * The exact course of a linear model over gapless segments, from a state before the first one's boluses. The state
 * advances from segment start to segment start only, so that what is asked of the trajectory later changes nothing in it.
 * `store` lets trajectories with the same models share operators; it changes no number. Throws `RangeError` for a model
 * that is not linear and for no segments.
 */
export function propagate(
  segments: readonly Segment[],
  initial: BodyState,
  store: OperatorStore = new OperatorStore()
): Trajectory {
  const last = segments.at(-1)
  if (last === undefined) throw new RangeError('a trajectory has at least one segment')
  const columns = inputColumns(segments)
  const pieces: LinearPiece[] = []
  let state = initial
  for (const segment of segments) {
    if (!isLinear(segment.model)) throw new RangeError('only linear models are propagated exactly')
    const operators = store.of(segment.model, columns.get(segment.model) ?? [])
    const piece = new LinearPiece(segment, operators, withBoluses(state, segment.boluses))
    pieces.push(piece)
    state = piece.stateAt(segment.duration)
  }
  return { end: last.start + last.duration, initial, pieces }
}

/** State at the end of a trajectory made by `propagate` or `integrate`: before anything given at that time. */
export function finalState(trajectory: Trajectory): BodyState {
  const piece = trajectory.pieces.at(-1)
  if (!(piece instanceof LinearPiece || piece instanceof IntegratedPiece)) {
    throw new RangeError('only a propagated or integrated trajectory has a final state')
  }
  return piece.stateAt(piece.segment.duration)
}

/** For each model, the compartments that take a constant input in any of its segments, ascending. */
export function inputColumns(segments: readonly Segment[]): Map<Model, number[]> {
  const taking = new Map<Model, Set<number>>()
  let previous: Segment | undefined
  for (const segment of segments) {
    if (segment.inputs === previous?.inputs && segment.model === previous.model) continue
    previous = segment
    const ofModel = taking.get(segment.model) ?? new Set<number>()
    taking.set(segment.model, ofModel)
    for (let i = 0; i < segment.inputs.length; i++) if (segment.inputs[i] > 0) ofModel.add(i)
  }
  return new Map([...taking].map(([model, set]) => [model, [...set].sort((a, b) => a - b)]))
}

function withBoluses(state: BodyState, boluses: ReadonlyVector): BodyState {
  for (let i = 0; i < boluses.length; i++) {
    if (boluses[i] > 0) {
      return { ...state, amounts: Array.from(state.amounts, (amount, j) => amount + boluses[j]) }
    }
  }
  return state
}
