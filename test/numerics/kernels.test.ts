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
    kernelFor(n).columns(b, n, a, count, columns)
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

  test(`marching with a ${n} x ${n} matrix is one product after another`, () => {
    const b = whole(n * n, 5)
    const states = new Float64Array(4 * n)
    states.set(whole(n, 3))
    kernelFor(n).march(b, states, 3)
    for (const step of [1, 2, 3]) {
      const expected = new Float64Array(n)
      kernelFor(n).columns(b, n, states.slice((step - 1) * n, step * n), 1, expected)
      expect([...states.slice(step * n, (step + 1) * n)]).toEqual([...expected])
    }
  })

  test(`balancing brings every column of ${n} to the sum 1, and leaves what is below alone`, () => {
    // Powers of 2, so that dividing by a column's sum is exact: 3 rows of 1, 1 and 2.
    const a = Float64Array.from({ length: 4 * n }, (_, p) => (p < 2 * n ? 1 : 2) * 2 ** (p % n))
    kernelFor(n).balance(a, 3)
    for (let j = 0; j < n; j++) {
      expect([a[j], a[n + j], a[2 * n + j], a[3 * n + j]]).toEqual([0.25, 0.25, 0.5, 2 * 2 ** j])
    }
  })
}
