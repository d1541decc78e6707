import { describe, expect, test } from 'vitest'
import { courseOf } from '../../src/pk/course'
import { areaBetween, crossings, extremes, timeAbove, timeBelow, valueAt } from '../../src/pk/curve'
import type { Model } from '../../src/pk/model'
import { outline } from '../../src/pk/outline'
import type { Signal } from '../../src/pk/trajectory'
import { expectWithin } from '../expectWithin'
import { Random } from '../laws/random'
import { randomStudy } from '../laws/randomModel'
import { course } from '../laws/rowsOf'
import { courseFor, hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

const observed: Signal = { kind: 'observed' }

/** Every signal that a model has. */
function signalsOf(model: Model): Signal[] {
  return [
    observed,
    ...model.effectSites.map((_, index): Signal => ({ kind: 'effect-site', index })),
    ...model.observations.map((_, index): Signal => ({ kind: 'observation', index }))
  ]
}

/** Ascending times: a fine grid, and a geometric one after each cut where fast phases are. */
function lookedAt(cuts: readonly number[], from: number, to: number): number[] {
  const grid = Array.from({ length: 301 }, (_, i) => from + ((to - from) * i) / 300)
  const after = cuts.flatMap((cut) => Array.from({ length: 24 }, (_, i) => cut + 1e-6 * 2.3 ** i))
  return [...grid, ...after].filter((time) => time >= from && time <= to).sort((a, b) => a - b)
}

describe('against a look at the curve from many points', () => {
  test('no point is above the peak or below the minimum, and both are on the curve', () => {
    for (let seed = 1; seed <= 30; seed++) {
      const random = new Random(seed)
      const { trajectory, segments, end } = course(randomStudy(random))
      const from = random.between(0, end / 3)
      const to = random.between(from + 1, end)
      const times = lookedAt(
        segments.map(({ start }) => start),
        from,
        to
      )
      for (const signal of signalsOf(segments[0].model)) {
        const { peak, peakTime, minimum, minimumTime } = extremes(trajectory, signal, from, to)
        const values = times.flatMap((time) => [
          ...(time > from ? [valueAt(trajectory, signal, time, 'before')] : []),
          ...(time < to ? [valueAt(trajectory, signal, time, 'after')] : [])
        ])
        expect(Math.max(...values), `seed ${seed}`).toBeLessThanOrEqual(peak * (1 + 1e-13))
        expect(Math.min(...values), `seed ${seed}`).toBeGreaterThanOrEqual(minimum * (1 - 1e-13))
        // A moment before, too: the value just before a change of volume counts, and is not that of the change's time.
        const at = (time: number): number[] => [
          valueAt(trajectory, signal, time, 'before'),
          valueAt(trajectory, signal, time, 'after'),
          valueAt(trajectory, signal, time * (1 - 1e-11), 'before')
        ]
        const nearest = (time: number, value: number): number =>
          Math.min(...at(time).map((found) => Math.abs(found - value)))
        expectWithin(nearest(peakTime, peak), 0, { absolute: 1e-5 * peak }, `seed ${seed}, peak at ${peakTime} h`)
        expectWithin(nearest(minimumTime, minimum), 0, { absolute: 1e-5 * peak }, `seed ${seed}, minimum`)
      }
    }
  })

  test('times above and below a level are what the crossings say, and add up to the whole', () => {
    for (let seed = 41; seed <= 80; seed++) {
      const random = new Random(seed)
      const { trajectory, segments, end } = course(randomStudy(random))
      for (const signal of signalsOf(segments[0].model)) {
        const { peak, minimum } = extremes(trajectory, signal, 0, end)
        if (peak === 0) continue
        const level = minimum + (peak - minimum) * random.between(0.05, 0.95)
        const found = crossings(trajectory, signal, level, 0, end)
        let above = 0
        let since = valueAt(trajectory, signal, 0, 'before') >= level ? 0 : Number.NaN
        for (const { time, direction } of found) {
          if (direction === 'up') since = time
          else above += time - since
          expect(Number.isFinite(since)).toBe(true)
        }
        if (found.length === 0 || found[found.length - 1].direction === 'up') above += end - since
        expectWithin(timeAbove(trajectory, signal, level, 0, end), above, { absolute: 1e-9 }, `seed ${seed}`)
        expectWithin(above + timeBelow(trajectory, signal, level, 0, end), end, { absolute: 1e-9 }, `seed ${seed}`)
        for (const { time, direction } of found) {
          const before = valueAt(trajectory, signal, Math.max(0, time - 1e-7), 'after')
          const after = valueAt(trajectory, signal, Math.min(end, time + 1e-7), 'before')
          // A crossing so near a turning point that both sides are on one side 1e-7 h away is none for this look.
          if ((before - level) * (after - level) < 0) expect(after > before, `seed ${seed}`).toBe(direction === 'up')
        }
      }
    }
  })

  test('areas are those of a fine quadrature', () => {
    for (let seed = 81; seed <= 84; seed++) {
      const random = new Random(seed)
      const { trajectory, segments, end } = course(randomStudy(random))
      const from = random.between(0, end / 3)
      const to = random.between(from + 1, end)
      for (const signal of signalsOf(segments[0].model)) {
        let area = 0
        const cuts = [from, ...segments.map(({ start }) => start).filter((start) => start > from && start < to), to]
        for (let i = 0; i + 1 < cuts.length; i++)
          area += quadrature(cuts[i], cuts[i + 1], (t, side) => valueAt(trajectory, signal, t, side))
        expectWithin(
          areaBetween(trajectory, signal, from, to),
          area,
          { relative: 1e-8 },
          `seed ${seed}, ${signal.kind}`
        )
      }
    }
  })
})

/** Simpson's rule on a grid that is geometric from both ends' fast phases: t = a + (b - a) s^6, s uniform. */
function quadrature(a: number, b: number, f: (t: number, side: 'before' | 'after') => number): number {
  const n = 1600
  let sum = 0
  for (let i = 0; i <= n; i++) {
    const s = i / n
    const weight = i === 0 || i === n ? 1 : i % 2 === 1 ? 4 : 2
    // Just before the end: at it, a change of volume has acted.
    const t = i === n ? b * (1 - 1e-11) : a + (b - a) * s ** 6
    sum += weight * f(t, i === 0 ? 'after' : 'before') * (b - a) * 6 * s ** 5
  }
  return sum / (3 * n)
}

describe('peaks and minima', () => {
  test('of an infusion that has long been on its plateau are at its end and at its start', () => {
    const { trajectory } = courseFor(subjectOf(oneCompartment({ volume: 10, k: 2 })), [line(1000, { over: 100 })], 101)
    expect(extremes(trajectory, observed, 0, 100).peakTime).toBe(100)
    expect(extremes(trajectory, observed, 0, 100).minimumTime).toBe(0)
    // Seen from the whole, the plateau is the value of many times; it falls right after the infusion.
    expect(extremes(trajectory, observed, 0, 101).peakTime).toBe(100)
  })

  test('count both sides of a bolus, what is given at the start and nothing given at the end', () => {
    const { trajectory } = courseFor(
      subjectOf(oneCompartment({ volume: 10, k: 0.1 })),
      [line(100, { every: hours(8) })],
      24
    )
    const { peak, peakTime, minimum, minimumTime } = extremes(trajectory, observed, 0, 8)
    expect([peak, peakTime, minimumTime]).toEqual([10, 0, 8])
    expectWithin(minimum, 10 * Math.exp(-0.8), { relative: 1e-15 })
  })

  test('report the earliest of equal peaks', () => {
    const subject = subjectOf(oneCompartment({ volume: 10, k: 0.1 }))
    const { trajectory } = courseFor(subject, [line(100, { every: hours(8) })], 240, 'steady-state')
    expect(extremes(trajectory, observed, 0, 240).peakTime).toBe(0)
  })

  test('see a turn and its return between two probes of the curve', () => {
    // Three phases whose slope is a parabola in e^-t with both zeros close together, at t = 1 and t = 1.06.
    const piece = {
      segment: { start: 0, duration: 3, model: oneCompartment({ volume: 1, k: 1 }), boluses: [0], inputs: [0] },
      probes: [0, 0.9, 1.1, 3],
      amountsInto: () => undefined,
      concentration: (_: Signal, t: number) => 5 + (t ** 3 / 3 - (2.06 * t ** 2) / 2 + 1.06 * t),
      slope: (_: Signal, t: number) => (t - 1) * (t - 1.06),
      area: () => 0,
      areaBetween: () => 0,
      eliminated: () => 0
    }
    const trajectory = { end: 3, initial: { amounts: [0], effectSites: [] }, pieces: [piece] }
    const level = 5 + (1 / 3 - 1.03 + 1.06) - 1e-5
    const up = crossings(trajectory, observed, level, 0.5, 1.5).map(({ direction }) => direction)
    expect(up).toEqual(['up', 'down', 'up'])
  })
})

describe('an oscillating curve', () => {
  test.each([3, 6, 12])('in a ring of %s compartments has all its turns found', (n) => {
    const ring: Model = {
      compartments: Array.from({ length: n }, (_, i) => ({ name: `c${i}`, column: `c${i}`, holds: 'drug', volume: 1 })),
      transfers: [
        ...Array.from({ length: n }, (_, i) => ({ kind: 'first-order' as const, from: i, to: (i + 1) % n, rate: 1 })),
        { kind: 'first-order', from: 0, to: 'eliminated', rate: 0.01 }
      ],
      effectSites: [],
      observed: 0,
      observations: []
    }
    const [piece] = courseFor(subjectOf(ring), [line(100)], 500).trajectory.pieces
    const seen: number[] = []
    const step = 0.05
    let left = piece.slope(observed, step)
    for (let k = 1; k < 2000; k++) {
      const right = piece.slope(observed, (k + 1) * step)
      if (left * right < 0) seen.push(k * step)
      left = right
    }
    const found = outline(piece, observed, 0, 100).filter(({ turn }) => turn)
    expect(seen.length).toBeGreaterThan(1)
    expect(found).toHaveLength(seen.length + 2)
    seen.forEach((time, i) => {
      expectWithin(found[i + 1].offset, time + step / 2, { absolute: 0.51 * step })
    })
  })
})

describe('values and areas', () => {
  test('the tail of a bolus has its own digits, not those of the whole area', () => {
    const { trajectory } = courseFor(subjectOf(oneCompartment({ volume: 10, k: 1 })), [line(100)], 240)
    for (const day of [1, 2, 5, 9]) {
      const from = 24 * (day - 1)
      const expected = 10 * Math.exp(-from) * -Math.expm1(-24)
      expectWithin(areaBetween(trajectory, observed, from, from + 24), expected, { relative: 1e-13 }, `day ${day}`)
    }
  })

  test('the area under an effect site is that under its source once all has gone through', () => {
    const model = mammillary({ volumes: [5, 9], clearance: 3, exchanges: [2], ke0: 0.3 })
    const { trajectory } = courseFor(subjectOf(model), [line(60, { over: 2, at: 1 })], 900)
    const site: Signal = { kind: 'effect-site', index: 0 }
    expectWithin(areaBetween(trajectory, site, 0, 900), 60 / 3, { relative: 1e-13 })
    expectWithin(areaBetween(trajectory, site, 0, 3) + areaBetween(trajectory, site, 3, 900), 20, { relative: 1e-13 })
  })

  test('a change of volume stands in the value before a dose at that time, and counts as an extreme', () => {
    const small = oneCompartment({ volume: 10, k: 0.1 })
    const large = oneCompartment({ volume: 20, k: 0.1 })
    const outcome = courseOf({
      prescription: { name: 'regimen', start: 'empty', lines: [line(100), line(40, { at: 5 })] },
      stretches: [
        { from: 0, subject: subjectOf(small) },
        { from: 5, subject: subjectOf(large) }
      ],
      sessions: [],
      until: 10,
      path: 'regimens[0]'
    })
    if (!outcome.ok) throw new Error('not written')
    const { trajectory } = outcome.course
    const amount = 100 * Math.exp(-0.5)
    expectWithin(valueAt(trajectory, observed, 5, 'before'), amount / 20, { relative: 1e-15 })
    expectWithin(valueAt(trajectory, observed, 5, 'after'), (amount + 40) / 20, { relative: 1e-15 })
    const { minimum, minimumTime } = extremes(trajectory, observed, 0, 5)
    expectWithin(minimum, amount / 20, { relative: 1e-15 })
    expect(minimumTime).toBe(5)
  })

  test('a time outside the course is our mistake', () => {
    const { trajectory } = courseFor(subjectOf(oneCompartment({ volume: 10, k: 1 })), [line(100)], 24)
    expect(() => valueAt(trajectory, observed, 25, 'before')).toThrow(RangeError)
    expect(() => extremes(trajectory, observed, 5, 5)).toThrow(RangeError)
  })
})
