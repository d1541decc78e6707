import { expect } from 'vitest'

/** Fail unless `actual` is within a relative or absolute distance of `expected`; the message shows all four numbers. */
export function expectWithin(
  actual: number,
  expected: number,
  tolerance: { readonly relative: number } | { readonly absolute: number },
  what = 'value'
): void {
  const difference = Math.abs(actual - expected)
  const allowed = 'relative' in tolerance ? tolerance.relative * Math.abs(expected) : tolerance.absolute
  // Not `difference > allowed`: a NaN must fail.
  if (!(difference <= allowed)) {
    expect.fail(`${what}: got ${actual}, expected ${expected}, difference ${difference}, allowed ${allowed}`)
  }
}
