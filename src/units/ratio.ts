/**
 * An exact conversion: canonical = value x times / per, both integers (or one of them a molar mass).
 * A ratio and not a factor, because a factor such as 1/60 is rounded before it is used.
 */
export interface Ratio {
  readonly times: number
  readonly per: number
}

export const ONE: Ratio = { times: 1, per: 1 }

/** Product of two exact ratios, in lowest terms so that the integers stay small. */
export function product(a: Ratio, b: Ratio): Ratio {
  return reduced(a.times * b.times, a.per * b.per)
}

/** Quotient of two exact ratios, in lowest terms. */
export function quotient(a: Ratio, b: Ratio): Ratio {
  return reduced(a.times * b.per, a.per * b.times)
}

/** value x times / per; nothing is rounded but the result (and the product, where both are not 1). */
export function apply(ratio: Ratio, value: number): number {
  return (value * ratio.times) / ratio.per
}

/** value x per / times, the way back. */
export function applyInverse(ratio: Ratio, value: number): number {
  return (value * ratio.per) / ratio.times
}

function reduced(times: number, per: number): Ratio {
  const divisor = greatestCommonDivisor(times, per)
  return { times: times / divisor, per: per / divisor }
}

function greatestCommonDivisor(a: number, b: number): number {
  return b === 0 ? a : greatestCommonDivisor(b, a % b)
}
