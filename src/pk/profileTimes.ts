import type { Hours } from '../units/canonical'
import { multipleOf, type Spacing } from '../units/spacing'
import type { Course } from './course'
import type { Issue } from './issue'
import { isBefore, sameTime } from './times'

/** When concentrations are tabulated: multiples of `every` from 0 to the end, and `also` these. */
export interface SamplingTimes {
  readonly every: Spacing
  readonly also: readonly Hours[]
}

export type RowKind = 'sample' | 'before dose' | 'after dose' | 'end of infusion'

export interface RowTime {
  readonly time: Hours
  readonly row: Exclude<RowKind, 'after dose'>
}

/** A table of more sampling times than this is refused before it is computed. */
const MOST_ROWS = 5_000_000

/** What is wrong with a sampling grid that would make too long a table. */
export function tooManyRows(sampling: SamplingTimes, until: Hours): Issue | undefined {
  const rows = Math.floor(until / multipleOf(sampling.every, 1)) + 1 + sampling.also.length
  if (rows <= MOST_ROWS) return undefined
  return { path: 'sampling.every', message: `gives ${rows} sampling times; at most ${MOST_ROWS} can be tabulated` }
}

/**
 * The times of a regimen's table, ascending: 0, the end, the grid and `also` as samples; every dose given, at its actual
 * time without lag; the end of every infusion or release, lag included. Times within 1e-12 relative are one row, named
 * and timed by the dose before the end of infusion before the sample; a time that was typed goes before the grid's.
 */
export function* rowTimes(course: Course, sampling: SamplingTimes): Generator<RowTime> {
  const streams = [doseTimes(course), infusionEnds(course), typedTimes(course, sampling)]
  const heads = streams.map(() => 0)
  let k = 0
  for (;;) {
    const grid = multipleOf(sampling.every, k)
    const onGrid = !isBefore(course.end, grid)
    let next = onGrid ? grid : Number.POSITIVE_INFINITY
    for (let s = 0; s < streams.length; s++) next = Math.min(next, streams[s][heads[s]] ?? Number.POSITIVE_INFINITY)
    if (next === Number.POSITIVE_INFINITY) return
    let found: RowTime = { time: grid, row: 'sample' }
    if (onGrid && sameTime(grid, next)) k += 1
    for (let s = streams.length - 1; s >= 0; s--) {
      while (heads[s] < streams[s].length && sameTime(streams[s][heads[s]], next)) {
        found = { time: streams[s][heads[s]], row: ROW_OF_STREAM[s] }
        heads[s] += 1
      }
    }
    yield found
  }
}

const ROW_OF_STREAM = ['before dose', 'end of infusion', 'sample'] as const

function doseTimes(course: Course): Hours[] {
  return course.administrations.filter(({ missed }) => !missed).map(({ at }) => at)
}

function infusionEnds(course: Course): Hours[] {
  const ends: Hours[] = []
  for (const dose of [...course.carried, ...course.administrations.flatMap(({ doses }) => doses)]) {
    if (dose.kind !== 'infusion') continue
    const end = dose.start + dose.duration
    if (!isBefore(course.end, end)) ends.push(end)
  }
  return ends.sort((a, b) => a - b)
}

function typedTimes(course: Course, sampling: SamplingTimes): Hours[] {
  const within = sampling.also.filter((time) => time >= 0 && !isBefore(course.end, time))
  return [0, ...within, course.end].sort((a, b) => a - b)
}
