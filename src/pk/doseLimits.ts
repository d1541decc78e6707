import type { Hours, Milligrams } from '../units/canonical'
import type { Course } from './course'
import type { Administration } from './dose'
import { isBefore } from './times'

/** A largest dose, moiety mass unless a product is named. `rate` in mg/h, `daily` and `step` in mg per 24 h. */
export interface Limit {
  readonly of: 'single' | 'daily' | 'rate' | 'total' | 'step'
  readonly value: number
  readonly product?: string
  readonly source: string
}

/** A dose over one of the drug's limits. */
export interface DoseOverLimit {
  /** Position of the limit in the drug's list. */
  readonly limit: number
  readonly of: Limit['of']
  /** Position of the dose line, and the scheduled dose of it, that went over. */
  readonly line: number
  readonly number: number
  readonly at: Hours
  /** What was given: mg, mg per 24 h, mg/h. Undefined for a rate where the dose was given at once. */
  readonly value: number | undefined
  readonly limitValue: number
  readonly product?: string
  readonly source: string
}

/** A limit that is passed by no more than this, relatively, is kept: sums of doses are rounded. */
const ROUNDING = 1e-12
const DAY: Hours = 24

/**
 * Every dose over a limit, in the order of the limits. `single`, `rate` and `total` (all since 0) look at each dose;
 * `daily` at what is delivered in any 24 h, infusions by their course, charged to the last dose in them; `step` at the
 * amounts of successive days (longer stretches where a line is given less often), charged to the first dose of the day
 * that rose, days with a missed dose not compared with. A dose at once on one of `infusionRoutes` is over any rate. A limit
 * that names a product judges doses of that product alone.
 */
export function dosesOverLimits(
  course: Course,
  limits: readonly Limit[],
  infusionRoutes: readonly string[]
): DoseOverLimit[] {
  return limits.flatMap((limit, index) => {
    const judged = judgedDoses(course, limit)
    return overLimit(limit, judged, course, infusionRoutes)
      .filter(({ value }) => value === undefined || value > limit.value * (1 + ROUNDING))
      .map(({ given, value }): DoseOverLimit => {
        const { line, number, at } = given.administration
        const { of, value: limitValue, product, source } = limit
        return {
          limit: index,
          of,
          line,
          number,
          at,
          value,
          limitValue,
          ...(product !== undefined && { product }),
          source
        }
      })
  })
}

/** A dose with its amount as the limit counts it. */
interface Given {
  readonly administration: Administration
  readonly amount: Milligrams
}

interface Candidate {
  readonly given: Given
  readonly value: number | undefined
}

function judgedDoses(course: Course, { product }: Limit): Given[] {
  const { administrations, prescription } = course
  return administrations
    .filter(({ line }) => product === undefined || prescription.lines[line].product === product)
    .map((administration) => ({
      administration,
      amount: product === undefined ? administration.amount : administration.productAmount
    }))
}

function overLimit(
  limit: Limit,
  all: readonly Given[],
  course: Course,
  infusionRoutes: readonly string[]
): Candidate[] {
  const doses = all.filter(({ administration, amount }) => !administration.missed && amount > 0)
  switch (limit.of) {
    case 'single':
      return doses.map((given) => ({ given, value: given.amount }))
    case 'rate':
      return doses.flatMap((given): Candidate[] => {
        const { duration, route } = given.administration
        if (duration > 0) return [{ given, value: given.amount / duration }]
        return infusionRoutes.includes(route) ? [{ given, value: undefined }] : []
      })
    case 'total': {
      let total = 0
      return doses.map((given) => {
        total += given.amount
        return { given, value: total }
      })
    }
    case 'daily':
      return largestDays(doses)
    case 'step':
      return risesOfDays(all, course)
  }
}

/**
 * For each dose, the largest amount delivered in 24 h of which it is the last. The amount in a moving window of 24 h is
 * largest where the window ends with a dose or begins with an infusion. Two doses 24 h apart are not in one window.
 */
function largestDays(doses: readonly Given[]): Candidate[] {
  const largest = new Map<Given, number>()
  const ends = doses.map(({ administration: { at, duration } }) => at + duration)
  const begins = doses.flatMap(({ administration: { at, duration } }) => (duration > 0 ? [at + DAY] : []))
  let first = 0
  for (const end of [...ends, ...begins].sort((a, b) => a - b)) {
    let sum = 0
    let last: Given | undefined
    // Doses that were over before this window were over before every later one.
    while (first < doses.length && isOver(doses[first], end - DAY)) first += 1
    for (let k = first; k < doses.length && doses[k].administration.at <= end; k++) {
      const given = doses[k]
      const amount = deliveredIn(given, end - DAY, end)
      sum += amount
      if (amount > 0) last = given
    }
    if (last !== undefined) largest.set(last, Math.max(sum, largest.get(last) ?? 0))
  }
  return [...largest].map(([given, value]) => ({ given, value })).sort(byTime)
}

function isOver({ administration: { at, duration } }: Given, time: Hours): boolean {
  return at + duration < time
}

function byTime(a: Candidate, b: Candidate): number {
  return a.given.administration.at - b.given.administration.at
}

/** Amount of a dose that is delivered in (from, to]. */
function deliveredIn({ administration: { at, duration }, amount }: Given, from: Hours, to: Hours): Milligrams {
  if (duration === 0) return isBefore(from, at) && !isBefore(to, at) ? amount : 0
  const overlap = Math.min(to, at + duration) - Math.max(from, at)
  return overlap > 0 ? amount * Math.min(1, overlap / duration) : 0
}

/** How much more each stretch from the first dose on holds than the one before, per 24 h. */
function risesOfDays(all: readonly Given[], course: Course): Candidate[] {
  const [first] = all
  if (first === undefined) return []
  const spacings = course.prescription.lines.map(({ every }) =>
    every === undefined ? DAY : (every.value * every.times) / every.per
  )
  const length = Math.max(DAY, ...spacings)
  const days = new Map<number, Given[]>()
  for (const given of all) {
    const since = given.administration.at - first.administration.at
    const day = Math.floor(since / length)
    const n = isBefore(since, (day + 1) * length) ? day : day + 1
    days.set(n, [...(days.get(n) ?? []), given])
  }
  const rises: Candidate[] = []
  let before: number | undefined
  for (const given of days.values()) {
    const daily = (given.reduce((sum, { amount }) => sum + amount, 0) * DAY) / length
    const start = given.find(({ amount }) => amount > 0)
    if (before !== undefined && start !== undefined) rises.push({ given: start, value: daily - before })
    if (given.every(({ administration }) => !administration.missed)) before = daily
  }
  return rises
}
