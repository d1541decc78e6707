import type { Integrator } from '../../src/pk/integrate'
import type { Model } from '../../src/pk/model'
import type { Segment } from '../../src/pk/segment'
import type { DosedProblem } from './rosenbrockProblems'

const drug = { holds: 'drug' } as const

/** The two problems as the program's own models. */
const MODELS: Record<string, Model> = {
  saturable: {
    compartments: [
      { name: 'depot', column: 'depot', ...drug },
      { name: 'central', column: 'central', volume: 20, ...drug },
      { name: 'peripheral', column: 'peripheral', ...drug }
    ],
    transfers: [
      { kind: 'first-order', from: 0, to: 1, rate: 1.1 },
      { kind: 'first-order', from: 1, to: 2, rate: 5 },
      { kind: 'first-order', from: 2, to: 1, rate: 0.5 },
      { kind: 'saturable', from: 1, to: 'eliminated', maximumRate: 18, halfSaturation: 2.5, hill: 1 }
    ],
    effectSites: [],
    observed: 1,
    observations: []
  },
  'target-mediated': {
    compartments: [
      { name: 'drug', column: 'drug', volume: 3, ...drug },
      { name: 'peripheral', column: 'peripheral', ...drug },
      { name: 'target', column: 'target', volume: 3, holds: 'target' },
      { name: 'complex', column: 'complex', volume: 3, ...drug }
    ],
    transfers: [
      { kind: 'first-order', from: 0, to: 1, rate: 0.007 },
      { kind: 'first-order', from: 1, to: 0, rate: 0.01 },
      { kind: 'first-order', from: 0, to: 'eliminated', rate: 0.003 },
      { kind: 'first-order', from: 2, to: 'eliminated', rate: 0.02 },
      { kind: 'first-order', from: 3, to: 'eliminated', rate: 0.005 },
      { kind: 'production', into: 2, rate: 0.06 },
      { kind: 'binding', drug: 0, target: 2, complex: 3, association: 10, dissociation: 0.5, approximation: 'none' }
    ],
    effectSites: [],
    observed: 0,
    observations: []
  }
}

/** The compared amount at the end of every interval, by the engine: segments made ready anew, scratch kept. */
export function integratedEnds(problem: DosedProblem, integrator: Integrator): number[] {
  const model = MODELS[problem.name]
  const inputs = problem.initial.map(() => 0)
  const boluses = problem.initial.map((_, i) => (i === 0 ? problem.dose : 0))
  integrator.begin({ amounts: problem.initial, effectSites: [] })
  const ends: number[] = []
  for (let k = 0; k < problem.doses; k++) {
    const segment: Segment = { start: k * problem.every, duration: problem.every, model, boluses, inputs }
    integrator.pass(segment)
    ends.push(integrator.state.amounts[problem.compared])
  }
  return ends
}
