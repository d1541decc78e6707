import { expect, test } from 'vitest'
import { kernelFor } from '../../src/numerics/kernels'

/** Whole numbers, so that every product and sum is exact and the order of adding does not matter. */
function whole(length: number, step: number): Float64Array {
  return Float64Array.from({ length }, (_, i) => ((i * step + 3) % 19) - 9)
}

for (const n of [1, 2, 3, 4, 5, 6, 9]) {
  test(`products with a ${n} x ${n} matrix are those of the definition`, () => {
    const count = n + 2
    const a = whole(count * n, 7)
    const b = whole(n * n, 5)
    const rows = new Float64Array(count * n)
    const columns = new Float64Array(count * n)
    kernelFor(n).rows(a, count, b, rows)
    kernelFor(n).columns(b, a, count, columns)
    for (let p = 0; p < count; p++) {
      for (let q = 0; q < n; q++) {
        let row = 0
        let column = 0
        for (let k = 0; k < n; k++) {
          row += a[p * n + k] * b[k * n + q]
          column += b[q * n + k] * a[p * n + k]
        }
        expect(rows[p * n + q]).toBe(row)
        expect(columns[p * n + q]).toBe(column)
      }
    }
  })
}
