import { rootBetween } from '../numerics/root'
import type { Hours, MilligramsPerLitre } from '../units/canonical'
import { IntegratedPiece } from './integratedPiece'
import type { Piece, Signal } from './trajectory'

/** A point of a curve over one piece. Between two neighbouring points the curve rises or falls all the way. */
export interface OutlinePoint {
  /** Hours since the piece's start. */
  readonly offset: Hours
  readonly value: MilligramsPerLitre
  /** Whether the curve may turn here: its slope changes sign, or the outline begins or ends. */
  readonly turn: boolean
}

/** How often the stretch between two probes is halved where the slope may dip through zero and back. */
const DEEPEST = 4

/** Changes of the curve below this, relative to its value, are rounding. */
const ROUNDING = 1e-14

/**
 * The curve of a signal from one offset of a piece to another: both ends, the probes between, and every turning point,
 * found as a root of the slope. Between probes with slopes of one sign, the parabola that has these slopes and the curve's
 * rise as its area tells whether the slope may dip through zero and back; if so the stretch is looked into.
 */
export function outline(piece: Piece, signal: Signal, from: Hours, to: Hours): readonly OutlinePoint[] {
  if (!(piece instanceof IntegratedPiece && from === 0 && to === piece.segment.duration)) {
    return pointsOf(piece, signal, from, to)
  }
  const known = wholePieces.get(piece) ?? new Map<string, readonly OutlinePoint[]>()
  wholePieces.set(piece, known)
  const key = signal.kind === 'observed' ? signal.kind : `${signal.kind} ${signal.index}`
  const points = known.get(key) ?? pointsOf(piece, signal, from, to)
  known.set(key, points)
  return points
}

/**
 * Outlines of whole integrated pieces, for as long as these live: intervals, days, targets and windows all ask for them,
 * and they are no larger than the steps that such a piece keeps.
 */
const wholePieces = new WeakMap<IntegratedPiece, Map<string, readonly OutlinePoint[]>>()

function pointsOf(piece: Piece, signal: Signal, from: Hours, to: Hours): OutlinePoint[] {
  const first = sampled(piece, signal, from)
  const points: OutlinePoint[] = [{ offset: from, value: first.value, turn: true }]
  let left = first
  for (let k = 0; k < piece.probes.length; k++) {
    const probe = piece.probes[k]
    if (probe <= from) continue
    const right = sampled(piece, signal, Math.min(probe, to))
    const turnsAtRight = addTurns(piece, signal, left, right, DEEPEST, points)
    points.push({ offset: right.offset, value: right.value, turn: turnsAtRight || right.offset >= to })
    left = right
    if (right.offset >= to) break
  }
  return points
}

interface Sample {
  readonly offset: Hours
  readonly value: MilligramsPerLitre
  readonly slope: number
}

function sampled(piece: Piece, signal: Signal, offset: Hours): Sample {
  return { offset, value: piece.concentration(signal, offset), slope: piece.slope(signal, offset) }
}

/**
 * Append the turning points strictly between two samples, ascending. Returns whether the curve turns at the right one: where
 * the slope of an integrated piece jumps through zero, or is 0 there itself.
 */
function addTurns(
  piece: Piece,
  signal: Signal,
  left: Sample,
  right: Sample,
  depth: number,
  points: OutlinePoint[]
): boolean {
  if (left.slope * right.slope < 0 || Math.sign(left.slope) * Math.sign(right.slope) < 0) {
    const offset = rootBetween((at) => piece.slope(signal, at), left.offset, right.offset)
    if (offset > left.offset && offset < right.offset) {
      points.push({ offset, value: piece.concentration(signal, offset), turn: true })
    }
    return offset >= right.offset
  }
  const dip = depth > 0 ? possibleDip(left, right) : undefined
  if (dip === undefined) return right.slope === 0 && left.slope !== 0
  const middle = sampled(piece, signal, dip)
  if (addTurns(piece, signal, left, middle, depth - 1, points)) {
    points.push({ offset: middle.offset, value: middle.value, turn: true })
  }
  return addTurns(piece, signal, middle, right, depth - 1, points)
}

/** Where the slope, of one sign at both ends, comes closest to zero between them, if it comes close at all. */
function possibleDip(left: Sample, right: Sample): Hours | undefined {
  const length = right.offset - left.offset
  const sign = left.slope + right.slope < 0 ? -1 : 1
  const a = sign * left.slope
  const b = sign * right.slope
  const mean = (sign * (right.value - left.value)) / length
  // Slope over the stretch as a + p u + q u^2, u from 0 to 1, with mean a + p/2 + q/3 and a + p + q = b.
  const p = 6 * mean - 4 * a - 2 * b
  const q = 3 * (a + b - 2 * mean)
  if (!(q > 0)) return undefined
  const u = -p / (2 * q)
  if (!(u > 0 && u < 1)) return undefined
  const lowest = a + (p * u) / 2
  const smaller = Math.min(a, b)
  const rounding = ROUNDING * Math.max(Math.abs(left.value), Math.abs(right.value))
  if (lowest > 0.25 * smaller || (smaller - lowest) * length <= rounding) return undefined
  const offset = left.offset + Math.min(0.9, Math.max(0.1, u)) * length
  return offset > left.offset && offset < right.offset ? offset : undefined
}
