import type { Rates } from '../../src/numerics/rates'

/** Rates of n compartments from arrows [from, to, rate] and ways out [from, rate]. */
export function compartments(
  size: number,
  arrows: readonly (readonly [number, number, number])[],
  out: readonly (readonly [number, number])[]
): Rates {
  const between = new Array<number>(size * size).fill(0)
  for (const [from, to, rate] of arrows) between[to * size + from] = rate
  const leaving = new Array<number>(size).fill(0)
  for (const [from, rate] of out) leaving[from] = rate
  return { size, between, out: leaving }
}
