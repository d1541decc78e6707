import type { Kernel } from './kernel'

/** Products with 2 x 2 matrices, written out. */
export const KERNEL_2: Kernel = { rows: rows2, columns: columns2, march: march2, balance: balance2 }

function rows2(a: Float64Array, count: number, b: Float64Array, out: Float64Array): void {
  const b00 = b[0],
    b01 = b[1]
  const b10 = b[2],
    b11 = b[3]
  for (let p = 0; p < 2 * count; p += 2) {
    const a0 = a[p],
      a1 = a[p + 1]
    out[p] = a0 * b00 + a1 * b10
    out[p + 1] = a0 * b01 + a1 * b11
  }
}

function columns2(a: Float64Array, count: number, c: Float64Array, columns: number, out: Float64Array): void {
  let q = 0
  for (let column = 0; column < columns; column++) {
    const x0 = c[2 * column]
    const x1 = c[2 * column + 1]
    for (let p = 0; p < 2 * count; p += 2) {
      out[q++] = a[p] * x0 + a[p + 1] * x1
    }
  }
}

function march2(b: Float64Array, states: Float64Array, count: number): void {
  const b00 = b[0],
    b01 = b[1]
  const b10 = b[2],
    b11 = b[3]
  let x0 = states[0]
  let x1 = states[1]
  for (let p = 2; p <= 2 * count; p += 2) {
    const y0 = b00 * x0 + b01 * x1
    const y1 = b10 * x0 + b11 * x1
    states[p] = y0
    states[p + 1] = y1
    x0 = y0
    x1 = y1
  }
}

function balance2(a: Float64Array, count: number): void {
  let s0 = 0
  let s1 = 0
  for (let p = 0; p < 2 * count; p += 2) {
    s0 += a[p]
    s1 += a[p + 1]
  }
  const f0 = 1 / s0
  const f1 = 1 / s1
  for (let p = 0; p < 2 * count; p += 2) {
    a[p] *= f0
    a[p + 1] *= f1
  }
}
