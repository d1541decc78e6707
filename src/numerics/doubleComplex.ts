import { type DoubleDouble, exactly, minus, over, plus, rounded, times, ZERO } from './doubleDouble'

/** A complex number of twice the working precision. */
export interface Complex {
  readonly re: DoubleDouble
  readonly im: DoubleDouble
}

export function complex(re: DoubleDouble, im: DoubleDouble = ZERO): Complex {
  return { re, im }
}

export function sumOf(a: Complex, b: Complex): Complex {
  return { re: plus(a.re, b.re), im: plus(a.im, b.im) }
}

export function differenceOf(a: Complex, b: Complex): Complex {
  return { re: minus(a.re, b.re), im: minus(a.im, b.im) }
}

export function productOf(a: Complex, b: Complex): Complex {
  return {
    re: minus(times(a.re, b.re), times(a.im, b.im)),
    im: plus(times(a.re, b.im), times(a.im, b.re))
  }
}

export function quotientOf(a: Complex, b: Complex): Complex {
  const size = plus(times(b.re, b.re), times(b.im, b.im))
  const conjugate = { re: b.re, im: minus(ZERO, b.im) }
  const product = productOf(a, conjugate)
  return { re: over(product.re, size), im: over(product.im, size) }
}

/** Larger of the sizes of the two parts, to the nearest double: within a factor of 1.5 of the absolute value. */
export function magnitude(a: Complex): number {
  return Math.max(Math.abs(rounded(a.re)), Math.abs(rounded(a.im)))
}

const COMPLEX_ZERO: Complex = { re: ZERO, im: ZERO }
export const COMPLEX_ONE: Complex = { re: exactly(1), im: ZERO }

/**
 * Columns of A^-1 B by elimination with row exchanges; A is n x n and B n x m, both as rows. Undefined where A is
 * singular to this precision. Both are overwritten.
 */
export function solveInPlace(a: Complex[][], b: Complex[][]): Complex[][] | undefined {
  const n = a.length
  for (let k = 0; k < n; k++) {
    let best = k
    for (let i = k + 1; i < n; i++) if (magnitude(a[i][k]) > magnitude(a[best][k])) best = i
    if (!(magnitude(a[best][k]) > 0)) return undefined
    ;[a[k], a[best]] = [a[best], a[k]]
    ;[b[k], b[best]] = [b[best], b[k]]
    for (let i = k + 1; i < n; i++) {
      if (magnitude(a[i][k]) === 0) continue
      const factor = quotientOf(a[i][k], a[k][k])
      for (let j = k + 1; j < n; j++) a[i][j] = differenceOf(a[i][j], productOf(factor, a[k][j]))
      b[i] = b[i].map((value, c) => differenceOf(value, productOf(factor, b[k][c])))
    }
  }
  for (let k = n - 1; k >= 0; k--) {
    b[k] = b[k].map((value, c) => {
      let sum = value
      for (let j = k + 1; j < n; j++) sum = differenceOf(sum, productOf(a[k][j], b[j][c]))
      return quotientOf(sum, a[k][k])
    })
  }
  return b
}

/** The n x n unit matrix, as rows. */
export function unitMatrix(n: number): Complex[][] {
  return Array.from({ length: n }, (_, i) =>
    Array.from({ length: n }, (_, j) => (i === j ? COMPLEX_ONE : COMPLEX_ZERO))
  )
}
