import { expect, test } from 'vitest'
import type { Dose } from '../../src/pk/dose'
import { expectWithin } from '../expectWithin'
import { Random } from './random'
import { randomStudy } from './randomModel'
import { course, rowsOf } from './rowsOf'

/** What of a dose has entered by a time; a bolus at the very time only `after` it. */
function entered(dose: Dose, time: number, after: boolean): number {
  if (dose.kind === 'bolus') return dose.start < time || (after && dose.start === time) ? dose.amount : 0
  return (dose.amount * Math.min(dose.duration, Math.max(0, time - dose.start))) / dose.duration
}

test('at every row, what is in the body and what has left it is what it held at 0 and what has entered', () => {
  for (let seed = 1; seed <= 60; seed++) {
    const study = randomStudy(new Random(seed))
    const given = course(study)
    const doses = [...given.carried, ...given.administrations.flatMap(({ doses }) => doses)]
    const held0 = Array.from(given.initial.amounts).reduce((sum, amount) => sum + amount, 0)
    const columns = given.segments[0].model.compartments.length
    let largest = 0
    for (const { time, row, values } of rowsOf(given)) {
      const held = values.slice(1, 1 + columns).reduce((sum, amount) => sum + amount, 0)
      const eliminated = values[values.length - 1]
      const expected = doses.reduce((sum, dose) => sum + entered(dose, time, row === 'after dose'), held0)
      largest = Math.max(largest, expected)
      // An infusion begun a moment ago has few digits in its elapsed time: compared with all that has entered so far.
      expectWithin(held + eliminated, expected, { absolute: 2e-13 * largest }, `seed ${seed}, ${time} h ${row}`)
    }
    expect(largest).toBeGreaterThanOrEqual(0)
  }
})

test('area under the observed concentration x clearance is what was eliminated, where all of it leaves from there', () => {
  let seen = 0
  for (let seed = 1; seed <= 60; seed++) {
    const study = randomStudy(new Random(seed))
    const { model } = study.stretches[0].subject
    const out = model.transfers.filter((transfer) => transfer.kind === 'first-order' && transfer.to === 'eliminated')
    const fromObserved = out.every((transfer) => 'from' in transfer && transfer.from === model.observed)
    const changing = study.stretches.length > 1 || study.sessions.length > 0
    if (!fromObserved || changing) continue
    seen += 1
    const rate = out.reduce((sum, transfer) => sum + (transfer.kind === 'first-order' ? transfer.rate : 0), 0)
    const clearance = rate * (model.compartments[model.observed].volume ?? Number.NaN)
    for (const { time, row, values } of rowsOf(course(study))) {
      const auc = values[values.length - 2]
      if (auc > 0)
        expectWithin(auc * clearance, values[values.length - 1], { relative: 1e-13 }, `seed ${seed}, ${time} h ${row}`)
    }
  }
  expect(seen).toBeGreaterThan(10)
})
