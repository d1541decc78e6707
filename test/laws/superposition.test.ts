import { expect, test } from 'vitest'
import type { DoseLine } from '../../src/pk/prescription'
import { Random } from './random'
import { type RandomStudy, randomStudy } from './randomModel'
import { bitsOf, course, expectRowWithin, type Row, rowsOf } from './rowsOf'

function withLines(study: RandomStudy, lines: readonly DoseLine[]): RandomStudy {
  return { ...study, prescription: { ...study.prescription, lines } }
}

/** Values at the sampling times, which regimens with other doses share. */
function samples(study: RandomStudy): Map<number, readonly number[]> {
  const rows: Row[] = rowsOf(course(study)).filter(({ row }) => row !== 'after dose')
  return new Map(rows.map(({ time, values }) => [time, values]))
}

test('two dose lines together give the sum of what each gives alone', () => {
  let seen = 0
  for (let seed = 101; seed <= 150; seed++) {
    const study = randomStudy(new Random(seed))
    const { lines } = study.prescription
    if (lines.length < 2) continue
    seen += 1
    const together = samples(study)
    const first = samples(withLines(study, lines.slice(0, 1)))
    const others = samples(withLines(study, lines.slice(1)))
    for (const [time, values] of together) {
      const a = first.get(time)
      const b = others.get(time)
      if (a === undefined || b === undefined) continue
      const sum = a.map((value, i) => value + b[i])
      expectRowWithin(values, sum, 1e-13, `seed ${seed}, ${time} h`)
    }
  }
  expect(seen).toBeGreaterThan(20)
})

function timesAmount(line: DoseLine, factor: number): DoseLine {
  const exceptions = line.exceptions.map((exception) =>
    exception.amount === undefined
      ? exception
      : { ...exception, amount: { ...exception.amount, value: exception.amount.value * factor } }
  )
  const amount = line.amount ?? { value: 0, per: 'dose' as const }
  return { ...line, amount: { ...amount, value: amount.value * factor }, exceptions }
}

test('doses x 3 give everything x 3 within 1e-13, doses x 4 give everything x 4 to the bit', () => {
  for (let seed = 201; seed <= 240; seed++) {
    const study = randomStudy(new Random(seed))
    const rows = rowsOf(course(study))
    for (const factor of [3, 4]) {
      const scaled = rowsOf(
        course(
          withLines(
            study,
            study.prescription.lines.map((line) => timesAmount(line, factor))
          )
        )
      )
      rows.forEach(({ time, values }, i) => {
        const expected = values.map((value) => value * factor)
        if (factor === 4) expect(bitsOf(scaled[i].values), `seed ${seed}, ${time} h`).toEqual(bitsOf(expected))
        else expectRowWithin(scaled[i].values, expected, 1e-13, `seed ${seed}, ${time} h`)
      })
    }
  }
})
