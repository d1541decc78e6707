import { ln } from '../numerics/elementary'
import type { SteadyAt, SteadyScan } from './steadyScan'

/** Beyond the curve the window's top is looked for at these shares of capacity, or doublings of the dose. */
const NEARER_CAPACITY = [0.975, 0.99, 0.999]
const DOUBLINGS = 10
/** The curve's peaks are known within this. */
const ROUGH = 1e-3
/** A step is found within this, relative to the dose. */
const STEP_TOLERANCE = 1e-7
const MOST_ROUNDS = 60

/** The dose above the present one whose peak is at the top: between two points of the curve, or beyond it. */
export function doseForPeak(scan: SteadyScan, curve: readonly SteadyAt[], top: number): SteadyAt | string {
  const below = curve.filter(({ factor, peak }) => factor > 1 && peak < top * (1 - ROUGH)).at(-1)
  const above = curve.find(({ factor, peak }) => factor > 1 && peak > top * (1 + ROUGH))
  const low = below?.factor ?? 1
  if (above !== undefined) return closedIn(scan, top, low, above.factor)
  for (const factor of beyond(scan, curve)) {
    const point = scan.at(factor)
    if (typeof point !== 'string' && point.peak > top) return closedIn(scan, top, low, factor)
  }
  return 'no dose looked at brings the steady state to the window’s top'
}

/** Factors after the curve's last. */
function beyond(scan: SteadyScan, curve: readonly SteadyAt[]): number[] {
  const capacity = scan.factorAt(1)
  if (capacity !== undefined) return NEARER_CAPACITY.map((share) => share * capacity)
  const factors: number[] = []
  let last = curve.at(-1)?.factor ?? 1
  while (factors.length < DOUBLINGS) {
    last *= 2
    factors.push(last)
  }
  return factors
}

/** False position with halved weights [Dowell & Jarratt 1971, from memory]; the answer is on the lower side, under the top. */
function closedIn(scan: SteadyScan, top: number, from: number, to: number): SteadyAt | string {
  let low = from
  let high = to
  let best = scan.at(low)
  const other = scan.at(high)
  if (typeof best === 'string') return best
  if (typeof other === 'string') return other
  let below = ln(best.peak / top)
  let above = ln(other.peak / top)
  let side = 0
  for (let round = 0; round < MOST_ROUNDS && high - low > STEP_TOLERANCE * high; round++) {
    // A little to the lower side, so that it closes in from below.
    const share = Math.min(1 - 1e-3, Math.max(1e-3, -below / (above - below)))
    const factor = low + share * (high - low)
    const point: SteadyAt | string = scan.at(factor)
    if (typeof point === 'string') return point
    const value = ln(point.peak / top)
    if (value <= 0) {
      low = factor
      best = point
      below = value
      if (side === -1) above *= 0.5
      side = -1
      if (value > -STEP_TOLERANCE) break
    } else {
      high = factor
      above = value
      if (side === 1) below *= 0.5
      side = 1
    }
  }
  return best
}
