import { describe, expect, test } from 'vitest'
import type { DrugModel, DrugTransfer, Parameter } from '../../src/patient/drugModel'
import { type Individual, individual } from '../../src/patient/individual'
import type { Person } from '../../src/patient/person'
import { isLinear } from '../../src/pk/model'
import { expectWithin } from '../expectWithin'
import { kg, parameter, pw101, withNumbers, woman } from './pw101'

function made(drugModel: DrugModel, person: Person): Individual {
  const result = individual(drugModel, person, 'patient')
  if (!result.ok) throw new Error(result.issues.map((issue) => `${issue.path}: ${issue.message}`).join('\n'))
  return result.individual
}

function issuesOf(drugModel: DrugModel, person: Person) {
  const result = individual(drugModel, person, 'patient')
  return result.ok ? [] : result.issues
}

const constant = (name: string, unit: string, value: number): Parameter =>
  parameter(name, unit, [{ value, factors: [] }])

/** PW-101 with other transfers and further parameters. */
function rebuilt(change: Partial<DrugModel>, more: readonly Parameter[] = []): DrugModel {
  return { ...pw101, parameters: [...pw101.parameters, ...more], ...change }
}

describe('the PW-101 patient', () => {
  // Reference: distribution-check values of PW-101 in the woman of 71 years, 30 digits, computed independently.
  const { parameters, covariates, subject } = made(pw101, woman)

  test('clearance follows from Cockcroft-Gault with the actual weight', () => {
    const clearance = covariates.find((covariate) => covariate.name === 'creatinineClearance')
    expectWithin((Number(clearance?.value) * 50) / 3, 29.528645833333332, { relative: 1e-12 })
    expect(clearance?.obtained).toEqual({ kind: 'computed', by: 'Cockcroft-Gault with actual weight' })
    expectWithin(parameters.get('CL')!.value, 1.5016171875, { relative: 1e-12 })
    expectWithin(parameters.get('V1')!.value, 17.4, { relative: 1e-12 })
  })

  test('exchange and clearance become first-order arrows, divided by each volume', () => {
    expect(isLinear(subject.model)).toBe(true)
    expect(subject.model.compartments.map((compartment) => compartment.name)).toEqual([
      'depot',
      'central',
      'peripheral'
    ])
    expect(subject.model.observed).toBe(1)
    const rate = (from: number, to: number | 'eliminated') => {
      const arrow = subject.model.transfers.find(
        (transfer) => transfer.kind === 'first-order' && transfer.from === from && transfer.to === to
      )
      return arrow?.kind === 'first-order' ? arrow.rate : Number.NaN
    }
    expect(rate(0, 1)).toBe(0.9)
    expectWithin(rate(1, 2), 9 / 17.4, { relative: 1e-15 })
    expectWithin(rate(2, 1), 9 / 38, { relative: 1e-15 })
    expectWithin(rate(1, 'eliminated'), 1.5016171875 / 17.4, { relative: 1e-12 })
    expect(subject.model.transfers).toHaveLength(4)
  })

  test('routes carry bioavailability and lag, 1 and 0 where the file names none', () => {
    expect(subject.routes).toEqual([
      { name: 'intravenous', input: 'infusion', bioavailability: 1, lag: 0, parts: [{ into: 1, fraction: 1, lag: 0 }] },
      { name: 'oral', input: 'bolus', bioavailability: 0.62, lag: 0.25, parts: [{ into: 0, fraction: 1, lag: 0 }] }
    ])
  })

  test('every weight by which a dose may be reckoned is there', () => {
    expect(Object.keys(subject.weights)).toEqual([
      'actual',
      'ideal',
      'adjusted',
      'lean',
      'actualIfBelowIdeal',
      'adjustedAbove120PercentIdeal'
    ])
    expect(subject.weights.actual).toBe(58)
    // 45.5 + 2.3 (162 - 152.4) / 2.54, Devine 1974.
    expectWithin(subject.weights.ideal!, 45.5 + (2.3 * 9.6) / 2.54, { relative: 1e-12 })
    expectWithin(subject.surfaceArea!, Math.sqrt((58 * 162) / 3600), { relative: 1e-15 })
    expect(subject.dosingWeight).toBeUndefined()
  })

  test('the dosing weight enters doses and no covariate relation', () => {
    const dosed = made(pw101, { ...woman, dosingWeight: 100 })
    expect(dosed.subject.dosingWeight).toBe(100)
    expect(dosed.parameters.get('V1')!.value).toBe(parameters.get('V1')!.value)
    expect(dosed.subject.weights.actual).toBe(58)
  })

  test('a surface area given directly is the one by which doses are reckoned', () => {
    expect(made(pw101, withNumbers(woman, { bodySurfaceArea: 1.9 })).subject.surfaceArea).toBe(1.9)
  })
})

describe('what is missing is named with who needs it, and nothing is put in its place', () => {
  test('a typed covariate', () => {
    const issues = issuesOf(pw101, withNumbers(woman, { weight: undefined }))
    expect(issues).toEqual([
      {
        path: 'patient.weight',
        message:
          'weight is missing: the creatinine clearance of CL (Cockcroft-Gault with actual weight) needs it, unless creatinineClearance is given directly; V1 needs it'
      }
    ])
  })

  test('a postmenstrual age, with the two ages that would give it', () => {
    const maturing = parameter('CL', 'L/h', [
      {
        value: 5,
        factors: [
          {
            kind: 'maturation',
            covariate: 'postmenstrualAge',
            in: { unit: 'wk', times: 1, per: 1 },
            half: 47.7,
            exponent: 3.4
          }
        ]
      }
    ])
    const model = { ...pw101, parameters: [maturing, ...pw101.parameters.slice(1)] }
    expect(issuesOf(model, woman)).toEqual([
      {
        path: 'patient.postmenstrualAge',
        message: 'postmenstrual age is missing: CL needs it; gestational and postnatal age together give it'
      }
    ])
  })

  test('several at once, each on a line of its own', () => {
    const nobody: Person = { numbers: {}, categories: {}, renalReplacement: 'none' }
    expect(issuesOf(pw101, nobody).map((issue) => issue.path)).toEqual([
      'patient.sex',
      'patient.age',
      'patient.serumCreatinine',
      'patient.weight'
    ])
  })

  test('a creatinine clearance given directly needs no creatinine, age or sex', () => {
    const person: Person = {
      numbers: { weight: 70, creatinineClearance: 6 },
      categories: {},
      renalReplacement: 'none'
    }
    expectWithin(made(pw101, person).parameters.get('CL')!.value, 4.25, { relative: 1e-15 })
  })

  test('a child has no Cockcroft-Gault, and the reason is said', () => {
    const issues = issuesOf(pw101, withNumbers(woman, { age: 17.9 }))
    expect(issues.map((issue) => issue.path)).toEqual(['patient.creatinineClearance'])
    expect(issues[0]!.message).toContain('Cockcroft-Gault holds from 18 years')
    expect(issues[0]!.message).toContain('give it directly as creatinineClearance')
  })

  test.each(['intermittent', 'continuous'] as const)('under %s renal replacement no clearance is computed', (kind) => {
    const issues = issuesOf(pw101, { ...woman, renalReplacement: kind })
    expect(issues.map((issue) => issue.path)).toEqual(['patient.creatinineClearance'])
    expect(issues[0]!.message).toContain('residual clearance is given directly')
    const given = made(pw101, { ...withNumbers(woman, { creatinineClearance: (8 * 3) / 50 }), renalReplacement: kind })
    expectWithin(given.parameters.get('CL')!.value, 0.35 + 3.9 * 0.08, { relative: 1e-12 })
  })

  test('ages that contradict one another are an issue whatever the model uses', () => {
    const issues = issuesOf(
      pw101,
      withNumbers(woman, { age: undefined, gestationalAge: 30, postnatalAge: 28 / 365.25, postmenstrualAge: 36 })
    )
    expect(issues.map((issue) => issue.path)).toContain('patient.postmenstrualAge')
  })
})

describe('a parameter that cannot be is an issue naming parameter and covariates', () => {
  const broken = (name: string, unit: string, typical: Parameter['typical']): DrugModel => ({
    ...pw101,
    parameters: pw101.parameters.map((each) => (each.name === name ? parameter(name, unit, typical) : each))
  })

  test('a clearance that falls below 0', () => {
    const model = broken('CL', 'L/h', [
      { value: 1, factors: [] },
      { value: -0.05, factors: [{ kind: 'power', covariate: 'weight', in: kg, reference: 1, exponent: 1 }] }
    ])
    expect(issuesOf(model, woman)).toEqual([
      { path: 'patient', message: 'CL comes out as -1.9 L/h with weight 58 kg: a clearance must be above 0' }
    ])
  })

  test.each([
    ['V1', 'L', 0, 'a volume must be above 0'],
    ['CL', 'L/h', 0, 'a clearance must be above 0'],
    ['ka', '/h', 0, 'a rate must be above 0'],
    ['F', '1', 0, 'a bioavailability must be above 0 and at most 1'],
    ['F', '1', 1.01, 'a bioavailability must be above 0 and at most 1'],
    ['lag', 'h', -0.1, 'a lag time must be 0 or above'],
    ['Q', 'L/h', Number.POSITIVE_INFINITY, 'not a finite number']
  ])('%s in %s of %d', (name, unit, value, reason) => {
    const issues = issuesOf(broken(name, unit, [{ value, factors: [] }]), woman)
    expect(issues).toHaveLength(1)
    expect(issues[0]!.message).toContain(`${name} comes out as`)
    expect(issues[0]!.message).toContain(reason)
  })

  test('a lag of 0 and a bioavailability of 1 can be', () => {
    expect(issuesOf(broken('lag', 'h', [{ value: 0, factors: [] }]), woman)).toEqual([])
    expect(issuesOf(broken('F', '1', [{ value: 1, factors: [] }]), woman)).toEqual([])
  })

  test('a covariate outside valid is an issue, on the bound it is not', () => {
    const model: DrugModel = { ...pw101, valid: [{ covariate: 'weight', low: 58, high: 100 }] }
    expect(issuesOf(model, woman)).toEqual([])
    const issues = issuesOf(model, withNumbers(woman, { weight: 120 }))
    expect(issues.map((issue) => issue.path)).toEqual(['patient.weight'])
    expect(issues[0]!.message).toContain('weight 120 kg is 20 % above 100 kg')
  })
})

describe('transfers written out', () => {
  test('a transit of n stages is n compartments after its start and n + 1 equal arrows, sharing one column', () => {
    const transfers: DrugTransfer[] = [
      { kind: 'transit', from: 'depot', to: 'central', stages: 3, rate: 'ktr' },
      { kind: 'elimination', from: 'central', rate: 'ke' }
    ]
    const model = rebuilt({ transfers }, [constant('ktr', '/h', 2), constant('ke', '/h', 0.1)])
    const { compartments, transfers: arrows, observed } = made(model, woman).subject.model
    expect(compartments.map((compartment) => [compartment.name, compartment.column])).toEqual([
      ['depot', 'depot'],
      ['depot_central_transit_1', 'depot_central_transit'],
      ['depot_central_transit_2', 'depot_central_transit'],
      ['depot_central_transit_3', 'depot_central_transit'],
      ['central', 'central'],
      ['peripheral', 'peripheral']
    ])
    expect(observed).toBe(4)
    expect(arrows).toEqual([
      ...[0, 1, 2, 3].map((from) => ({ kind: 'first-order', from, to: from + 1, rate: 2 })),
      { kind: 'first-order', from: 4, to: 'eliminated', rate: 0.1 }
    ])
    expect(made(model, woman).subject.routes.map((route) => route.parts[0]!.into)).toEqual([4, 0])
  })

  test('an effect site is no compartment of the body', () => {
    const model = rebuilt(
      {
        compartments: [{ id: 'site', observed: false }, ...pw101.compartments],
        transfers: [...pw101.transfers, { kind: 'effect', from: 'central', to: 'site', rate: 'ke0' }]
      },
      [constant('ke0', '/h', 3)]
    )
    const out = made(model, woman).subject.model
    expect(out.compartments.map((compartment) => compartment.name)).toEqual(['depot', 'central', 'peripheral'])
    expect(out.effectSites).toEqual([{ name: 'site', source: 1, rate: 3 }])
    expect(out.transfers).toHaveLength(4)
  })

  test('an exchange by rates keeps them, there and back', () => {
    const model = rebuilt(
      { transfers: [{ kind: 'exchange', between: ['central', 'peripheral'], rates: ['k12', 'k21'] }] },
      [constant('k12', '/h', 0.5), constant('k21', '/h', 0.2)]
    )
    expect(made(model, woman).subject.model.transfers).toEqual([
      { kind: 'first-order', from: 1, to: 2, rate: 0.5 },
      { kind: 'first-order', from: 2, to: 1, rate: 0.2 }
    ])
  })

  test('an exchange clearance with a compartment without volume is an issue at the transfer', () => {
    const model = rebuilt({ transfers: [{ kind: 'exchange', between: ['depot', 'central'], clearance: 'Q' }] })
    expect(issuesOf(model, woman)).toEqual([
      { path: 'model.transfers[0]', message: 'compartment depot needs a volume for this transfer' }
    ])
  })

  test('saturable, binding and production keep their numbers; a binding target holds no drug', () => {
    const model = rebuilt(
      {
        compartments: [
          { id: 'central', volume: 'V1', observed: true },
          { id: 'target', observed: false },
          { id: 'complex', observed: false }
        ],
        transfers: [
          { kind: 'saturable', from: 'central', maximumRate: 'Vmax', halfSaturation: 'Km', hill: 'h' },
          {
            kind: 'binding',
            drug: 'central',
            target: 'target',
            complex: 'complex',
            association: 'kon',
            dissociation: 'koff',
            approximation: 'none'
          },
          { kind: 'production', into: 'target', rate: 'ksyn' },
          { kind: 'elimination', from: 'complex', rate: 'kint' }
        ],
        routes: [pw101.routes[0]!],
        observations: [{ id: 'total', of: ['central', 'complex'] }]
      },
      [
        constant('Vmax', 'mg/h', 20),
        constant('Km', 'mg/L', 5),
        constant('h', '1', 1.5),
        constant('kon', 'L/mg/h', 0.3),
        constant('koff', '/h', 0.01),
        constant('ksyn', 'mg/h', 0.2),
        constant('kint', '/h', 0.04)
      ]
    )
    const out = made(model, woman).subject.model
    expect(out.compartments.map((compartment) => compartment.holds)).toEqual(['drug', 'target', 'drug'])
    expect(out.transfers).toEqual([
      { kind: 'saturable', from: 0, to: 'eliminated', maximumRate: 20, halfSaturation: 5, hill: 1.5 },
      {
        kind: 'binding',
        drug: 0,
        target: 1,
        complex: 2,
        association: 0.3,
        dissociation: 0.01,
        approximation: 'none'
      },
      { kind: 'production', into: 1, rate: 0.2 },
      { kind: 'first-order', from: 2, to: 'eliminated', rate: 0.04 }
    ])
    expect(out.observations).toEqual([{ name: 'total', of: [0, 2], volume: out.compartments[0]!.volume }])
  })

  test('a Hill exponent is 1 where the file names none, and a number stands for itself', () => {
    const more = [constant('Vmax', 'mg/h', 20), constant('Km', 'mg/L', 5)]
    const hillOf = (hill?: number) => {
      const saturable = { kind: 'saturable', from: 'central', maximumRate: 'Vmax', halfSaturation: 'Km' } as const
      const transfers: DrugTransfer[] = [{ ...saturable, to: 'peripheral', ...(hill === undefined ? {} : { hill }) }]
      return made(rebuilt({ transfers }, more), woman).subject.model.transfers
    }
    expect(hillOf()).toEqual([{ kind: 'saturable', from: 1, to: 2, maximumRate: 20, halfSaturation: 5, hill: 1 }])
    expect(hillOf(2)[0]).toMatchObject({ hill: 2 })
  })

  test.each([
    ['maximum rate', 'Vmax', /Vmax comes out as 0 mg\/h: a maximum rate must be above 0/],
    ['half-saturation', 'Km', /Km comes out as 0 mg\/L: a half-saturation must be above 0/]
  ])('a %s of 0 in this person is an issue naming it', (_, zero, message) => {
    const more = [constant('Vmax', 'mg/h', zero === 'Vmax' ? 0 : 20), constant('Km', 'mg/L', zero === 'Km' ? 0 : 5)]
    const transfers: DrugTransfer[] = [
      { kind: 'saturable', from: 'central', maximumRate: 'Vmax', halfSaturation: 'Km' }
    ]
    const issues = issuesOf(rebuilt({ transfers }, more), woman)
    expect(issues.map((issue) => issue.message).join()).toMatch(message)
  })

  test('a maximum rate contains the bioavailability where the model is apparent; a half-saturation does not', () => {
    const transfers: DrugTransfer[] = [
      { kind: 'saturable', from: 'central', maximumRate: 'Vmax', halfSaturation: 'Km' }
    ]
    const more = [constant('Vmax', 'mg/h', 20), constant('Km', 'mg/L', 5)]
    const { parameters } = made(rebuilt({ transfers, apparent: true, routes: [] }, more), woman)
    expect(['Vmax', 'Km', 'V1'].map((name) => parameters.get(name)?.label)).toEqual(['Vmax/F', 'Km', 'V1/F'])
  })

  test('a target that is produced faster than saturable paths can lose it is an issue', () => {
    const model = (rate: number) =>
      rebuilt(
        {
          compartments: [
            { id: 'central', volume: 'V1', observed: true },
            { id: 'target', volume: 'V1', observed: false },
            { id: 'complex', volume: 'V1', observed: false }
          ],
          transfers: [
            {
              kind: 'binding',
              drug: 'central',
              target: 'target',
              complex: 'complex',
              association: 'kon',
              dissociation: 'koff',
              approximation: 'none'
            },
            { kind: 'production', into: 'target', rate: 'ksyn' },
            { kind: 'saturable', from: 'target', maximumRate: 'Vmax', halfSaturation: 'Km' },
            { kind: 'clearance', from: 'central', clearance: 'CL' }
          ],
          routes: []
        },
        [
          constant('Vmax', 'mg/h', 2),
          constant('Km', 'mg/L', 5),
          constant('kon', 'L/mg/h', 0.3),
          constant('koff', '/h', 0.01),
          constant('ksyn', 'mg/h', rate)
        ]
      )
    expect(issuesOf(model(1.9), woman)).toEqual([])
    expect(issuesOf(model(2), woman)).toEqual([
      {
        path: 'model.transfers[1]',
        message:
          'the target target is produced at 2 mg/h and can be lost at 2 mg/h at most: it has no drug-free steady state'
      }
    ])
  })

  test('an observation over different volumes is an issue', () => {
    const model = rebuilt({ observations: [{ id: 'both', of: ['central', 'peripheral'] }] })
    expect(issuesOf(model, woman).map((issue) => issue.path)).toEqual(['model.observations[0]'])
  })

  test('the parts of a route must sum to 1', () => {
    const parts = [
      { into: 'depot', fraction: 'share' },
      { into: 'central', fraction: 0.5, lag: 'lag', over: 'release' }
    ]
    const model = (share: number) =>
      rebuilt({ routes: [{ name: 'mixed', input: 'bolus', parts }] }, [
        constant('share', '1', share),
        constant('release', 'h', 6)
      ])
    expect(made(model(0.5), woman).subject.routes[0]!.parts).toEqual([
      { into: 0, fraction: 0.5, lag: 0 },
      { into: 1, fraction: 0.5, lag: 0.25, over: 6 }
    ])
    expect(issuesOf(model(0.4), woman)[0]!.message).toContain('must sum to 1')
  })

  test('an apparent model labels its clearances and volumes /F', () => {
    const { parameters } = made({ ...pw101, apparent: true, routes: [pw101.routes[1]!] }, woman)
    expect([...parameters.values()].map((each) => each.label)).toEqual([
      'CL/F',
      'V1/F',
      'Q/F',
      'V2/F',
      'ka',
      'F',
      'lag'
    ])
  })
})
