import type { Piece, Signal, Trajectory } from '../pk/trajectory'

/** A curve sampled to be drawn, canonical units. A jump has two points at one time. */
export interface Series {
  readonly times: Float64Array
  readonly values: Float64Array
}

/** Pieces from which on a curve is drawn as the envelope of its pieces. */
const MOST_PIECES = 1500

/**
 * A trajectory sampled at about `budget` points, where they are seen: the ends of every piece, then again and again the
 * middle of the stretch whose chord strays furthest from the curve, on a linear and on a logarithmic scale. Every point
 * lies on the curve; straight lines between them do not leave it by more than a pixel or so.
 */
export function sampledSeries(trajectory: Trajectory, signal: Signal, budget: number): Series {
  const { pieces } = trajectory
  const points =
    pieces.length > MOST_PIECES
      ? envelope(pieces, signal, budget)
      : refined(pieces, signal, Math.max(budget, 3 * pieces.length))
  const kept = points.filter((point, k) => k === 0 || !same(points[k - 1]!, point))
  return {
    times: Float64Array.from(kept, (point) => point.time),
    values: Float64Array.from(kept, (point) => point.value)
  }
}

interface Point {
  readonly time: number
  readonly value: number
}

/** A stretch of a piece between two samples, with the one at its middle and how far the chord strays there. */
interface Stretch {
  readonly piece: Piece
  readonly from: number
  readonly to: number
  readonly low: number
  readonly middle: number
  readonly high: number
  readonly stray: number
}

function refined(pieces: readonly Piece[], signal: Signal, budget: number): Point[] {
  const read = (piece: Piece, offset: number) => piece.concentration(signal, offset)
  let top = 0
  for (const piece of pieces) {
    top = Math.max(top, read(piece, 0), read(piece, piece.segment.duration))
  }
  if (top === 0) top = 1
  const queue = new Heap()
  const add = (piece: Piece, from: number, to: number, low: number, high: number) => {
    const middle = read(piece, (from + to) / 2)
    queue.push({ piece, from, to, low, middle, high, stray: strayOf(low, middle, high, top) })
  }
  for (const piece of pieces) {
    const { duration } = piece.segment
    add(piece, 0, duration, read(piece, 0), read(piece, duration))
  }
  // Every stretch gives two of the points in the end, its start and its middle.
  while (2 * queue.size < budget) {
    const widest = queue.pop()
    const half = (widest.from + widest.to) / 2
    add(widest.piece, widest.from, half, widest.low, widest.middle)
    add(widest.piece, half, widest.to, widest.middle, widest.high)
  }
  const points: Point[] = []
  for (const { piece, from, to, low, middle, high } of queue.inOrder()) {
    const { start } = piece.segment
    points.push({ time: start + from, value: low }, { time: start + (from + to) / 2, value: middle })
    points.push({ time: start + to, value: high })
  }
  return points
}

/** How far the chord is from the curve at its middle, as a share of the figure's height on either axis. */
function strayOf(low: number, middle: number, high: number, top: number): number {
  const linear = Math.abs(middle - (low + high) / 2) / top
  if (!(low > 0 && middle > 0 && high > 0)) return Math.max(linear, 1e-3 * (middle / top))
  // Four decades are a usual height of a log axis; what lies deeper is not drawn.
  const deep = Math.max(low, high) < 1e-5 * top
  return deep ? linear : Math.max(linear, Math.abs(Math.log(middle / Math.sqrt(low * high))) / Math.log(1e4))
}

/** Lowest and highest ends of pieces in each of `budget / 2` equal stretches of time. */
function envelope(pieces: readonly Piece[], signal: Signal, budget: number): Point[] {
  const last = pieces[pieces.length - 1]!.segment
  const width = (last.start + last.duration) / Math.max(1, budget / 2)
  const points: Point[] = []
  let bucket = -1
  let low: Point | undefined
  let high: Point | undefined
  const flush = () => {
    if (low !== undefined && high !== undefined) points.push(...(low.time <= high.time ? [low, high] : [high, low]))
  }
  for (const piece of pieces) {
    const { start, duration } = piece.segment
    for (const offset of [0, duration]) {
      const point = { time: start + offset, value: piece.concentration(signal, offset) }
      const into = Math.floor(point.time / width)
      if (into !== bucket) {
        flush()
        bucket = into
        low = point
        high = point
      }
      if (low === undefined || point.value < low.value) low = point
      if (high === undefined || point.value > high.value) high = point
    }
  }
  flush()
  return points
}

function same(a: Point, b: Point): boolean {
  return (
    Math.abs(a.time - b.time) <= 1e-12 * Math.abs(b.time) && Math.abs(a.value - b.value) <= 1e-9 * Math.abs(b.value)
  )
}

/** The stretch that strays furthest first. */
class Heap {
  readonly #items: Stretch[] = []

  get size(): number {
    return this.#items.length
  }

  push(item: Stretch): void {
    const items = this.#items
    let at = items.push(item) - 1
    while (at > 0) {
      const parent = (at - 1) >> 1
      if (items[parent]!.stray >= item.stray) break
      items[at] = items[parent]!
      at = parent
    }
    items[at] = item
  }

  pop(): Stretch {
    const items = this.#items
    const [first] = items
    const item = items.pop()
    if (first === undefined || item === undefined) throw new RangeError('nothing is left to refine')
    if (items.length === 0) return first
    let at = 0
    for (;;) {
      let child = 2 * at + 1
      if (child >= items.length) break
      if (child + 1 < items.length && items[child + 1]!.stray > items[child]!.stray) child++
      if (items[child]!.stray <= item.stray) break
      items[at] = items[child]!
      at = child
    }
    items[at] = item
    return first
  }

  /** All stretches, ascending in time. */
  inOrder(): Stretch[] {
    return [...this.#items].sort(
      (a, b) => a.piece.segment.start + a.from - (b.piece.segment.start + b.from) || a.from - b.from
    )
  }
}
