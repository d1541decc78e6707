import type { Kernel } from './kernel'

/** Products with 4 x 4 matrices, written out. */
export const KERNEL_4: Kernel = { rows: rows4, columns: columns4, march: march4, balance: balance4 }

function rows4(a: Float64Array, count: number, b: Float64Array, out: Float64Array): void {
  const b00 = b[0],
    b01 = b[1],
    b02 = b[2],
    b03 = b[3]
  const b10 = b[4],
    b11 = b[5],
    b12 = b[6],
    b13 = b[7]
  const b20 = b[8],
    b21 = b[9],
    b22 = b[10],
    b23 = b[11]
  const b30 = b[12],
    b31 = b[13],
    b32 = b[14],
    b33 = b[15]
  for (let p = 0; p < 4 * count; p += 4) {
    const a0 = a[p],
      a1 = a[p + 1],
      a2 = a[p + 2],
      a3 = a[p + 3]
    out[p] = a0 * b00 + a1 * b10 + a2 * b20 + a3 * b30
    out[p + 1] = a0 * b01 + a1 * b11 + a2 * b21 + a3 * b31
    out[p + 2] = a0 * b02 + a1 * b12 + a2 * b22 + a3 * b32
    out[p + 3] = a0 * b03 + a1 * b13 + a2 * b23 + a3 * b33
  }
}

function columns4(a: Float64Array, count: number, c: Float64Array, columns: number, out: Float64Array): void {
  let q = 0
  for (let column = 0; column < columns; column++) {
    const x0 = c[4 * column]
    const x1 = c[4 * column + 1]
    const x2 = c[4 * column + 2]
    const x3 = c[4 * column + 3]
    for (let p = 0; p < 4 * count; p += 4) {
      out[q++] = a[p] * x0 + a[p + 1] * x1 + a[p + 2] * x2 + a[p + 3] * x3
    }
  }
}

function march4(b: Float64Array, states: Float64Array, count: number): void {
  const b00 = b[0],
    b01 = b[1],
    b02 = b[2],
    b03 = b[3]
  const b10 = b[4],
    b11 = b[5],
    b12 = b[6],
    b13 = b[7]
  const b20 = b[8],
    b21 = b[9],
    b22 = b[10],
    b23 = b[11]
  const b30 = b[12],
    b31 = b[13],
    b32 = b[14],
    b33 = b[15]
  let x0 = states[0]
  let x1 = states[1]
  let x2 = states[2]
  let x3 = states[3]
  for (let p = 4; p <= 4 * count; p += 4) {
    const y0 = b00 * x0 + b01 * x1 + b02 * x2 + b03 * x3
    const y1 = b10 * x0 + b11 * x1 + b12 * x2 + b13 * x3
    const y2 = b20 * x0 + b21 * x1 + b22 * x2 + b23 * x3
    const y3 = b30 * x0 + b31 * x1 + b32 * x2 + b33 * x3
    states[p] = y0
    states[p + 1] = y1
    states[p + 2] = y2
    states[p + 3] = y3
    x0 = y0
    x1 = y1
    x2 = y2
    x3 = y3
  }
}

function balance4(a: Float64Array, count: number): void {
  let s0 = 0
  let s1 = 0
  let s2 = 0
  let s3 = 0
  for (let p = 0; p < 4 * count; p += 4) {
    s0 += a[p]
    s1 += a[p + 1]
    s2 += a[p + 2]
    s3 += a[p + 3]
  }
  const f0 = 1 / s0
  const f1 = 1 / s1
  const f2 = 1 / s2
  const f3 = 1 / s3
  for (let p = 0; p < 4 * count; p += 4) {
    a[p] *= f0
    a[p + 1] *= f1
    a[p + 2] *= f2
    a[p + 3] *= f3
  }
}
