import type { Compartment, Model, Transfer } from '../../src/pk/model'
import type { Segment } from '../../src/pk/segment'

function compartment(name: string, volume?: number, holds: 'drug' | 'target' = 'drug'): Compartment {
  return { name, column: name, holds, ...(volume !== undefined && { volume }) }
}

/** One compartment with saturable elimination and nothing else. */
export function saturable(given: {
  volume: number
  maximumRate: number
  halfSaturation: number
  hill?: number
}): Model {
  const { volume, maximumRate, halfSaturation, hill = 1 } = given
  return {
    compartments: [compartment('central', volume)],
    transfers: [{ kind: 'saturable', from: 0, to: 'eliminated', maximumRate, halfSaturation, hill }],
    effectSites: [],
    observed: 0,
    observations: []
  }
}

/** Depot, central and peripheral with saturable beside linear elimination, an effect site and an observation. */
export function mixed(hill = 1): Model {
  return {
    compartments: [compartment('depot'), compartment('central', 20), compartment('peripheral', 45)],
    transfers: [
      { kind: 'first-order', from: 0, to: 1, rate: 1.1 },
      { kind: 'first-order', from: 1, to: 2, rate: 0.6 },
      { kind: 'first-order', from: 2, to: 1, rate: 0.25 },
      { kind: 'first-order', from: 1, to: 'eliminated', rate: 0.02 },
      { kind: 'saturable', from: 1, to: 'eliminated', maximumRate: 18, halfSaturation: 2.5, hill }
    ],
    effectSites: [{ name: 'effect', source: 1, rate: 0.4 }],
    observed: 1,
    observations: [{ name: 'both', of: [1, 2], volume: 20 }]
  }
}

/** Drug, peripheral, target and complex (places 0 to 3), times in h; turnover of target and complex can be switched off. */
export function targetMediated(given: {
  approximation: 'none' | 'quasi-steady-state'
  turnover: boolean
  association?: number
  dissociation?: number
}): Model {
  const { approximation, turnover, association = 10, dissociation = 0.5 } = given
  const moving: Transfer[] = turnover
    ? [
        { kind: 'first-order', from: 0, to: 'eliminated', rate: 0.003 },
        { kind: 'first-order', from: 2, to: 'eliminated', rate: 0.02 },
        { kind: 'first-order', from: 3, to: 'eliminated', rate: 0.005 },
        { kind: 'production', into: 2, rate: 0.06 }
      ]
    : []
  return {
    compartments: [
      compartment('drug', 3),
      compartment('peripheral', 2),
      compartment('target', 3, 'target'),
      compartment('complex', 3)
    ],
    transfers: [
      { kind: 'first-order', from: 0, to: 1, rate: 0.007 },
      { kind: 'first-order', from: 1, to: 0, rate: 0.01 },
      ...moving,
      { kind: 'binding', drug: 0, target: 2, complex: 3, association, dissociation, approximation }
    ],
    effectSites: [],
    observed: 0,
    observations: [{ name: 'total', of: [0, 3], volume: 3 }]
  }
}

/** The same dose into one compartment again and again: at once, or over `over`. */
export function repeated(
  model: Model,
  given: { into: number; amount: number; every: number; count: number; over?: number }
): Segment[] {
  const { into, amount, every, count, over } = given
  const none = model.compartments.map(() => 0)
  const some = (value: number): number[] => none.map((_, i) => (i === into ? value : 0))
  return Array.from({ length: count }, (_, k): Segment[] => {
    const start = k * every
    if (over === undefined) return [{ start, duration: every, model, boluses: some(amount), inputs: none }]
    return [
      { start, duration: over, model, boluses: none, inputs: some(amount / over) },
      { start: start + over, duration: every - over, model, boluses: none, inputs: none }
    ]
  }).flat()
}
