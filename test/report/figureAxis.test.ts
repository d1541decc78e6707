import { expect, test } from 'vitest'
import { linearAxis, logarithmicAxis } from '../../src/report/figureAxis'
import { timeMarks } from '../../src/report/figureTime'

test('a linear axis runs from 0 to a round number that holds the highest level', () => {
  for (const top of [0.037, 0.9, 4.3, 47.5, 80, 1234]) {
    const axis = linearAxis(top, 400, 0, 5)
    const last = axis.ticks.at(-1)
    expect(axis.ticks[0]).toEqual({ at: 0, label: '0' })
    expect(last?.at).toBeGreaterThanOrEqual(top * (1 - 1e-9))
    expect(axis.place(0)).toBe(400)
    expect(axis.place(last?.at ?? 0)).toBeCloseTo(0, 9)
    expect(new Set(axis.ticks.map((tick) => tick.label)).size).toBe(axis.ticks.length)
  }
})

test('a log axis holds both ends, sets decades at equal distances and has no place for 0', () => {
  const axis = logarithmicAxis(0.013, 47, 300, 0)
  expect(axis.ticks[0]?.at).toBe(0.01)
  expect(axis.ticks.at(-1)?.at).toBe(50)
  const decade = axis.place(0.1) - axis.place(1)
  expect(axis.place(1) - axis.place(10)).toBeCloseTo(decade, 9)
  expect(axis.floor).toBe(0)
  for (const tick of axis.ticks) expect(Number.isFinite(axis.place(tick.at))).toBe(true)
})

test('days are named where there is room, numbered where there is less, weeks where there is little', () => {
  const week = { until: 168, unit: 'h', hoursPerUnit: 1 }
  expect(timeMarks({ ...week, width: 700 }).words.map(({ label }) => label)).toEqual(
    [1, 2, 3, 4, 5, 6, 7].map((day) => `day ${day}`)
  )
  expect(timeMarks({ ...week, width: 280 }).words.map(({ label }) => label)).toEqual([
    'day 1',
    '2',
    '3',
    '4',
    '5',
    '6',
    '7'
  ])
  const weeks = timeMarks({ until: 98, unit: 'd', hoursPerUnit: 24, width: 700 })
  expect(weeks.words[0]).toEqual({ at: 0, label: 'week 0' })
  expect(weeks.words[1]?.at).toBe(14)
  expect(timeMarks({ until: 120, unit: 'min', hoursPerUnit: 1 / 60, width: 700 }).words.at(-1)).toEqual({
    at: 120,
    label: '120 min'
  })
})
