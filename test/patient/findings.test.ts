import { describe, expect, test } from 'vitest'
import type { DrugModel } from '../../src/patient/drugModel'
import { againstStudied, modelFindings, weightFindings } from '../../src/patient/findings'
import { individual } from '../../src/patient/individual'
import { findingsOverTime, growingAges, type PersonFrom, unstableCreatinine } from '../../src/patient/overTime'
import type { Person } from '../../src/patient/person'
import { parameter, pw101, withNumbers, woman } from './pw101'

describe('against the studied range', () => {
  test('inside, covariate by covariate', () => {
    expect(againstStudied(pw101, woman).map(({ kind, covariate, text }) => [kind, covariate, text])).toEqual([
      ['inside studied', 'age', 'age 71 years is inside the studied range; studied: 18 to 85 years'],
      ['inside studied', 'weight', 'weight 58 kg is inside the studied range; studied: 45 to 110 kg'],
      [
        'inside studied',
        'creatinineClearance',
        'creatinine clearance 29.5 mL/min is inside the studied range; studied: 15 to 140 mL/min'
      ]
    ])
  })

  const ofWeight = (weight: number | undefined) => againstStudied(pw101, withNumbers(woman, { weight }))[1]!

  test.each([
    [150, 'weight 150 kg is 36 % above 110 kg, outside the studied range; studied: 45 to 110 kg'],
    [40, 'weight 40 kg is 11 % below 45 kg, outside the studied range; studied: 45 to 110 kg'],
    [110.04, 'weight 110.04 kg is less than 1 % above 110 kg, outside the studied range; studied: 45 to 110 kg'],
    [113, 'weight 113 kg is 2.7 % above 110 kg, outside the studied range; studied: 45 to 110 kg']
  ])('outside by how much: %d kg', (weight, text) => {
    expect(ofWeight(weight)).toEqual({ kind: 'outside studied', severity: 'caution', covariate: 'weight', text })
  })

  test.each([45, 110, 110 * (1 + 1e-12)])('%d kg is on the bound, which is inside', (weight) =>
    expect(ofWeight(weight).kind).toBe('inside studied')
  )

  test('a covariate that is lacking is not known, and never inside', () => {
    expect(ofWeight(undefined)).toEqual({
      kind: 'not known',
      severity: 'caution',
      covariate: 'weight',
      text: 'weight is not known (needs weight); studied: 45 to 110 kg'
    })
    const lacking = againstStudied(pw101, { numbers: {}, categories: {}, renalReplacement: 'none' })
    expect(lacking.map((finding) => finding.kind)).toEqual(['not known', 'not known', 'not known'])
  })

  test('categories', () => {
    const women: DrugModel = {
      ...pw101,
      studied: { description: 'women', ranges: [{ covariate: 'sex', categories: ['female'] }] }
    }
    expect(againstStudied(women, woman)[0]!.kind).toBe('inside studied')
    const man = againstStudied(women, { ...woman, sex: 'male' })[0]!
    expect(man.kind).toBe('outside studied')
    expect(man.text).toContain('sex male is not among female')
  })
})

describe('what else an individual carries', () => {
  const found = (drugModel: DrugModel, person: Person) => {
    const result = individual(drugModel, person, 'patient')
    if (!result.ok) throw new Error(result.issues.map((issue) => issue.message).join('\n'))
    return result.individual.findings
  }

  test('nothing but "inside" for a person inside', () => {
    expect(new Set(found(pw101, woman).map((finding) => finding.severity))).toEqual(new Set(['fine']))
  })

  test('a covariate that enters without a studied range', () => {
    const model: DrugModel = { ...pw101, studied: { description: 'invented', ranges: [] } }
    expect(found(model, woman).map(({ kind, covariate }) => [kind, covariate])).toEqual([
      ['range not stated', 'creatinineClearance'],
      ['range not stated', 'weight']
    ])
  })

  test('the edge of an equation is a caution, a directly given value a note', () => {
    const thin = withNumbers(woman, { serumCreatinine: 0.4 })
    expect(
      found(pw101, thin)
        .filter(({ kind }) => kind === 'edge')
        .map(({ severity }) => severity)
    ).toEqual(['caution'])
    const given = withNumbers(woman, { creatinineClearance: 3 })
    expect(
      found(pw101, given)
        .filter(({ kind }) => kind === 'instead')
        .map(({ severity }) => severity)
    ).toEqual(['note'])
  })

  test('a bound of `valid` that cannot be checked', () => {
    const model: DrugModel = { ...pw101, valid: [{ covariate: 'albumin', low: 20 }] }
    expect(
      found(model, woman)
        .filter(({ kind }) => kind === 'not known')
        .map(({ text }) => text)
    ).toEqual(["albumin is not known, and the model's equations hold only for from 20 g/L"])
  })

  test('an apparent model, assumed numbers and an abstract', () => {
    const model: DrugModel = {
      ...pw101,
      apparent: true,
      source: { kind: 'published', citation: 'x', read: 'abstract', cautions: ['adults only'] },
      parameters: [{ ...parameter('ka', '/h', [{ value: 1, factors: [] }]), assumed: { because: 'not printed' } }]
    }
    expect(modelFindings(model).map(({ kind, severity }) => [kind, severity])).toEqual([
      ['apparent', 'note'],
      ['assumed', 'caution'],
      ['source', 'caution'],
      ['source', 'caution']
    ])
    expect(modelFindings(pw101)).toEqual([])
  })

  test('the ideal weight of a dose below 152.4 cm', () => {
    const short = withNumbers(woman, { height: 145 })
    expect(weightFindings(['ideal', 'ideal'], short, pw101).map(({ kind }) => kind)).toEqual(['edge'])
    expect(weightFindings(['actual'], short, pw101)).toEqual([])
  })
})

const course = (...values: readonly (readonly [number, number])[]): readonly PersonFrom[] =>
  values.map(([from, serumCreatinine]) => ({ from, person: withNumbers(woman, { serumCreatinine }) }))

describe('unstable creatinine (KDIGO 2012: 0.3 mg/dL within 48 h, or 1.5 times within 7 d)', () => {
  test.each([
    ['0.3 in 48 h', course([0, 1.6], [72, 1.9]), [72]],
    ['0.3 from umol/L', course([0, 100 / 88.4], [24, 126.52 / 88.4]), [24]],
    ['a little less than 0.3', course([0, 1.6], [72, 1.899]), []],
    ['0.3 by small steps within 48 h', course([0, 1.6], [24, 1.7], [48, 1.8], [71, 1.9]), [71]],
    [
      '0.3 by steps, but the lowest was over before the 48 h began',
      course([0, 1.6], [24, 1.7], [48, 1.8], [72, 1.9]),
      []
    ],
    ['1.5 times in 7 d', course([0, 0.5], [40, 0.6], [100, 0.75]), [100]],
    ['1.5 times, but over 7 d', course([0, 0.5], [1, 0.6], [170, 0.75]), []],
    ['a fall of 0.3', course([0, 1.9], [12, 1.6]), [12]],
    ['a fall to two thirds', course([0, 0.75], [60, 0.6], [120, 0.5]), [120]],
    ['nothing changes', course([0, 1.6], [24, 1.6]), []]
  ] as const)('%s', (_, people, times) => {
    const findings = unstableCreatinine(pw101, people)
    expect(findings.map(({ text }) => Number(/at ([\d.]+) h/.exec(text)?.[1]))).toEqual([...times])
  })

  test('says from what to what, and which computed covariate assumes a stable value', () => {
    expect(unstableCreatinine(pw101, course([0, 1.6], [72, 1.9]))).toEqual([
      {
        kind: 'unstable creatinine',
        severity: 'caution',
        covariate: 'serumCreatinine',
        text: 'serum creatinine is unstable at 72 h: from 1.6 to 1.9 mg/dL within 48 h, a rise of at least 0.3; the creatinine clearance computed from it assumes a stable value'
      }
    ])
  })

  test('a stretch that changes something else is no second finding', () => {
    const people = course([0, 1.6], [72, 1.9], [80, 1.9])
    expect(unstableCreatinine(pw101, people)).toHaveLength(1)
  })
})

describe('ages that grow by more than 5 % without a change', () => {
  const neonate = (postnatalDays: number) =>
    withNumbers(woman, { age: undefined, gestationalAge: 40, postnatalAge: postnatalDays / 365.25 })

  test('none in an adult over two weeks', () => {
    expect(growingAges(pw101, [{ from: 0, person: woman }], 336)).toEqual([])
  })
  test('a neonate of 10 days over 12 h not, over 13 h', () => {
    const from0 = [{ from: 0, person: neonate(10) }]
    expect(growingAges(pw101, from0, 12)).toEqual([])
    expect(growingAges(pw101, from0, 13).map(({ kind, covariate }) => [kind, covariate])).toEqual([
      ['growing age', 'postnatalAge']
    ])
  })
  test('not where changes write the growth', () => {
    const days = [0, 1, 2].map((day) => ({ from: day * 12, person: neonate(10 + day / 2) }))
    expect(growingAges(pw101, days, 36)).toEqual([])
    const other = [0, 1, 2].map((day) => ({ from: day * 12, person: withNumbers(neonate(10), { weight: 3 + day }) }))
    expect(growingAges(pw101, other, 36)).toHaveLength(1)
  })
  test('from birth on', () => {
    expect(findingsOverTime(pw101, [{ from: 0, person: neonate(0) }], 1).map(({ kind }) => kind)).toEqual([
      'growing age'
    ])
  })
})
