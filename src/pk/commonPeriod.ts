import type { Hours } from '../units/canonical'
import { multipleOf, type Spacing } from '../units/spacing'

/** A period that holds more doses than this is none. */
const MOST_DOSES_A_PERIOD = 1000
const EIGHT_WEEKS: Hours = 8 * 7 * 24

/** A number of hours as an exact ratio in lowest terms. */
interface Ratio {
  readonly numerator: bigint
  readonly denominator: bigint
}

export type CommonPeriod =
  | { readonly kind: 'period'; readonly hours: Hours }
  | { readonly kind: 'none'; readonly why: string }

/**
 * The shortest time after which everything recurs together: the least common multiple of the spacings as they were typed,
 * in exact arithmetic. With more than one of them: none where it would hold more than 1,000 doses or be longer than both
 * 8 weeks and the longest spacing. `doses` are the spacings of dose lines, `sessions` those of sessions; at least one.
 */
export function commonPeriod(doses: readonly Spacing[], sessions: readonly Spacing[]): CommonPeriod {
  const all = [...doses, ...sessions]
  const [first, ...others] = all
  if (first === undefined) throw new RangeError('nothing repeats, so that there is no period')
  if (others.length === 0) return { kind: 'period', hours: multipleOf(first, 1) }
  const common = all.map(ratioOf).reduce(leastCommonMultiple)
  const hours = numberOf(common)
  const count = doses.reduce((sum, spacing) => sum + numberOf(quotient(common, ratioOf(spacing))), 0)
  if (count > MOST_DOSES_A_PERIOD) {
    return { kind: 'none', why: `no common period: it would hold more than ${MOST_DOSES_A_PERIOD} doses` }
  }
  const longest = Math.max(...all.map((spacing) => multipleOf(spacing, 1)))
  if (hours > Math.max(EIGHT_WEEKS, longest)) {
    return { kind: 'none', why: 'no common period: it would be longer than 8 weeks and than the longest interval' }
  }
  // One spacing is the whole period as often as not; its own conversion is then the hours used everywhere else.
  const whole = all.find((spacing) => isOne(quotient(common, ratioOf(spacing))))
  return { kind: 'period', hours: whole === undefined ? hours : multipleOf(whole, 1) }
}

/** The number that was typed (at most 15 significant digits), times the exact ratio of its unit. */
function ratioOf(spacing: Spacing): Ratio {
  const [mantissa, exponent] = spacing.value.toExponential(14).split('e')
  const digits = BigInt(mantissa.replace('.', ''))
  const power = Number(exponent) - 14
  const scale = BigInt(`1${'0'.repeat(Math.abs(power))}`)
  const times = BigInt(spacing.times)
  const per = BigInt(spacing.per)
  return power < 0
    ? lowestTerms({ numerator: digits * times, denominator: per * scale })
    : lowestTerms({ numerator: digits * times * scale, denominator: per })
}

function leastCommonMultiple(a: Ratio, b: Ratio): Ratio {
  const x = a.numerator * b.denominator
  const y = b.numerator * a.denominator
  return lowestTerms({
    numerator: (x / greatestCommonDivisor(x, y)) * y,
    denominator: a.denominator * b.denominator
  })
}

function quotient(a: Ratio, b: Ratio): Ratio {
  return lowestTerms({ numerator: a.numerator * b.denominator, denominator: a.denominator * b.numerator })
}

function lowestTerms({ numerator, denominator }: Ratio): Ratio {
  const divisor = greatestCommonDivisor(numerator, denominator)
  return { numerator: numerator / divisor, denominator: denominator / divisor }
}

function greatestCommonDivisor(a: bigint, b: bigint): bigint {
  return b === 0n ? a : greatestCommonDivisor(b, a % b)
}

function isOne({ numerator, denominator }: Ratio): boolean {
  return numerator === denominator
}

/** The nearest double or one beside it; infinite beyond the range of doubles. */
function numberOf({ numerator, denominator }: Ratio): number {
  return Number(numerator / denominator) + Number(numerator % denominator) / Number(denominator)
}
