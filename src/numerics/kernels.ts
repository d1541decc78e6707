import type { Kernel } from './kernel'
import { KERNEL_2 } from './kernel2'
import { KERNEL_3 } from './kernel3'
import { KERNEL_4 } from './kernel4'
import { KERNEL_5 } from './kernel5'

/** The products for n x n matrices. */
export function kernelFor(n: number): Kernel {
  switch (n) {
    case 2:
      return KERNEL_2
    case 3:
      return KERNEL_3
    case 4:
      return KERNEL_4
    case 5:
      return KERNEL_5
    default:
      return {
        rows: (a, count, b, out) => rowsAny(n, a, count, b, out),
        columns: (a, count, c, columns, out) => columnsAny(n, a, count, c, columns, out),
        march: (b, states, count) => marchAny(n, b, states, count),
        balance: (a, count) => balanceAny(n, a, count)
      }
  }
}

/** Four columns of B at a time: one load of A serves four sums. */
function rowsAny(n: number, a: Float64Array, count: number, b: Float64Array, out: Float64Array): void {
  const fours = n - (n % 4)
  for (let p = 0; p < n * count; p += n) {
    for (let j = 0; j < fours; j += 4) {
      let s0 = 0
      let s1 = 0
      let s2 = 0
      let s3 = 0
      for (let k = 0, q = j; k < n; k++, q += n) {
        const factor = a[p + k]
        s0 += factor * b[q]
        s1 += factor * b[q + 1]
        s2 += factor * b[q + 2]
        s3 += factor * b[q + 3]
      }
      out[p + j] = s0
      out[p + j + 1] = s1
      out[p + j + 2] = s2
      out[p + j + 3] = s3
    }
    for (let j = fours; j < n; j++) {
      let sum = 0
      for (let k = 0, q = j; k < n; k++, q += n) sum += a[p + k] * b[q]
      out[p + j] = sum
    }
  }
}

function columnsAny(
  n: number,
  a: Float64Array,
  count: number,
  c: Float64Array,
  columns: number,
  out: Float64Array
): void {
  let q = 0
  for (let column = 0; column < n * columns; column += n) {
    for (let p = 0; p < n * count; p += n) {
      let sum = 0
      for (let k = 0; k < n; k++) sum += a[p + k] * c[column + k]
      out[q++] = sum
    }
  }
}

function marchAny(n: number, b: Float64Array, states: Float64Array, count: number): void {
  for (let p = 0; p < n * count; p += n) {
    for (let i = 0; i < n; i++) {
      let sum = 0
      for (let k = 0; k < n; k++) sum += b[i * n + k] * states[p + k]
      states[p + n + i] = sum
    }
  }
}

function balanceAny(n: number, a: Float64Array, count: number): void {
  for (let j = 0; j < n; j++) {
    let sum = 0
    for (let p = j; p < n * count; p += n) sum += a[p]
    const factor = 1 / sum
    for (let p = j; p < n * count; p += n) a[p] *= factor
  }
}
