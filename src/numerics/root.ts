import { NumericalFailure } from './numericalFailure'

/** Each evaluation at least halves the bracket in the long run; no double needs more halvings than it has exponents and digits. */
const MOST_EVALUATIONS = 2200
const EPSILON = 2.220446049250313e-16

/**
 * Where a continuous function changes sign between `low` and `high`, to full double precision: the bracket is closed
 * until its ends are neighbours to within two rounding units, and the end with the smaller value is returned.
 *
 * Inverse quadratic interpolation where its three points are safe to interpolate between, else a halving
 * [Chandrupatla 1997, Adv. Eng. Softw. 28:145, volume and page from memory].
 * Throws `NumericalFailure`: 'no-sign-change' where both ends have the same sign, 'not-a-number' where the function
 * yields NaN. A value of exactly 0 at an end makes that end the answer.
 */
export function rootBetween(f: (x: number) => number, low: number, high: number): number {
  // a is the newest point, b the end of the bracket on the other side, c the point before.
  let a = high
  let fa = valueAt(f, a)
  if (fa === 0) return a
  let b = low
  let fb = valueAt(f, b)
  if (fb === 0) return b
  if (fa > 0 === fb > 0) {
    throw new NumericalFailure('no-sign-change', `no change of sign between ${low} (${fb}) and ${high} (${fa})`)
  }
  let fraction = 0.5
  for (let count = 0; count < MOST_EVALUATIONS; count++) {
    const x = a + fraction * (b - a)
    const fx = valueAt(f, x)
    let c = a
    let fc = fa
    if (fx > 0 !== fa > 0) {
      c = b
      fc = fb
      b = a
      fb = fa
    }
    a = x
    fa = fx
    const [best, fBest] = Math.abs(fa) < Math.abs(fb) ? [a, fa] : [b, fb]
    const smallest = (EPSILON * Math.abs(best)) / Math.abs(b - a)
    if (fBest === 0 || smallest >= 0.5 || between(a, b) === undefined) return best
    fraction = Math.min(1 - smallest, Math.max(smallest, interpolated(a, fa, b, fb, c, fc)))
  }
  throw new NumericalFailure('no-convergence', `no root found between ${low} and ${high}`)
}

/** Fraction of the way from a to b by inverse quadratic interpolation, or a half where that is not to be trusted. */
function interpolated(a: number, fa: number, b: number, fb: number, c: number, fc: number): number {
  const xi = (a - b) / (c - b)
  const phi = (fa - fb) / (fc - fb)
  const safe = phi * phi < xi && (1 - phi) * (1 - phi) < 1 - xi
  if (!safe) return 0.5
  return (fa / (fb - fa)) * (fc / (fb - fc)) + ((c - a) / (b - a)) * (fa / (fc - fa)) * (fb / (fc - fb))
}

/** The number half-way between two, where there is one. */
function between(a: number, b: number): number | undefined {
  const middle = a + 0.5 * (b - a)
  return middle === a || middle === b ? undefined : middle
}

function valueAt(f: (x: number) => number, x: number): number {
  const value = f(x)
  if (Number.isNaN(value))
    throw new NumericalFailure('not-a-number', `the function to be solved is not a number at ${x}`)
  return value
}
