import { describe, expect, test } from 'vitest'
import { administrations } from '../../src/pk/administrations'
import { courseOf } from '../../src/pk/course'
import { exposureOf } from '../../src/pk/exposure'
import type { Model } from '../../src/pk/model'
import type { DoseLine, SessionLine } from '../../src/pk/prescription'
import type { Subject } from '../../src/pk/subject'
import type { Signal } from '../../src/pk/trajectory'
import { expectWithin } from '../expectWithin'
import { Random } from '../laws/random'
import { randomStudy } from '../laws/randomModel'
import { target } from '../pk/exposures'
import { hours, subjectOf } from '../pk/subjects'
import { between, type DenseCourse, type DenseSample, denseCourse } from './denseCourse'

const observed: Signal = { kind: 'observed' }

function highest(samples: readonly DenseSample[]): number {
  return Math.max(...samples.map(({ level }) => level))
}

function lowest(samples: readonly DenseSample[]): number {
  return Math.min(...samples.map(({ level }) => level))
}

function areaOf(samples: readonly DenseSample[]): number {
  return (samples.at(-1)?.area ?? Number.NaN) - samples[0].area
}

/** A value that a finer look could only raise, by no more than `most`. */
function expectAtLeast(actual: number, dense: number, most: number, what: string): void {
  const rounding = 1e-9 * (Math.abs(dense) + most)
  if (!(actual >= dense - rounding && actual <= dense + most + rounding)) {
    expect.fail(`${what}: got ${actual}, by dense sampling ${dense}, at most ${most} more`)
  }
}

/** Time on one side of a level between samples, and how far that may be off: a step for each change of side. */
function timeOn(samples: readonly DenseSample[], level: number, side: 1 | -1): { time: number; off: number } {
  let time = 0
  let off = 0
  for (let k = 1; k < samples.length; k++) {
    const step = samples[k].time - samples[k - 1].time
    const before = side * (samples[k - 1].level - level) > 0
    const after = side * (samples[k].level - level) > 0
    if (before && after) time += step
    if (before !== after) off += step
    else if (Math.abs(samples[k].level - level) < 1e-9 * level) off += step
  }
  return { time, off }
}

describe('random regimens, by dense sampling of a textbook exponential', () => {
  test.each(Array.from({ length: 10 }, (_, i) => 2101 + i))('as given, seed %s', (seed) => {
    const random = new Random(seed)
    const study = randomStudy(random)
    const request = { ...study, path: 'regimens[0]' }
    const outcome = courseOf(request)
    if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
    const { course } = outcome
    const twin = denseCourse({
      doses: [...course.carried, ...course.administrations.flatMap(({ doses }) => doses)],
      initial: [...Array.from(course.initial.amounts), ...Array.from(course.initial.effectSites)],
      models: study.stretches.map(({ from, subject }) => ({ from, model: subject.model })),
      sessions: course.sessions,
      cuts: course.administrations.map(({ at }) => at),
      ...{ signal: observed, until: study.until, density: 40 }
    })
    const top = highest(twin.samples)
    const [low, high] = [top * random.between(0.02, 0.3), top * random.between(0.4, 0.9)]
    const window = target({ kind: 'window', when: { kind: 'throughout' }, low, high })
    const found = exposureOf({ course, request, targets: [window] })
    for (const interval of found.intervals) {
      const samples = between(twin, interval.start, interval.end)
      const where = `interval from ${interval.start} h`
      expectAtLeast(interval.peak, highest(samples), twin.jump, `peak, ${where}`)
      expectAtLeast(-interval.minimum, -lowest(samples), twin.jump, `minimum, ${where}`)
      expectWithin(interval.auc, areaOf(samples), { absolute: 1e-8 * top * study.until }, `area, ${where}`)
      if (interval.trough !== undefined) {
        expectWithin(interval.trough, samples.at(-1)?.level ?? Number.NaN, { absolute: 1e-8 * top }, `trough, ${where}`)
      }
    }
    for (const { auc, from, to } of found.days) {
      if (auc !== undefined) {
        expectWithin(
          auc,
          areaAt(twin, to) - areaAt(twin, from),
          { absolute: twin.step * twin.jump },
          `day from ${from} h`
        )
      }
    }
    const [first] = found.intervals
    const whole = between(twin, first.start, study.until)
    const length = study.until - first.start
    const above = timeOn(whole, high, 1)
    const below = timeOn(whole, low, -1)
    expectWithin((found.timeAbove ?? Number.NaN) * length, above.time, { absolute: above.off + 1e-6 }, 'time above')
    expectWithin((found.timeBelow ?? Number.NaN) * length, below.time, { absolute: below.off + 1e-6 }, 'time below')
    if (found.highestRunningAuc24 !== undefined) {
      const starts = twin.samples.filter(({ time }) => time <= study.until - 24)
      const best = Math.max(
        ...starts.filter((_, i) => i % 7 === 0).map(({ time, area }) => areaAt(twin, time + 24) - area)
      )
      expectAtLeast(
        found.highestRunningAuc24.auc,
        best * (1 - 1e-6),
        2e-6 * best + 16 * top * twin.step,
        'highest 24 h'
      )
    }
  })

  test.each(Array.from({ length: 8 }, (_, i) => 2201 + i))('at steady state, seed %s', (seed) => {
    const random = new Random(seed)
    const subject = steadySubject(random)
    const lines = Array.from({ length: random.whole(1, 3) }, () => steadyLine(random))
    const sessions: SessionLine[] = random.chance(0.4)
      ? [
          {
            at: random.between(0, 20),
            duration: random.between(1, 30),
            clearance: random.between(1, 9),
            every: hours(24)
          }
        ]
      : []
    const request = {
      prescription: { name: 'regimen', start: 'empty' as const, lines },
      stretches: [{ from: 0, subject }],
      sessions,
      until: 240,
      path: 'regimens[0]'
    }
    const outcome = courseOf(request)
    if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
    const { steadyState } = exposureOf({ course: outcome.course, request, targets: [] })
    const { period = Number.NaN, origin = Number.NaN } = steadyState
    expect(24 % period).toBe(0)
    // Forty days more than enough: the slowest half-life is under a day.
    const start = origin + 40 * 24
    const until = start + period
    const written = administrations({ ...request, until })
    const twin = denseCourse({
      doses: written.administrations.flatMap(({ doses }) => doses),
      models: [{ from: 0, model: subject.model }],
      sessions: sessions.flatMap((line) =>
        Array.from({ length: 42 }, (_, day) => ({ ...line, start: line.at + 24 * day }))
      ),
      cuts: [...written.administrations.map(({ at }) => at), start],
      ...{ signal: observed, until, density: 6 }
    })
    const samples = between(twin, start, until)
    const top = highest(samples)
    const jump = Math.max(...samples.slice(1).map(({ level }, i) => Math.abs(level - samples[i].level)))
    expectAtLeast(steadyState.peak ?? Number.NaN, top, jump, 'peak')
    expectAtLeast(-(steadyState.minimum ?? Number.NaN), -lowest(samples), jump, 'minimum')
    expectWithin(steadyState.auc ?? Number.NaN, areaOf(samples), { relative: 1e-7 }, 'area')
    for (const { end, trough } of steadyState.intervals) {
      const before = samples.filter(({ time }) => Math.abs(time - start - end) < 1e-7).at(0)
      if (trough !== undefined) expectWithin(trough, before?.level ?? Number.NaN, { absolute: 1e-8 * top }, 'trough')
    }
    checkReached(steadyState.reached90, twin, { origin, period, auc: steadyState.auc ?? Number.NaN })
  })
})

/** The 90 % by the twin's own windows. */
function checkReached(
  reached90: number | undefined,
  twin: DenseCourse,
  { origin, period, auc }: { origin: number; period: number; auc: number }
): void {
  const windows = Array.from({ length: Math.floor((40 * 24) / period) }, (_, k) => origin + (k + 1) * period)
  const off = windows.map((end) => Math.abs(areaAt(twin, end) - areaAt(twin, end - period) - auc) > 0.1 * auc)
  const first = off.lastIndexOf(true) + 1
  expectWithin(reached90 ?? Number.NaN, windows[first], { relative: 1e-9 }, 'reached')
}

/** Area since 0 at a time, by the trapezoid between the samples around it. */
function areaAt(course: DenseCourse, time: number): number {
  const { samples } = course
  let low = 0
  let high = samples.length - 1
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (samples[middle].time <= time) low = middle
    else high = middle
  }
  const [a, b] = [samples[low], samples[high]]
  if (b.time === a.time) return b.area
  return a.area + ((b.area - a.area) * (time - a.time)) / (b.time - a.time)
}

/** A depot, two compartments and rates that leave no half-life above a day. */
function steadySubject(random: Random): Subject {
  const volume = random.logBetween(5, 50)
  const model: Model = {
    compartments: [
      { name: 'depot', column: 'depot', holds: 'drug' },
      { name: 'central', column: 'central', holds: 'drug', volume },
      { name: 'peripheral', column: 'peripheral', holds: 'drug' }
    ],
    transfers: [
      { kind: 'first-order', from: 0, to: 1, rate: random.logBetween(0.1, 3) },
      { kind: 'first-order', from: 1, to: 2, rate: random.logBetween(0.05, 1) },
      { kind: 'first-order', from: 2, to: 1, rate: random.logBetween(0.3, 2) },
      { kind: 'first-order', from: 1, to: 'eliminated', rate: random.logBetween(0.2, 1) }
    ],
    effectSites: [],
    observed: 1,
    observations: []
  }
  const oral = {
    ...{ name: 'oral', input: 'bolus' as const, bioavailability: 0.6, lag: random.between(0, 9) },
    parts: [
      { into: 0, fraction: 0.7, lag: 0 },
      { into: 1, fraction: 0.3, lag: 0.5, over: random.between(0.5, 40) }
    ]
  }
  return { ...subjectOf(model), routes: [...subjectOf(model).routes, oral] }
}

function steadyLine(random: Random): DoseLine {
  const every = random.pick([6, 8, 12, 24])
  const given = {
    amount: { value: random.between(10, 500), per: 'dose' as const },
    ...{ moietyFraction: 1, at: random.between(0, 30), every: hours(every), exceptions: [] }
  }
  if (random.chance(0.4)) return { ...given, route: 'oral' }
  return { ...given, route: 'in', ...(random.chance(0.6) && { over: random.logBetween(0.2, 40) }) }
}
