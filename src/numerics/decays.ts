import type { ReadonlyVector } from './vector'

/** 1 / ln 2, and ln 2 in two parts of which k times the first is exact for |k| < 2^20. */
const INVERSE_LN_2 = Math.LOG2E
const LN_2_HIGH = 0.6931471803691238
const LN_2_LOW = 1.9082149292705877e-10

/**
 * r (e^r + 1) / (e^r - 1) = 2 + P1 r^2 + P2 r^4 + ... for |r| <= ln 2 / 2, off by less than 2^-59: the minimax
 * coefficients of the exponential in FreeBSD's msun (Sun Microsystems 1993).
 */
const P1 = 0.16666666666666602
const P2 = -0.0027777777777015593
const P3 = 0.00006613756321437934
const P4 = -0.0000016533902205465252
const P5 = 4.1381367970572385e-8

/** Beyond, e^-y is 0. */
const FARTHEST = 746
/** 2^-k at index k; products with it are exact down to the smallest normal number. */
const POWERS = powersOfHalf(1080)

/**
 * out_i = e^(-exponents_i), for exponents that are not negative; within one unit in the last place,
 * or within 5e-324 below the smallest normal number. The same bits in
 * every engine. For inner loops: a function that takes and gives one number may allocate both, a list does not.
 */
export function decaysInto(exponents: ReadonlyVector, out: Float64Array): void {
  for (let i = 0; i < out.length; i++) {
    const y = exponents[i]
    if (!(y < FARTHEST)) {
      // Not `y >= FARTHEST`: what is no number must stay visible.
      out[i] = y >= FARTHEST ? 0 : Number.NaN
      continue
    }
    // y = k ln 2 - r, so that e^-y = 2^-k e^r, with r = high - low.
    const k = Math.floor(y * INVERSE_LN_2 + 0.5)
    const high = k * LN_2_HIGH - y
    const low = -k * LN_2_LOW
    const r = high - low
    const t = r * r
    const c = r - t * (P1 + t * (P2 + t * (P3 + t * (P4 + t * P5))))
    out[i] = (1 - (low - (r * c) / (2 - c) - high)) * POWERS[k]
  }
}

function powersOfHalf(count: number): Float64Array {
  const powers = new Float64Array(count)
  let power = 1
  for (let k = 0; k < count; k++) {
    powers[k] = power
    power *= 0.5
  }
  return powers
}
