import type { Rates } from '../../src/numerics/rates'

/** Depot 0, central 1 (20 L), the others peripheral; `scale` [absorption, elimination, there, back] varies it. As in peers/expm.c. */
export function mammillary(n: number, scale: readonly number[]): Rates {
  const between = new Float64Array(n * n)
  const out = new Float64Array(n)
  fillMammillary(n, scale, between, out)
  return { size: n, between, out }
}

/** The same into arrays that are there. */
export function fillMammillary(n: number, scale: readonly number[], between: Float64Array, out: Float64Array): void {
  between[n] = 0.9 * scale[0]
  out[1] = 0.1 * scale[1]
  for (let i = 2; i < n; i++) {
    between[i * n + 1] = (0.5 / (i - 1)) * scale[2]
    between[n + i] = (0.2 / (i - 1)) * scale[3]
  }
}

/** A seeded stream of numbers in [0, 1), the same in the peers. */
export function uniformFrom(seed: number): () => number {
  // Kept as a signed whole number: an unsigned one above 2^31 would be allocated.
  let state = seed
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) | 0
    return (state >>> 0) / 4294967296
  }
}
