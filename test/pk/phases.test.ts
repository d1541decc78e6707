import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { decrementTimes, timeToFall } from '../../src/pk/decrement'
import type { Model } from '../../src/pk/model'
import { type PhasesOfStretch, phasesOf } from '../../src/pk/phases'
import { expectWithin } from '../expectWithin'
import { Random } from '../laws/random'
import { mammillary, oneCompartment } from './subjects'

const precise = { relative: 1e-9 }

function phases(model: Model, rest: { periods?: number[]; until?: number } = {}): PhasesOfStretch {
  const { periods = [], until = 168 } = rest
  return phasesOf({ model, from: 0, to: until, until, periods, infusions: [] })
}

// Bourne DWA, "A First Course in Pharmacokinetics and Biopharmaceutics" (PHAR 7633 on-line course text, 2001-), self-test
// "micro to macro": the inputs are printed there; the numbers were computed from them with independent code.
test('K15: kel 0.16, k12 2.07, k21 1.52 /h, 42.5 L as exponents, coefficients and moments', () => {
  const volume = 42.5
  const clearance = 0.16 * volume
  const exchange = 2.07 * volume
  const found = phases(mammillary({ volumes: [volume, exchange / 1.52], clearance, exchanges: [exchange] }))
  const [alpha, beta] = found.phases
  expectWithin(alpha.eigenvalue, 3.68398452177, precise)
  expectWithin(beta.eigenvalue, 0.0660154782309, precise)
  expectWithin(250 * alpha.coefficient, 3.51836087128, precise)
  expectWithin(250 * beta.coefficient, 2.3639920699, precise)
  expectWithin(alpha.halfLife, 0.188151490991, precise)
  expectWithin(beta.halfLife, 10.4997676171, precise)
  expectWithin(found.clearance ?? Number.NaN, 6.8, precise)
  expectWithin(found.mrt ?? Number.NaN, 14.7615131579, precise)
  expectWithin(found.vss ?? Number.NaN, 100.378289474, precise)
  expectWithin(found.vz ?? Number.NaN, 103.006146168, precise)
  expectWithin(found.terminalHalfLife ?? Number.NaN, 10.4997676171, precise)
})

interface ThreeCompartments {
  readonly volumes: readonly number[]
  readonly clearance: number
  readonly exchanges: readonly number[]
  readonly ke0: number
}

// Minto CF et al. 1997 Anesthesiology 86:10-23 (abstract: parameters of the simple model), minutes. Numbers recomputed from
// them with independent code.
const minto: ThreeCompartments = { volumes: [4.98, 9.01, 6.54], clearance: 2.46, exchanges: [1.69, 0.065], ke0: 0.516 }

// Eleveld DJ et al. 2017 Anesthesiology 126:1005-1018 (abstract: reference individual, 35 years, 70 kg), minutes.
const eleveld: ThreeCompartments = { volumes: [5.81, 8.82, 5.03], clearance: 2.58, exchanges: [1.72, 0.124], ke0: 1.09 }

// Marsh B et al. 1991 Br J Anaesth 67:41-48 (quoted from memory), per kg, minutes.
const marsh: ThreeCompartments = {
  volumes: [0.228, (0.228 * 0.112) / 0.055, (0.228 * 0.0419) / 0.0033],
  clearance: 0.119 * 0.228,
  exchanges: [0.112 * 0.228, 0.0419 * 0.228],
  ke0: 0.26
}

test('K17: remifentanil (Minto 1997) as exponents, coefficients, volumes and mean residence time', () => {
  const found = phases(mammillary(minto))
  const rates = [0.932028632777, 0.102197145281, 0.00966796940069]
  const halves = [0.743697303048, 6.78245149269, 71.6952186992]
  const coefficients = [0.896857557452, 0.102577819727, 0.000564622821888]
  expect(found.phases).toHaveLength(3)
  found.phases.forEach((phase, i) => {
    expectWithin(phase.eigenvalue, rates[i], precise)
    expectWithin(phase.halfLife, halves[i], precise)
    expectWithin(phase.coefficient * 4.98, coefficients[i], precise)
    expectWithin(phase.shareOfAuc, (coefficients[i] / 4.98 / rates[i]) * 2.46, { relative: 2e-9 })
  })
  expect(found.rulingPhase).toBe(1)
  expectWithin(found.vss ?? Number.NaN, 20.53, { relative: 1e-13 })
  expectWithin(found.mrt ?? Number.NaN, 8.34552845528, precise)
  expectWithin(found.vz ?? Number.NaN, 254.448467723, precise)
  expectWithin(found.stiffness ?? Number.NaN, 0.932028632777 / 0.00966796940069, precise)
  expectWithin(found.longestExplicitStep ?? Number.NaN, 2 / 0.932028632777, precise)
  expect(found.explicitSteps).toBe(Math.ceil((168 * 0.932028632777) / 2))
})

test.each([
  [1, 0.903777699938],
  [10, 1.46169279805],
  [60, 1.98235118637],
  [180, 2.03409946907],
  [240, 2.04404861726],
  [480, 2.05553060831]
])('K17: after %s min of constant-rate infusion the concentration halves in %s min', (length, half) => {
  expectWithin(timeToFall(mammillary(minto), { kind: 'observed' }, length, 0.5) ?? Number.NaN, half, precise)
})

test('K20: remifentanil (Eleveld 2017) as exponents, volume, mean residence time and half-time after 180 min', () => {
  const model = mammillary(eleveld)
  const found = phases(model)
  const rates = [0.850197605876, 0.107568941645, 0.0233426609554]
  const halves = [0.815277737516, 6.44374826007, 29.6944372317]
  found.phases.forEach((phase, i) => {
    expectWithin(phase.eigenvalue, rates[i], precise)
    expectWithin(phase.halfLife, halves[i], precise)
  })
  expectWithin(found.vss ?? Number.NaN, 19.66, { relative: 1e-13 })
  expectWithin(found.mrt ?? Number.NaN, 7.62015503876, precise)
  expectWithin(timeToFall(model, { kind: 'observed' }, 180, 0.5) ?? Number.NaN, 2.26444664529, precise)
})

test('K21: propofol (Marsh 1991) as exponents, volume and half-times after 10, 60, 180, 480 min', () => {
  const model = mammillary(marsh)
  const found = phases(model)
  const rates = [0.298650292638, 0.030151110064, 0.00239859729778]
  const halves = [2.32093253429, 22.9891098235, 288.9802224]
  found.phases.forEach((phase, i) => {
    expectWithin(phase.eigenvalue, rates[i], precise)
    expectWithin(phase.halfLife, halves[i], precise)
  })
  expectWithin(found.vss ?? Number.NaN, 3.5872, precise)
  const times: readonly (readonly [number, number])[] = [
    [10, 3.23254408483],
    [60, 5.89559545059],
    [180, 8.08653632531],
    [480, 11.2445355101]
  ]
  for (const [length, half] of times) {
    expectWithin(
      timeToFall(model, { kind: 'observed' }, length, 0.5) ?? Number.NaN,
      half,
      precise,
      `after ${length} min`
    )
  }
})

// Kapila A et al. 1995 Anesthesiology 83:968-975 (abstract): measured 3.2 min, SD 0.9, after 3 h of remifentanil.
test('K23: the half-time after 180 min lies within two standard deviations of the measured one', () => {
  const half = timeToFall(mammillary(minto), { kind: 'observed' }, 180, 0.5) ?? Number.NaN
  expectWithin(half, 3.2, { absolute: 1.96 * 0.9 })
})

// Bourne, ch. 7.7: sums and products of the roots.
test('K18: sum, pair sum and product of the exponents of any three compartments are those of the rates', () => {
  const random = new Random(1801)
  for (let k = 0; k < 50; k++) {
    const volumes = [1, 2, 3].map(() => random.logBetween(0.1, 100))
    const [clearance, q2, q3] = [1, 2, 3].map(() => random.logBetween(0.01, 100))
    const [a, b, c] = phases(mammillary({ volumes, clearance, exchanges: [q2, q3] })).phases.map((p) => p.eigenvalue)
    const [v1, v2, v3] = volumes
    const [kel, k12, k21, k13, k31] = [clearance / v1, q2 / v1, q2 / v2, q3 / v1, q3 / v3]
    expectWithin(a + b + c, kel + k12 + k21 + k13 + k31, { relative: 1e-12 })
    const pairs = kel * k21 + kel * k31 + k13 * k21 + k12 * k31 + k21 * k31
    expectWithin(a * b + a * c + b * c, pairs, { relative: 1e-12 })
    expectWithin(a * b * c, kel * k21 * k31, { relative: 1e-12 })
  }
})

test('the coefficients sum to 1/V and the shares of area to 1, and moments agree with the sums', () => {
  const random = new Random(1802)
  for (let k = 0; k < 50; k++) {
    const volumes = [1, 2, 3, 4].map(() => random.logBetween(0.1, 100))
    const exchanges = [1, 2, 3].map(() => random.logBetween(0.01, 100))
    const found = phases(mammillary({ volumes, clearance: random.logBetween(0.01, 100), exchanges }), { periods: [12] })
    const sum = (of: (phase: (typeof found.phases)[number]) => number) =>
      found.phases.reduce((total, phase) => total + of(phase), 0)
    expectWithin(sum((phase) => phase.coefficient) * volumes[0], 1, { relative: 1e-13 })
    expectWithin(
      sum((phase) => phase.shareOfAuc),
      1,
      { relative: 1e-13 }
    )
    expectWithin(
      found.vss ?? Number.NaN,
      volumes.reduce((a, b) => a + b),
      { relative: 1e-12 }
    )
    const area = sum((phase) => phase.coefficient / phase.eigenvalue)
    expectWithin((found.clearance ?? Number.NaN) * area, 1, { relative: 1e-12 })
    expectWithin(
      found.accumulation[0].shares.reduce((a, b) => a + b),
      1,
      { relative: 1e-14 }
    )
  }
})

describe('what stands beside the disposition', () => {
  test('absorption is on a line of its own and is no phase', () => {
    const found = phases(oneCompartment({ volume: 30, k: 0.15, ka: 1 }))
    expect(found.phases).toHaveLength(1)
    expect(found.rulingPhase).toBe(0)
    expect(found.absorption).toEqual([{ name: 'depot', rate: 1, halfLife: Math.LN2, stages: 1, setsFinalSlope: false }])
    expect(found.absorptionSetsFinalSlope).toBeUndefined()
    expectWithin(found.stiffness ?? Number.NaN, 1 / 0.15, { relative: 1e-15 })
  })

  test('absorption slower than the disposition sets the final slope, and the terminal half-life stays that of the disposition', () => {
    const found = phases(oneCompartment({ volume: 30, k: 0.15, ka: 0.05 }))
    expectWithin(found.absorptionSetsFinalSlope ?? Number.NaN, Math.LN2 / 0.05, { relative: 1e-15 })
    expectWithin(found.terminalHalfLife ?? Number.NaN, Math.LN2 / 0.15, { relative: 1e-15 })
  })

  test('equal rates of a transit are one line with their number, and said to be defective', () => {
    const compartment = (name: string) => ({ name, column: 'transit', holds: 'drug' as const })
    const model: Model = {
      compartments: [
        compartment('depot'),
        compartment('stage 1'),
        compartment('stage 2'),
        { name: 'central', column: 'central', holds: 'drug', volume: 20 }
      ],
      transfers: [0, 1, 2].map((from) => ({ kind: 'first-order', from, to: from + 1, rate: 2 }) as const).concat(),
      effectSites: [],
      observed: 3,
      observations: []
    }
    const found = phases({
      ...model,
      transfers: [...model.transfers, { kind: 'first-order', from: 3, to: 'eliminated', rate: 0.1 }]
    })
    expect(found.absorption).toEqual([
      { name: 'depot', rate: 2, halfLife: Math.LN2 / 2, stages: 3, setsFinalSlope: false }
    ])
    expect(found.notes.join()).toContain('equal rates')
    expect(found.phases).toHaveLength(1)
  })

  test('the effect site counts for stiffness and is listed', () => {
    const found = phases(mammillary({ volumes: [5], clearance: 1, exchanges: [], ke0: 10 }))
    expectWithin(found.stiffness ?? Number.NaN, 50, { relative: 1e-14 })
    expect(found.effectSites.map(({ name, rate }) => [name, rate])).toEqual([['effect', 10]])
  })

  test('without a way out there are no moments, and every one says why', () => {
    const found = phases(mammillary({ volumes: [5, 9], clearance: 0, exchanges: [2] }))
    expect(found.phases).toEqual([])
    for (const name of ['clearance', 'vss', 'vz', 'mrt', 'terminalHalfLife', 'stiffness', 'phases', 'decrements']) {
      expect(found.why[name], name).toMatch(/never leaves/)
    }
  })

  test('a metabolite that drug does not return from is not part of the disposition', () => {
    const parent = mammillary({ volumes: [10, 20], clearance: 1, exchanges: [2] })
    const model: Model = {
      ...parent,
      compartments: [...parent.compartments, { name: 'metabolite', column: 'metabolite', holds: 'drug', volume: 8 }],
      transfers: [
        { kind: 'first-order', from: 0, to: 2, rate: 0.1 },
        ...parent.transfers.slice(1),
        { kind: 'first-order', from: 2, to: 'eliminated', rate: 0.01 }
      ]
    }
    const found = phases(model)
    expect(found.phases).toEqual(phases(parent).phases)
    expect(found.clearance).toBe(1)
    expectWithin(found.terminalHalfLife ?? Number.NaN, phases(parent).terminalHalfLife ?? Number.NaN, precise)
  })
})

describe('decrement times', () => {
  test('one compartment: ln(1/(1 - share)) / k, whatever the infusion', () => {
    for (const times of decrementTimes(oneCompartment({ volume: 10, k: 0.2 }), [3])) {
      expectWithin(times.by20 ?? Number.NaN, Math.log(1.25) / 0.2, { relative: 1e-12 })
      expectWithin(times.by50 ?? Number.NaN, Math.LN2 / 0.2, { relative: 1e-12 })
      expectWithin(times.by80 ?? Number.NaN, Math.log(5) / 0.2, { relative: 1e-12 })
      expect(times.own).toBe(times.infusion === 3)
    }
  })

  // Sums of exponentials in 32-digit arithmetic: test/reference/generate/pk_exposure.py.
  test('20, 50 and 80 % in plasma and at the effect site of remifentanil, minutes', () => {
    const { cases } = JSON.parse(readFileSync('test/reference/pk/exposure.json', 'utf8'))
    const model = mammillary(minto)
    for (const { site, infusion, falls } of cases.decrements) {
      const signal = site === 'plasma' ? ({ kind: 'observed' } as const) : ({ kind: 'effect-site', index: 0 } as const)
      ;[0.2, 0.5, 0.8].forEach((share, i) => {
        const time = timeToFall(model, signal, infusion, share) ?? Number.NaN
        expectWithin(time, falls[i], { relative: 1e-11 }, `${share} at ${site} after ${infusion} min`)
      })
    }
  })

  test("standard lengths and the regimen's own, for the observed compartment and each effect site", () => {
    const listed = decrementTimes(mammillary(minto), [0.5, 4])
    expect(listed.map(({ site, infusion }) => [site, infusion])).toEqual([
      ...[0.5, 1, 4, 12, 24].map((length) => ['V1', length]),
      ...[0.5, 1, 4, 12, 24].map((length) => ['effect', length])
    ])
    for (const { by20 = 0, by50 = 0, by80 = 0 } of listed) {
      expect(by20).toBeGreaterThan(0)
      expect(by50).toBeGreaterThan(by20)
      expect(by80).toBeGreaterThan(by50)
    }
  })
})
