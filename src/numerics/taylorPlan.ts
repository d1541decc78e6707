import { ln } from './elementary'

/** Degree of the truncated series and number of doublings of one operator. */
export interface TaylorPlan {
  degree: number
  squarings: number
}

/**
 * Degrees whose polynomial in a matrix takes the fewest products [Paterson & Stockmeyer 1973], in rising order, with the
 * power that they proceed by (a polynomial in N^stride with polynomials of lower degree as coefficients) and ln (m + 1)!.
 */
const DEGREES = [
  { degree: 4, stride: 2, lnFactorial: 4.787491742782046 },
  { degree: 6, stride: 3, lnFactorial: 8.525161361065415 },
  { degree: 9, stride: 3, lnFactorial: 15.104412573075516 },
  { degree: 12, stride: 4, lnFactorial: 22.552163853123425 },
  { degree: 16, stride: 4, lnFactorial: 33.505073450136891 }
] as const

/** ln of the largest relative truncation error of an entry: 1e-17, a twentieth of the rounding unit. */
const LN_TRUNCATION = -39.143946581

/** The power that the polynomial of this degree proceeds by. */
export function strideOf(degree: number): number {
  for (const each of DEGREES) if (each.degree === degree) return each.stride
  throw new RangeError(`no series of degree ${degree}`)
}

/**
 * Choose the cheapest degree m and number of doublings s for which no entry is truncated by more than 1e-17 of itself
 * (METHODS 1.4): prod_{i=0..m} (sigma t + max(0, n - 1 - i)) / ((m + 1)! 2^(s m)) <= 1e-17, where n counts compartments,
 * one input column and one functional row. `vectors` is how many rows and columns are carried beside the matrix.
 */
export function planInto(scale: number, compartments: number, vectors: number, plan: TaylorPlan): void {
  plan.degree = DEGREES[0].degree
  plan.squarings = 0
  if (scale === 0) return
  const n = compartments + 2
  const lnScale = ln(scale)
  let lnProduct = 0
  let factors = 0
  let cheapest = Number.POSITIVE_INFINITY
  for (const { degree, stride, lnFactorial } of DEGREES) {
    for (; factors <= degree; factors++) lnProduct += factors < n - 1 ? ln(scale + (n - 1 - factors)) : lnScale
    const excess = lnProduct - lnFactorial - LN_TRUNCATION
    const squarings = Math.max(0, Math.ceil(excess / (degree * Math.LN2)))
    const products = stride - 1 + degree / stride - 1
    const cost = compartments * (products + squarings) + vectors * (degree + squarings)
    if (cost < cheapest) {
      cheapest = cost
      plan.degree = degree
      plan.squarings = squarings
    }
  }
}
