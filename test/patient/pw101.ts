import type { DrugModel, Parameter } from '../../src/patient/drugModel'
import type { Person } from '../../src/patient/person'

const as = (unit: string, times = 1, per = 1) => ({ unit, times, per })
export const kg = as('kg')
export const mlPerMin = as('mL/min', 50, 3)

export function parameter(name: string, unit: string, typical: Parameter['typical']): Parameter {
  return { name, unit, toCanonical: { times: 1, per: 1 }, typical }
}

/** An invented drug: two compartments and a depot, clearance by Cockcroft-Gault. */
export const pw101: DrugModel = {
  id: 'pw-101',
  title: 'PW-101, two compartments (invented)',
  drug: { name: 'PW-101', moiety: 'free base', matrix: 'plasma', products: [], limits: [] },
  apparent: false,
  source: { kind: 'invented', citation: 'made up for demonstration', cautions: [] },
  studied: {
    subjects: 40,
    description: 'invented adults',
    ranges: [
      { covariate: 'age', low: 18, high: 85 },
      { covariate: 'weight', low: 45, high: 110 },
      { covariate: 'creatinineClearance', low: (15 * 3) / 50, high: (140 * 3) / 50 }
    ]
  },
  covariates: { creatinineClearance: { equation: 'cockcroft-gault', weight: 'actual' } },
  declared: {},
  valid: [],
  parameters: [
    parameter('CL', 'L/h', [
      { value: 0.35, factors: [] },
      {
        value: 3.9,
        factors: [{ kind: 'power', covariate: 'creatinineClearance', in: mlPerMin, reference: 100, exponent: 1 }]
      }
    ]),
    parameter('V1', 'L', [
      { value: 21, factors: [{ kind: 'power', covariate: 'weight', in: kg, reference: 70, exponent: 1 }] }
    ]),
    parameter('Q', 'L/h', [{ value: 9, factors: [] }]),
    parameter('V2', 'L', [{ value: 38, factors: [] }]),
    parameter('ka', '/h', [{ value: 0.9, factors: [] }]),
    parameter('F', '1', [{ value: 0.62, factors: [] }]),
    parameter('lag', 'h', [{ value: 0.25, factors: [] }])
  ],
  compartments: [
    { id: 'depot', observed: false },
    { id: 'central', volume: 'V1', observed: true },
    { id: 'peripheral', volume: 'V2', observed: false }
  ],
  transfers: [
    { kind: 'first-order', from: 'depot', to: 'central', rate: 'ka' },
    { kind: 'exchange', between: ['central', 'peripheral'], clearance: 'Q' },
    { kind: 'clearance', from: 'central', clearance: 'CL' }
  ],
  routes: [
    { name: 'intravenous', input: 'infusion', parts: [{ into: 'central', fraction: 1 }] },
    { name: 'oral', input: 'bolus', bioavailability: 'F', lag: 'lag', parts: [{ into: 'depot', fraction: 1 }] }
  ],
  observations: []
}

/** A woman of 71 years, 58 kg, 162 cm, creatinine 1.6 mg/dL. */
export const woman: Person = {
  sex: 'female',
  numbers: { age: 71, weight: 58, height: 162, serumCreatinine: 1.6 },
  categories: {},
  renalReplacement: 'none'
}

/** A person with some numbers replaced; `undefined` takes one away. */
export function withNumbers(person: Person, numbers: Readonly<Record<string, number | undefined>>): Person {
  const next: Record<string, number> = {}
  for (const [name, value] of Object.entries({ ...person.numbers, ...numbers }))
    if (value !== undefined) next[name] = value
  return { ...person, numbers: next }
}
