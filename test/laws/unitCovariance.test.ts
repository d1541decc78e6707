import { expect, test } from 'vitest'
import type { Model } from '../../src/pk/model'
import { Random } from './random'
import { hourly, type RandomStudy, randomStudy } from './randomModel'
import { bitsOf, course, expectRowWithin, type Row, rowsOf } from './rowsOf'

/** How many new units an old one is. */
interface Units {
  readonly time: number
  readonly amount: number
  readonly volume: number
}

function rescaledModel(model: Model, units: Units): Model {
  return {
    ...model,
    compartments: model.compartments.map((compartment) =>
      compartment.volume === undefined ? compartment : { ...compartment, volume: compartment.volume * units.volume }
    ),
    transfers: model.transfers.map((transfer) => {
      if (transfer.kind !== 'first-order') throw new RangeError(transfer.kind)
      return { ...transfer, rate: transfer.rate / units.time }
    }),
    effectSites: model.effectSites.map((site) => ({ ...site, rate: site.rate / units.time })),
    observations: model.observations.map((seen) => ({ ...seen, volume: seen.volume * units.volume }))
  }
}

function rescaled(study: RandomStudy, units: Units): RandomStudy {
  const { time, amount } = units
  return {
    until: study.until * time,
    stretches: study.stretches.map(({ from, subject }) => ({
      from: from * time,
      subject: {
        ...subject,
        model: rescaledModel(subject.model, units),
        routes: subject.routes.map((route) => ({
          ...route,
          lag: route.lag * time,
          parts: route.parts.map((part) => ({
            ...part,
            lag: part.lag * time,
            ...(part.over !== undefined && { over: part.over * time })
          }))
        }))
      }
    })),
    sessions: study.sessions.map((line) => ({
      ...line,
      at: line.at * time,
      duration: line.duration * time,
      clearance: (line.clearance * units.volume) / time,
      ...(line.every && { every: { ...line.every, times: time } })
    })),
    prescription: {
      ...study.prescription,
      lines: study.prescription.lines.map((line) => ({
        ...line,
        ...(line.amount && { amount: { ...line.amount, value: line.amount.value * amount } }),
        at: line.at * time,
        ...(line.over !== undefined && { over: line.over * time }),
        ...(line.every && { every: { ...line.every, times: time } }),
        exceptions: line.exceptions.map((exception) => ({
          ...exception,
          ...(exception.lateBy !== undefined && { lateBy: exception.lateBy * time }),
          ...(exception.stoppedAfter !== undefined && { stoppedAfter: exception.stoppedAfter * time }),
          ...(exception.amount && { amount: { ...exception.amount, value: exception.amount.value * amount } })
        }))
      }))
    }
  }
}

/** The rows of a study in other units, back in the old ones. */
function rowsBack(study: RandomStudy, units: Units): Row[] {
  const { model } = study.stretches[0].subject
  const amounts = model.compartments.length
  const levels = model.effectSites.length + model.observations.length
  const level = units.volume / units.amount
  const factors = [
    level,
    ...Array.from({ length: amounts }, () => 1 / units.amount),
    ...Array.from({ length: levels }, () => level),
    level / units.time,
    1 / units.amount
  ]
  const sampling = { every: { ...hourly(2.5), times: units.time }, also: [0.01 * units.time, 0.3 * units.time] }
  return rowsOf(course(rescaled(study, units)), sampling).map(({ time, row, values }) => ({
    time: time / units.time,
    row,
    values: values.map((value, i) => value * factors[i])
  }))
}

function exact(rows: readonly Row[]): Row[] {
  return rows.map((row) => ({ ...row, values: bitsOf(row.values) }))
}

test('times, amounts and volumes x powers of 2 give the same table to the bit', () => {
  for (let seed = 501; seed <= 540; seed++) {
    const study = randomStudy(new Random(seed))
    const rows = rowsOf(course(study))
    for (const units of [
      { time: 64, amount: 1024, volume: 1024 },
      { time: 1 / 32, amount: 1 / 1048576, volume: 2 }
    ]) {
      expect(exact(rowsBack(study, units)), `seed ${seed}`).toEqual(exact(rows))
    }
  }
})

/**
 * Without what has come down by 200 half-lives: its offset from the segment's start is a difference of times that were
 * rounded anew, which moves it by more than its own digits.
 */
function afterDecay(values: readonly number[]): number[] {
  return values.map((value) => (value < 1e-60 ? 0 : value))
}

test('times x 60, amounts and volumes x 1000 give the same table within 1e-13', () => {
  for (let seed = 541; seed <= 570; seed++) {
    const study = randomStudy(new Random(seed))
    const back = rowsBack(study, { time: 60, amount: 1000, volume: 1000 })
    rowsOf(course(study)).forEach(({ time, row, values }, i) => {
      expect(back[i].row).toBe(row)
      expectRowWithin(afterDecay(back[i].values), afterDecay(values), 1e-13, `seed ${seed}, ${time} h`)
    })
  }
})
