/** Degree of the truncated series and number of doublings of one operator. */
export interface TaylorPlan {
  degree: number
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
/** 2^-m. */
const SHRINKS = [1 / 16, 1 / 64, 1 / 512, 1 / 4096, 1 / 65536] as const

const TWO_TO_64 = 4294967296 * 4294967296

/** The power that the polynomial of this degree proceeds by. */
export function strideOf(degree: number): number {
  for (let d = 0; d < DEGREES.length; d++) if (DEGREES[d] === degree) return STRIDES[d]
  throw new RangeError(`no series of degree ${degree}`)
}

/** How many matrix products the polynomial of this degree takes: its low powers, then Horner's rule in N^stride. */
export function productsIn(degree: number): number {
  const stride = strideOf(degree)
  return stride - 1 + degree / stride - 1
}

/**
 * Choose the cheapest degree m and number of doublings s for which no entry is truncated by more than 1e-17 of itself
 * (METHODS 1.4): prod_{i=0..m} (scale + max(0, n - 1 - i)) / ((m + 1)! 2^(s m)) <= 1e-17, where `scale` is sigma t and n
 * counts compartments, one input column and one functional row. `vectors` is how many rows and columns are carried
 * beside the matrix. Multiplications alone, so that the choice has the same bits everywhere; the product may be as large
 * as 1e280^17 and is kept as product x 2^(64 lifts).
 */
export function planInto(scale: number, compartments: number, vectors: number, plan: TaylorPlan): void {
  plan.degree = DEGREES[0]
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
    const squarings = doublingsFor(product * WEIGHTS[d], 64 * lifts, degree, SHRINKS[d])
    const products = STRIDES[d] - 1 + degree / STRIDES[d] - 1
    const cost = compartments * (products + squarings) + vectors * (degree + squarings)
    if (cost < cheapest) {
      cheapest = cost
      plan.degree = degree
      plan.squarings = squarings
    }
  }
}

/** Smallest s with excess x 2^bits <= 2^(s degree), `shrink` being 2^-degree. */
function doublingsFor(excess: number, bits: number, degree: number, shrink: number): number {
  let doublings = 0
  let left = excess
  let bitsLeft = bits
  for (; bitsLeft >= degree; bitsLeft -= degree) doublings++
  for (; bitsLeft > 0; bitsLeft--) left *= 2
  for (; left > 1; left *= shrink) doublings++
  return doublings
}
