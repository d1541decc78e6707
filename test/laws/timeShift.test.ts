import { expect, test } from 'vitest'
import { Random } from './random'
import { hourly, type RandomStudy, randomStudy } from './randomModel'
import { course, rowsOf } from './rowsOf'

/** Every time on the grid of 1/64 h, where sums of times are exact. */
function onGrid(value: number): number {
  return Math.max(1, Math.round(value * 64)) / 64
}

/** The study with all its times on the grid, and everything that happens `later`. */
function shifted(study: RandomStudy, later: number): RandomStudy {
  const routes = study.stretches[0].subject.routes.map((route) => ({
    ...route,
    lag: route.lag === 0 ? 0 : onGrid(route.lag),
    parts: route.parts.map((part) => ({
      ...part,
      lag: part.lag === 0 ? 0 : onGrid(part.lag),
      ...(part.over !== undefined && { over: onGrid(part.over) })
    }))
  }))
  return {
    until: onGrid(study.until) + later,
    stretches: study.stretches.map(({ from, subject }) => ({
      from: from === 0 ? 0 : onGrid(from) + later,
      subject: { ...subject, routes }
    })),
    sessions: study.sessions.map((line) => ({
      ...line,
      at: onGrid(line.at) + later,
      duration: onGrid(line.duration),
      ...(line.every && { every: hourly(Math.round(line.every.value)) })
    })),
    prescription: {
      ...study.prescription,
      start: 'empty',
      lines: study.prescription.lines.map((line) => ({
        ...line,
        at: onGrid(line.at) + later,
        ...(line.every && { every: hourly(Math.round(line.every.value)) }),
        ...(line.over !== undefined && { over: onGrid(line.over) }),
        exceptions: []
      }))
    }
  }
}

test('everything a day later is the same to the bit, a day later', () => {
  for (let seed = 301; seed <= 340; seed++) {
    const study = randomStudy(new Random(seed))
    const rows = rowsOf(course(shifted(study, 0)), { every: hourly(1000), also: [8, 16.5, 19] })
    const later = rowsOf(course(shifted(study, 24)), { every: hourly(1000), also: [32, 40.5, 43] })
    const expected = rows.filter(({ time }) => time > 0).map((row) => ({ ...row, time: row.time + 24 }))
    expect(
      later.filter(({ time }) => time > 24),
      `seed ${seed}`
    ).toEqual(expected)
  }
})
