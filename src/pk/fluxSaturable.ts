import { pow } from '../numerics/elementary'
import type { Milligrams, MilligramsPerHour, PerHour } from '../units/canonical'

/** Below this part of half saturation, a curve with a Hill exponent under 1, vertical at 0, is replaced by its chord to 0. */
const CHORD_BELOW = 1e-9

/**
 * Rate of a saturable transfer, maximum A^hill / (half^hill + A^hill), as a function of the amount A in its source; `half`
 * is half saturation x volume. At and below zero it goes on as its tangent at zero, so that a step which lands a little
 * below zero meets no pole: (maximum / half) A, or 0 with a Hill exponent above 1.
 */
export function saturableRate(amount: Milligrams, maximum: MilligramsPerHour, half: Milligrams, hill: number): number {
  if (hill === 1) return amount > 0 ? (maximum * amount) / (half + amount) : (maximum / half) * amount
  const edge = CHORD_BELOW * half
  if (hill < 1 && amount < edge) return (saturableRate(edge, maximum, half, hill) / edge) * amount
  if (amount <= 0) return 0
  if (amount <= half) {
    const ratio = pow(amount / half, hill)
    return (maximum * ratio) / (1 + ratio)
  }
  return maximum / (1 + pow(half / amount, hill))
}

/** Derivative of `saturableRate` by the amount [/h]. */
export function saturableSlope(
  amount: Milligrams,
  maximum: MilligramsPerHour,
  half: Milligrams,
  hill: number
): PerHour {
  if (hill === 1) {
    if (amount <= 0) return maximum / half
    const sum = half + amount
    return (maximum / sum) * (half / sum)
  }
  const edge = CHORD_BELOW * half
  if (hill < 1 && amount < edge) return saturableRate(edge, maximum, half, hill) / edge
  if (amount <= 0) return 0
  // Both forms are the same; each keeps its power from overflowing on its side.
  const ratio = amount <= half ? pow(amount / half, hill) : pow(half / amount, hill)
  return ((maximum / (1 + ratio)) * (hill * ratio)) / (amount * (1 + ratio))
}
