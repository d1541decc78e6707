import { describe, expect, test } from 'vitest'
import { valueAt } from '../../src/pk/curve'
import { integrate } from '../../src/pk/integrate'
import { michaelisMentenCourse } from '../../src/pk/michaelisMenten'
import type { Model } from '../../src/pk/model'
import type { Segment } from '../../src/pk/segment'
import { expectWithin } from '../expectWithin'

const VOLUME = 49
const MODEL: Model = {
  compartments: [{ name: 'central', volume: VOLUME, column: 'central', holds: 'drug' }],
  transfers: [{ kind: 'saturable', from: 0, to: 'eliminated', maximumRate: 415 / 24, halfSaturation: 5.7, hill: 1 }],
  effectSites: [],
  observed: 0,
  observations: []
}
const NOTHING = { amounts: [0], effectSites: [] }
const OBSERVED = { kind: 'observed' } as const

/** Boluses that bring the level up by 20 mg/L, every `apart` hours. */
function boluses(count: number, apart: number): Segment[] {
  return Array.from({ length: count }, (_, k) => ({
    start: k * apart,
    duration: apart,
    model: MODEL,
    boluses: [20 * VOLUME],
    inputs: [0]
  }))
}

describe('one compartment with saturable elimination, in closed form', () => {
  test('falls as published', () => {
    // K28: C0 20 mg/L, Vmax 415 mg/d, Km 5.7 mg/L, V 49 L; Beal 1982, Schnell & Mendoza 1997 (from memory), recomputed.
    const course = michaelisMentenCourse(boluses(1, 144), NOTHING)
    if (course === undefined) throw new Error('no closed form')
    const days = [0.5, 1, 2, 3, 4, 5]
    const levels = [16.769483617, 13.6909122474, 8.16659897243, 3.90404113083, 1.37654315978, 0.371586390796]
    days.forEach((day, k) => {
      expectWithin(valueAt(course, OBSERVED, 24 * day, 'before'), levels[k]!, { relative: 1e-9 })
    })
  })

  test('agrees with the integrator, dose upon dose, in level, area and what has left', () => {
    const segments = boluses(5, 60)
    const exact = michaelisMentenCourse(segments, NOTHING)
    const integrated = integrate(segments, NOTHING, { relative: 1e-11, floor: 1e-6 })
    if (exact === undefined) throw new Error('no closed form')
    exact.pieces.forEach((piece, k) => {
      for (const offset of [0, 1, 17, 60]) {
        const other = integrated.pieces[k]!
        expectWithin(piece.concentration(OBSERVED, offset), other.concentration(OBSERVED, offset), { relative: 1e-9 })
        expectWithin(piece.slope(OBSERVED, offset), other.slope(OBSERVED, offset), { relative: 1e-8 })
        if (offset === 0) continue
        expectWithin(piece.area(OBSERVED, offset), other.area(OBSERVED, offset), { relative: 1e-9 })
        expectWithin(piece.eliminated(offset), other.eliminated(offset), { relative: 1e-9 })
      }
    })
  })

  test('is not claimed where there is none: an infusion, a Hill exponent, a second compartment', () => {
    const [segment] = boluses(1, 24)
    expect(michaelisMentenCourse([{ ...segment!, inputs: [1] }], NOTHING)).toBeUndefined()
    const hill = { ...MODEL, transfers: [{ ...MODEL.transfers[0]!, hill: 2 }] } as Model
    expect(michaelisMentenCourse([{ ...segment!, model: hill }], NOTHING)).toBeUndefined()
    const two = {
      ...MODEL,
      compartments: [...MODEL.compartments, { name: 'other', column: 'other', holds: 'drug' }]
    } as Model
    expect(michaelisMentenCourse([{ ...segment!, model: two }], NOTHING)).toBeUndefined()
  })
})
