import type { Hours } from '../units/canonical'
import { isBefore, sameTime } from './times'
import type { Piece, Trajectory } from './trajectory'

/** A stretch of one piece, by offsets from its start. */
export interface Portion {
  readonly piece: Piece
  readonly from: Hours
  readonly to: Hours
  /** Time at which the portion ends: the very time of the cut where it goes to the end of its piece. */
  readonly end: Hours
}

/** Index of the piece that `time` lies in; at a cut (times within 1e-12 being one) the piece that begins there. */
export function pieceIndexAt(trajectory: Trajectory, time: Hours): number {
  const { pieces, end } = trajectory
  if (!(time >= 0) || isBefore(end, time))
    throw new RangeError(`${time} h is outside the trajectory from 0 to ${end} h`)
  let low = 0
  let high = pieces.length - 1
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (isBefore(time, pieces[middle].segment.start)) high = middle - 1
    else low = middle
  }
  return low
}

/** Offset of `time` in a piece: 0 and the duration where `time` is the same as the piece's start or end. */
export function offsetIn(piece: Piece, time: Hours): Hours {
  const { start, duration } = piece.segment
  if (time <= start || sameTime(time, start)) return 0
  const end = start + duration
  return time >= end || sameTime(time, end) ? duration : time - start
}

/** What lies between two times, piece by piece, from just after what is given at `from` to just before what is given at `to`. */
export function* portions(trajectory: Trajectory, from: Hours, to: Hours): Generator<Portion> {
  if (!isBefore(from, to)) return
  for (let i = pieceIndexAt(trajectory, from); i < trajectory.pieces.length; i++) {
    const piece = trajectory.pieces[i]
    if (!isBefore(piece.segment.start, to)) return
    const first = offsetIn(piece, from)
    const last = offsetIn(piece, to)
    if (first >= last) continue
    const cut = trajectory.pieces[i + 1]?.segment.start ?? trajectory.end
    const end = last === piece.segment.duration ? cut : piece.segment.start + last
    yield { piece, from: first, to: last, end }
  }
}
