import type { Kernel } from './kernel'

/** Products with 3 x 3 matrices, written out. */
export const KERNEL_3: Kernel = { rows: rows3, columns: columns3, march: march3, balance: balance3 }

function rows3(a: Float64Array, count: number, b: Float64Array, out: Float64Array): void {
  const b00 = b[0],
    b01 = b[1],
    b02 = b[2]
  const b10 = b[3],
    b11 = b[4],
    b12 = b[5]
  const b20 = b[6],
    b21 = b[7],
    b22 = b[8]
  for (let p = 0; p < 3 * count; p += 3) {
    const a0 = a[p],
      a1 = a[p + 1],
      a2 = a[p + 2]
    out[p] = a0 * b00 + a1 * b10 + a2 * b20
    out[p + 1] = a0 * b01 + a1 * b11 + a2 * b21
    out[p + 2] = a0 * b02 + a1 * b12 + a2 * b22
  }
}

function columns3(a: Float64Array, count: number, c: Float64Array, columns: number, out: Float64Array): void {
  let q = 0
  for (let column = 0; column < columns; column++) {
    const x0 = c[3 * column]
    const x1 = c[3 * column + 1]
    const x2 = c[3 * column + 2]
    for (let p = 0; p < 3 * count; p += 3) {
      out[q++] = a[p] * x0 + a[p + 1] * x1 + a[p + 2] * x2
    }
  }
}

function march3(b: Float64Array, states: Float64Array, count: number): void {
  const b00 = b[0],
    b01 = b[1],
    b02 = b[2]
  const b10 = b[3],
    b11 = b[4],
    b12 = b[5]
  const b20 = b[6],
    b21 = b[7],
    b22 = b[8]
  let x0 = states[0]
  let x1 = states[1]
  let x2 = states[2]
  for (let p = 3; p <= 3 * count; p += 3) {
    const y0 = b00 * x0 + b01 * x1 + b02 * x2
    const y1 = b10 * x0 + b11 * x1 + b12 * x2
    const y2 = b20 * x0 + b21 * x1 + b22 * x2
    states[p] = y0
    states[p + 1] = y1
    states[p + 2] = y2
    x0 = y0
    x1 = y1
    x2 = y2
  }
}

function balance3(a: Float64Array, count: number): void {
  let s0 = 0
  let s1 = 0
  let s2 = 0
  for (let p = 0; p < 3 * count; p += 3) {
    s0 += a[p]
    s1 += a[p + 1]
    s2 += a[p + 2]
  }
  const f0 = 1 / s0
  const f1 = 1 / s1
  const f2 = 1 / s2
  for (let p = 0; p < 3 * count; p += 3) {
    a[p] *= f0
    a[p + 1] *= f1
    a[p + 2] *= f2
  }
}
