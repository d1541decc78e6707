/** Degree of the truncated series and number of doublings of one operator. */
export interface TaylorPlan {
  degree: number
  /** The power of the matrix that the polynomial of this degree proceeds by. */
  stride: number
  squarings: number
}

/**
 * Degrees whose polynomial in a matrix takes the fewest products [Paterson & Stockmeyer 1973], in rising order, with the
 * power that they proceed by: a polynomial in N^stride with polynomials of lower degree as coefficients.
 */
const DEGREES = [4, 6, 9, 12, 16] as const
const STRIDES = [2, 3, 3, 4, 4] as const
/** 1 / ((m + 1)! tolerance), tolerance 1e-17: a twentieth of the rounding unit. */
const WEIGHTS = [1e17 / 120, 1e17 / 5040, 1e17 / 3628800, 1e17 / 6227020800, 1e17 / 355687428096000] as const

/** What a step of Horner's rule and a doubling take, in units of one more low power: as timed with 3 to 12 compartments. */
const HORNER_STEP = 2.5
const DOUBLING = 1.7

const TWO_TO_64 = 4294967296 * 4294967296

/** A number and its two halves, the lower one first, as every engine's machine stores them. */
const NUMBER = new Float64Array(1)
const WORDS = new Int32Array(NUMBER.buffer)

/**
 * Choose the cheapest degree m and number of doublings s for which no entry is truncated by more than 1e-17 of itself
 * (METHODS 1.4): prod_{i=0..m} (scale + max(0, n - 1 - i)) / ((m + 1)! 2^(s m)) <= 1e-17, where `scale` is sigma t and n
 * counts compartments, one input column and one functional row. Multiplications alone, so
 * that the choice has the same bits everywhere; the product may be as large as 1e280^17 and is kept as product x
 * 2^(64 lifts).
 */
export function planInto(scale: number, compartments: number, plan: TaylorPlan): void {
  plan.degree = DEGREES[0]
  plan.stride = STRIDES[0]
  plan.squarings = 0
  if (scale === 0) return
  let product = 1
  let lifts = 0
  let factors = 0
  let cheapest = Number.POSITIVE_INFINITY
  for (let d = 0; d < DEGREES.length; d++) {
    const degree = DEGREES[d]
    for (; factors <= degree; factors++) {
      product *= scale + Math.max(0, compartments + 1 - factors)
      while (product > TWO_TO_64) {
        product /= TWO_TO_64
        lifts++
      }
    }
    const squarings = doublingsFor(product * WEIGHTS[d], 64 * lifts, degree)
    const cost = STRIDES[d] - 1 + HORNER_STEP * (degree / STRIDES[d] - 1) + DOUBLING * squarings
    if (cost < cheapest) {
      cheapest = cost
      plan.degree = degree
      plan.stride = STRIDES[d]
      plan.squarings = squarings
    }
  }
}

/** Smallest s with excess x 2^bits <= 2^(s degree): the binary logarithm, rounded up, is in the number's own exponent. */
function doublingsFor(excess: number, bits: number, degree: number): number {
  NUMBER[0] = excess
  const low = WORDS[0]
  const high = WORDS[1]
  const logarithm = (high >> 20) - 1023 + ((high & 0xfffff) === 0 && low === 0 ? 0 : 1)
  return Math.max(0, Math.ceil((logarithm + bits) / degree))
}
