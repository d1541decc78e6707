import { test } from 'vitest'
import { areaBetween } from '../../src/pk/curve'
import type { Dose } from '../../src/pk/dose'
import { periodicState } from '../../src/pk/periodic'
import { periodicSegments } from '../../src/pk/periodicSegments'
import { finalState, propagate } from '../../src/pk/propagate'
import { expectWithin } from '../expectWithin'
import { Random } from './random'
import { randomModel } from './randomModel'

/** One to three inputs anywhere, some longer than the period. */
function randomDoses(random: Random, compartments: number, period: number): Dose[] {
  return Array.from({ length: random.whole(1, 3) }, (): Dose => {
    const start = random.between(0, 2 * period)
    const into = random.whole(0, compartments - 1)
    const amount = random.logBetween(1, 1000)
    if (random.chance(0.5)) return { kind: 'bolus', start, into, amount }
    return { kind: 'infusion', start, into, amount, duration: period * random.logBetween(0.01, 5) }
  })
}

test('a periodic state comes back after its period, and what leaves in it is what enters', () => {
  for (let seed = 801; seed <= 900; seed++) {
    const random = new Random(seed)
    const model = randomModel(random)
    const period = random.logBetween(0.5, 50)
    const doses = randomDoses(random, model.compartments.length, period)
    const sessions = random.chance(0.3)
      ? [
          {
            start: random.between(0, period),
            duration: period * random.between(0.1, 1.5),
            clearance: random.logBetween(0.1, 20)
          }
        ]
      : []
    const segments = periodicSegments({ model, period, doses, sessions })
    const state = periodicState(segments)
    const trajectory = propagate(segments, state)
    const after = finalState(trajectory)
    for (let i = 0; i < state.amounts.length; i++) {
      expectWithin(after.amounts[i], state.amounts[i], { relative: 2e-13 }, `seed ${seed}, amount ${i}`)
    }
    for (let i = 0; i < state.effectSites.length; i++) {
      expectWithin(after.effectSites[i], state.effectSites[i], { relative: 2e-13 }, `seed ${seed}, site ${i}`)
    }
    const entered = doses.reduce((sum, { amount }) => sum + amount, 0)
    const left = trajectory.pieces.reduce((sum, piece) => sum + piece.eliminated(piece.segment.duration), 0)
    expectWithin(left, entered, { relative: 2e-13 }, `seed ${seed}`)
    // A period's area at an effect site is that of its source.
    const area = areaBetween(trajectory, { kind: 'observed' }, 0, period)
    model.effectSites.forEach((_, index) => {
      expectWithin(
        areaBetween(trajectory, { kind: 'effect-site', index }, 0, period),
        area,
        { relative: 1e-10 },
        `seed ${seed}`
      )
    })
  }
})
