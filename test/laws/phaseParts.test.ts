import { expect, test } from 'vitest'
import { distributionOver } from '../../src/pk/distribution'
import { phaseParts } from '../../src/pk/phaseParts'
import { phasesOf } from '../../src/pk/phases'
import { expectWithin } from '../expectWithin'
import { Random } from './random'
import { randomStudy } from './randomModel'
import { course } from './rowsOf'

test('the parts of the phases sum to the concentration, in any study in which they are defined', () => {
  let defined = 0
  for (let seed = 1501; seed <= 1530; seed++) {
    const random = new Random(seed)
    const { trajectory } = course(randomStudy(random))
    const parts = phaseParts(trajectory)
    if (typeof parts === 'string') continue
    defined += 1
    const top = Math.max(...trajectory.pieces.map((piece) => piece.concentration({ kind: 'observed' }, 0)))
    for (const piece of parts) {
      const offset = piece.piece.segment.duration * random.next()
      const level = piece.piece.concentration({ kind: 'observed' }, offset)
      const sum = piece.at(offset).reduce((total, part) => total + part, 0)
      // Taken apart anew at a change, parts may be large against the level that is left of them.
      const size = piece.at(offset).reduce((total, part) => total + Math.abs(part), level)
      expectWithin(sum, level, { absolute: 1e-11 * size + 1e-14 * top }, `seed ${seed}`)
    }
  }
  expect(defined).toBeGreaterThan(20)
})

test('phases and ends of distribution are finite and in their bounds, in any study', () => {
  for (let seed = 1601; seed <= 1620; seed++) {
    const random = new Random(seed)
    const study = randomStudy(random)
    for (const { over, byPhases, readableFrom, readableTo, why } of distributionOver(course(study), undefined)) {
      if (over === undefined) expect(why, `seed ${seed}`).toMatch(/./)
      else {
        expect(over).toBe(byPhases)
        expect(over).toBeGreaterThanOrEqual(0)
        expect(readableFrom).toBeLessThan(readableTo)
      }
    }
    for (const { from, subject } of study.stretches) {
      const found = phasesOf({
        model: subject.model,
        from,
        to: study.until,
        until: study.until,
        periods: [12],
        infusions: []
      })
      const numbers = ['stiffness', 'longestExplicitStep', 'vss', 'vz', 'mrt', 'clearance', 'terminalHalfLife'] as const
      for (const name of numbers) {
        const value = found[name]
        if (value === undefined) expect(found.why[name], `seed ${seed}: ${name}`).toMatch(/./)
        else expect(Number.isFinite(value) && value > 0, `seed ${seed}: ${name} ${value}`).toBe(true)
      }
      const area = found.phases.reduce((sum, { shareOfAuc }) => sum + shareOfAuc, 0)
      if (found.phases.length > 0) expectWithin(area, 1, { absolute: 1e-11 }, `seed ${seed}: shares of area`)
    }
  }
})
