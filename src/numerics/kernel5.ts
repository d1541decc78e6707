import type { Kernel } from './kernel'

/** Products with 5 x 5 matrices, written out. */
export const KERNEL_5: Kernel = { rows: rows5, columns: columns5, march: march5, balance: balance5 }

function rows5(a: Float64Array, count: number, b: Float64Array, out: Float64Array): void {
  const b00 = b[0],
    b01 = b[1],
    b02 = b[2],
    b03 = b[3],
    b04 = b[4]
  const b10 = b[5],
    b11 = b[6],
    b12 = b[7],
    b13 = b[8],
    b14 = b[9]
  const b20 = b[10],
    b21 = b[11],
    b22 = b[12],
    b23 = b[13],
    b24 = b[14]
  const b30 = b[15],
    b31 = b[16],
    b32 = b[17],
    b33 = b[18],
    b34 = b[19]
  const b40 = b[20],
    b41 = b[21],
    b42 = b[22],
    b43 = b[23],
    b44 = b[24]
  for (let p = 0; p < 5 * count; p += 5) {
    const a0 = a[p],
      a1 = a[p + 1],
      a2 = a[p + 2],
      a3 = a[p + 3],
      a4 = a[p + 4]
    out[p] = a0 * b00 + a1 * b10 + a2 * b20 + a3 * b30 + a4 * b40
    out[p + 1] = a0 * b01 + a1 * b11 + a2 * b21 + a3 * b31 + a4 * b41
    out[p + 2] = a0 * b02 + a1 * b12 + a2 * b22 + a3 * b32 + a4 * b42
    out[p + 3] = a0 * b03 + a1 * b13 + a2 * b23 + a3 * b33 + a4 * b43
    out[p + 4] = a0 * b04 + a1 * b14 + a2 * b24 + a3 * b34 + a4 * b44
  }
}

function columns5(a: Float64Array, count: number, c: Float64Array, columns: number, out: Float64Array): void {
  let q = 0
  for (let column = 0; column < columns; column++) {
    const x0 = c[5 * column]
    const x1 = c[5 * column + 1]
    const x2 = c[5 * column + 2]
    const x3 = c[5 * column + 3]
    const x4 = c[5 * column + 4]
    for (let p = 0; p < 5 * count; p += 5) {
      out[q++] = a[p] * x0 + a[p + 1] * x1 + a[p + 2] * x2 + a[p + 3] * x3 + a[p + 4] * x4
    }
  }
}

function march5(b: Float64Array, states: Float64Array, count: number): void {
  const b00 = b[0],
    b01 = b[1],
    b02 = b[2],
    b03 = b[3],
    b04 = b[4]
  const b10 = b[5],
    b11 = b[6],
    b12 = b[7],
    b13 = b[8],
    b14 = b[9]
  const b20 = b[10],
    b21 = b[11],
    b22 = b[12],
    b23 = b[13],
    b24 = b[14]
  const b30 = b[15],
    b31 = b[16],
    b32 = b[17],
    b33 = b[18],
    b34 = b[19]
  const b40 = b[20],
    b41 = b[21],
    b42 = b[22],
    b43 = b[23],
    b44 = b[24]
  let x0 = states[0]
  let x1 = states[1]
  let x2 = states[2]
  let x3 = states[3]
  let x4 = states[4]
  for (let p = 5; p <= 5 * count; p += 5) {
    const y0 = b00 * x0 + b01 * x1 + b02 * x2 + b03 * x3 + b04 * x4
    const y1 = b10 * x0 + b11 * x1 + b12 * x2 + b13 * x3 + b14 * x4
    const y2 = b20 * x0 + b21 * x1 + b22 * x2 + b23 * x3 + b24 * x4
    const y3 = b30 * x0 + b31 * x1 + b32 * x2 + b33 * x3 + b34 * x4
    const y4 = b40 * x0 + b41 * x1 + b42 * x2 + b43 * x3 + b44 * x4
    states[p] = y0
    states[p + 1] = y1
    states[p + 2] = y2
    states[p + 3] = y3
    states[p + 4] = y4
    x0 = y0
    x1 = y1
    x2 = y2
    x3 = y3
    x4 = y4
  }
}

function balance5(a: Float64Array, count: number): void {
  let s0 = 0
  let s1 = 0
  let s2 = 0
  let s3 = 0
  let s4 = 0
  for (let p = 0; p < 5 * count; p += 5) {
    s0 += a[p]
    s1 += a[p + 1]
    s2 += a[p + 2]
    s3 += a[p + 3]
    s4 += a[p + 4]
  }
  const f0 = 1 / s0
  const f1 = 1 / s1
  const f2 = 1 / s2
  const f3 = 1 / s3
  const f4 = 1 / s4
  for (let p = 0; p < 5 * count; p += 5) {
    a[p] *= f0
    a[p + 1] *= f1
    a[p + 2] *= f2
    a[p + 3] *= f3
    a[p + 4] *= f4
  }
}
