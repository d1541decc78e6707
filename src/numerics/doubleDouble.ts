/**
 * Numbers of twice the working precision, as an unevaluated sum hi + lo with |lo| at most half a unit in the last place
 * of hi: about 32 digits [Dekker 1971, Numer. Math. 18:224; Knuth, The Art of Computer Programming 2, 4.2.2; volume and
 * page from memory]. For set-up work, where eigenvalues of stiff models must keep their relative accuracy: every
 * operation makes a new object, and none belongs in a loop over patients or times.
 */
export interface DoubleDouble {
  readonly hi: number
  readonly lo: number
}

export const ZERO: DoubleDouble = { hi: 0, lo: 0 }

/** A double, exactly. */
export function exactly(value: number): DoubleDouble {
  return { hi: value, lo: 0 }
}

/** a + b with its rounding error, for any two doubles. */
function twoSum(a: number, b: number): DoubleDouble {
  const hi = a + b
  const bPart = hi - a
  return { hi, lo: a - (hi - bPart) + (b - bPart) }
}

/** a + b with its rounding error, for |a| >= |b|. */
function quickTwoSum(a: number, b: number): DoubleDouble {
  const hi = a + b
  return { hi, lo: b - (hi - a) }
}

/** 2^27 + 1 parts a double into two halves whose products are exact. */
const SPLITTER = 134217729

/** a b with its rounding error. */
function twoProduct(a: number, b: number): DoubleDouble {
  const hi = a * b
  const aScaled = SPLITTER * a
  const aHigh = aScaled - (aScaled - a)
  const aLow = a - aHigh
  const bScaled = SPLITTER * b
  const bHigh = bScaled - (bScaled - b)
  const bLow = b - bHigh
  return { hi, lo: aHigh * bHigh - hi + aHigh * bLow + aLow * bHigh + aLow * bLow }
}

export function plus(a: DoubleDouble, b: DoubleDouble): DoubleDouble {
  const high = twoSum(a.hi, b.hi)
  const low = twoSum(a.lo, b.lo)
  const middle = quickTwoSum(high.hi, high.lo + low.hi)
  return quickTwoSum(middle.hi, middle.lo + low.lo)
}

export function negated(a: DoubleDouble): DoubleDouble {
  return { hi: -a.hi, lo: -a.lo }
}

export function minus(a: DoubleDouble, b: DoubleDouble): DoubleDouble {
  return plus(a, negated(b))
}

export function times(a: DoubleDouble, b: DoubleDouble): DoubleDouble {
  const high = twoProduct(a.hi, b.hi)
  return quickTwoSum(high.hi, high.lo + (a.hi * b.lo + a.lo * b.hi))
}

/** a / b by two corrections of the quotient of the leading parts. */
export function over(a: DoubleDouble, b: DoubleDouble): DoubleDouble {
  const first = a.hi / b.hi
  const rest = minus(a, times(exactly(first), b))
  const second = rest.hi / b.hi
  const last = minus(rest, times(exactly(second), b)).hi / b.hi
  const sum = quickTwoSum(first, second)
  return plus(sum, exactly(last))
}

/** The nearest double. */
export function rounded(a: DoubleDouble): number {
  return a.hi + a.lo
}
