import { test } from 'vitest'
import { propagate } from '../../src/pk/propagate'
import type { Segment } from '../../src/pk/segment'
import { Random } from './random'
import { randomStudy } from './randomModel'
import { course, expectRowWithin, rowsOf } from './rowsOf'

/** Each segment as two, the second without boluses. */
function halved(segments: readonly Segment[], random: Random): Segment[] {
  return segments.flatMap((segment) => {
    const duration = segment.duration * random.between(0.05, 0.95)
    const rest = segment.duration - duration
    const none = segment.model.compartments.map(() => 0)
    return [
      { ...segment, duration },
      { ...segment, start: segment.start + duration, duration: rest, boluses: none }
    ]
  })
}

test('cutting every segment in two changes every number by less than 1e-13', () => {
  for (let seed = 401; seed <= 430; seed++) {
    const random = new Random(seed)
    const given = course(randomStudy(random))
    const segments = halved(given.segments, random)
    const cut = { ...given, segments, trajectory: propagate(segments, given.initial) }
    const rows = rowsOf(given)
    rowsOf(cut).forEach(({ time, values }, i) => {
      expectRowWithin(values, rows[i].values, 1e-13, `seed ${seed}, ${time} h`)
    })
  }
})
