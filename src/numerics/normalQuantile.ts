import { ln } from './elementary'

/** Coefficients of the rational approximations, lowest power first [Wichura 1988, AS 241, routine PPND16]. */
const CENTRAL_ABOVE = [
  3.387132872796366608, 133.14166789178437745, 1971.5909503065514427, 13731.693765509461125, 45921.953931549871457,
  67265.770927008700853, 33430.575583588128105, 2509.0809287301226727
]
const CENTRAL_BELOW = [
  1, 42.313330701600911252, 687.1870074920579083, 5394.1960214247511077, 21213.794301586595867, 39307.89580009271061,
  28729.085735721942674, 5226.495278852854561
]
const MIDDLE_ABOVE = [
  1.42343711074968357734, 4.6303378461565452959, 5.7694972214606914055, 3.64784832476320460504, 1.27045825245236838258,
  0.24178072517745061177, 0.0227238449892691845833, 7.7454501427834140764e-4
]
const MIDDLE_BELOW = [
  1, 2.05319162663775882187, 1.6763848301838038494, 0.68976733498510000455, 0.14810397642748007459,
  0.0151986665636164571966, 5.475938084995344946e-4, 1.05075007164441684324e-9
]
const FAR_ABOVE = [
  6.6579046435011037772, 5.4637849111641143699, 1.7848265399172913358, 0.29656057182850489123, 0.026532189526576123093,
  0.0012426609473880784386, 2.71155556874348757815e-5, 2.01033439929228813265e-7
]
const FAR_BELOW = [
  1, 0.59983220655588793769, 0.13692988092273580531, 0.0148753612908506148525, 7.868691311456132591e-4,
  1.8463183175100546818e-5, 1.4215117583164458887e-7, 2.04426310338993978564e-15
]

/**
 * Quantile of the standard normal distribution at probability p in (0, 1), within about 1e-15 relative [Wichura 1988,
 * Appl. Stat. 37:477, AS 241; volume and page from memory]. p = 0 and p = 1 give minus and plus infinity.
 * Throws `RangeError` outside [0, 1].
 */
export function normalQuantile(p: number): number {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`a probability lies between 0 and 1, got ${p}`)
  const q = p - 0.5
  if (Math.abs(q) <= 0.425) {
    const r = 0.180625 - q * q
    return (q * polynomial(CENTRAL_ABOVE, r)) / polynomial(CENTRAL_BELOW, r)
  }
  const tail = q < 0 ? p : 1 - p
  if (tail === 0) return q < 0 ? Number.NEGATIVE_INFINITY : Number.POSITIVE_INFINITY
  const r = Math.sqrt(-ln(tail))
  const size =
    r <= 5
      ? polynomial(MIDDLE_ABOVE, r - 1.6) / polynomial(MIDDLE_BELOW, r - 1.6)
      : polynomial(FAR_ABOVE, r - 5) / polynomial(FAR_BELOW, r - 5)
  return q < 0 ? -size : size
}

/** Value of a polynomial, lowest coefficient first, by Horner's rule. */
function polynomial(coefficients: readonly number[], x: number): number {
  return coefficients.reduceRight((sum, coefficient) => sum * x + coefficient, 0)
}
