import { expect, test } from 'vitest'
import { type DoubleDouble, exactly, minus, over, plus, times } from '../../src/numerics/doubleDouble'

/** Exact value as a ratio of whole numbers: every double is one over a power of two. */
type Ratio = { readonly above: bigint; readonly below: bigint }

function ratioOf(value: number): Ratio {
  let below = 1n
  let scaled = value
  while (!Number.isInteger(scaled)) {
    scaled *= 2
    below *= 2n
  }
  return { above: BigInt(scaled), below }
}

function sum(a: Ratio, b: Ratio): Ratio {
  return { above: a.above * b.below + b.above * a.below, below: a.below * b.below }
}

function exact({ hi, lo }: DoubleDouble): Ratio {
  return sum(ratioOf(hi), ratioOf(lo))
}

/** |got - expected| <= |expected| / 2^bits, in whole numbers. */
function agrees(got: DoubleDouble, expected: Ratio, bits: bigint): boolean {
  const difference = sum(exact(got), { above: -expected.above, below: expected.below })
  const size = (x: bigint) => (x < 0n ? -x : x)
  return (size(difference.above) * expected.below) << bits <= size(expected.above) * difference.below
}

/** Pairs of numbers of 32 digits, with cancellation among them. */
const PAIRS: readonly [DoubleDouble, DoubleDouble][] = [
  [over(exactly(1), exactly(3)), over(exactly(22), exactly(7))],
  [
    { hi: 1, lo: 1e-17 },
    { hi: -1, lo: 3e-33 }
  ],
  [times(exactly(0.1), exactly(0.1)), { hi: 123456.789, lo: 1e-12 }],
  [
    { hi: 1e10, lo: 1e-7 },
    { hi: -3e-9, lo: 1e-26 }
  ],
  [plus(exactly(0.1), exactly(1e-17)), minus(exactly(0.2), exactly(3e-18))]
]

test('sums, differences, products and quotients have 31 digits, in exact whole-number arithmetic', () => {
  for (const [a, b] of PAIRS) {
    const [x, y] = [exact(a), exact(b)]
    expect(agrees(plus(a, b), sum(x, y), 103n)).toBe(true)
    expect(agrees(minus(a, b), sum(x, { above: -y.above, below: y.below }), 103n)).toBe(true)
    expect(agrees(times(a, b), { above: x.above * y.above, below: x.below * y.below }, 102n)).toBe(true)
    const quotient = { above: x.above * y.below, below: x.below * y.above }
    const positive = quotient.below < 0n ? { above: -quotient.above, below: -quotient.below } : quotient
    expect(agrees(over(a, b), positive, 101n)).toBe(true)
  }
})

test('the comparison can fail: a plain double is not good to 31 digits', () => {
  const [a, b] = PAIRS[0]
  expect(agrees(exactly(a.hi + b.hi), sum(exact(a), exact(b)), 103n)).toBe(false)
})
