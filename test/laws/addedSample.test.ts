import { expect, test } from 'vitest'
import { extremes, timeAbove } from '../../src/pk/curve'
import { Random } from './random'
import { hourly, randomStudy } from './randomModel'
import { course, rowsOf } from './rowsOf'

test('an added sample, or another grid, changes no bit of any other row', () => {
  for (let seed = 701; seed <= 730; seed++) {
    const random = new Random(seed)
    const given = course(randomStudy(random))
    const rows = rowsOf(given, { every: hourly(5), also: [] })
    const added = Array.from({ length: 20 }, () => random.between(0, given.end))
    const finer = rowsOf(given, { every: hourly(1.25), also: added })
    const keyOf = ({ time, row }: { time: number; row: string }): string => `${time} ${row}`
    const byKey = new Map(finer.map((row) => [keyOf(row), row.values]))
    for (const row of rows) expect(byKey.get(keyOf(row)), `seed ${seed}, ${row.time} h`).toEqual(row.values)
    expect(finer.length).toBeGreaterThan(rows.length)
  }
})

test('reading a curve between two readings of the table changes no bit of the second', () => {
  for (let seed = 731; seed <= 745; seed++) {
    const given = course(randomStudy(new Random(seed)))
    const before = rowsOf(given)
    const { peak } = extremes(given.trajectory, { kind: 'observed' }, 0, given.end)
    timeAbove(given.trajectory, { kind: 'observed' }, peak / 2, 0, given.end)
    expect(rowsOf(given)).toEqual(before)
  }
})
