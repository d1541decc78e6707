import { describe, expect, test } from 'vitest'
import { readStudy } from '../../src/study/file/readStudy'
import type { Study } from '../../src/study/study'
import { multipleOf } from '../../src/units/spacing'
import { type Json, model, put, q, shippedModel, study } from './example'

function read(content: Json): Study {
  const reading = readStudy(JSON.stringify(content), shippedModel)
  if (!reading.ok) throw new Error(JSON.stringify(reading.issues))
  return reading.study
}

const lines = (content: Json) => read(content).regimens[0]!.lines

describe('doses become canonical', () => {
  test('per kg, capped, over a time', () => {
    expect(lines(study())[0]).toEqual({
      route: 'intravenous',
      amount: { value: 20, per: 'kg' },
      over: 2,
      moietyFraction: 1,
      atMost: 2000,
      at: 0,
      exceptions: []
    })
  })

  test('repeated, with exceptions', () => {
    expect(lines(study())[1]).toEqual({
      route: 'intravenous',
      amount: { value: 750, per: 'dose' },
      over: 1,
      moietyFraction: 1,
      at: 24,
      every: { value: 24, times: 1, per: 1 },
      count: 6,
      exceptions: [
        { number: 2, missed: true },
        { number: 3, lateBy: 3 },
        { number: 4, stoppedAfter: 20 / 60 }
      ]
    })
  })

  test.each([
    [q(0.5, 'g'), 500, 'dose'],
    [q(250, 'ug'), 0.25, 'dose'],
    [q(2, 'mmol'), 904.6, 'dose'],
    [q(1.5, 'g/m2'), 1500, 'm2'],
    [q(30, 'ug/kg'), 0.03, 'kg']
  ] as const)('an amount of %o', (amount, value, per) => {
    expect(lines(put(study(), 'regimens[0].doses[3].amount', amount))[3]?.amount).toEqual({ value, per })
  })

  test.each([
    [q(2, 'mg/min'), 120, 'dose'],
    [q(1, 'ug/kg/min'), 0.06, 'kg'],
    [q(50, 'mg/m2/h'), 50, 'm2']
  ] as const)('a rate of %o', (rate, value, per) => {
    expect(lines(put(study(), 'regimens[0].doses[2].rate', rate))[2]?.rate).toEqual({ value, per })
  })

  test('a product brings its share of moiety', () => {
    const content = put(study(), 'model', put(model('pw-101'), 'drug.products', [{ name: 'salt', fraction: 0.92 }]))
    for (let i = 0; i < 4; i++) put(content, `regimens[0].doses[${i}].product`, 'salt')
    expect(lines(content).map((line) => line.moietyFraction)).toEqual([0.92, 0.92, 0.92, 0.92])
  })

  test('a spacing stays in the unit typed', () => {
    const [, line] = lines(put(study(), 'regimens[0].doses[1].every', q(0.1, 'd')))
    expect(line?.every).toEqual({ value: 0.1, times: 24, per: 1 })
    expect(multipleOf(line!.every!, 30)).toBe(72)
  })

  test('reasons stand by the position of the line', () => {
    const { reasons } = read(put(study(), 'regimens[0].doses[2].reason', 'loading')).regimens[0]!
    expect(reasons).toEqual([undefined, undefined, 'loading', undefined])
  })
})

describe('a patient becomes a person per stretch of time', () => {
  test('with everything typed, over what was known before', () => {
    const { people } = read(study())
    expect(people).toEqual([
      {
        from: 0,
        path: 'patient',
        person: {
          sex: 'female',
          numbers: { age: 71, weight: 58, height: 162, serumCreatinine: 1.6 },
          categories: {},
          renalReplacement: 'none'
        },
        typed: { age: q(71, 'a'), weight: q(58, 'kg'), height: q(162, 'cm'), serumCreatinine: q(1.6, 'mg/dL') }
      },
      {
        from: 72,
        path: 'patient.changes[0]',
        person: {
          sex: 'female',
          numbers: { age: 71, weight: 58, height: 162, serumCreatinine: 1.9 },
          categories: {},
          renalReplacement: 'none'
        },
        typed: { serumCreatinine: q(1.9, 'mg/dL') }
      }
    ])
  })

  test('in canonical units, creatinine by 88.4 whatever the molar mass of the drug', () => {
    const content = put(study(), 'patient.serumCreatinine', q(88.4, 'umol/L'))
    put(content, 'patient.age', q(852, 'mo'))
    put(content, 'patient.height', q(1.62, 'm'))
    put(content, 'patient.weight', q(58000, 'g'))
    put(content, 'patient.dosingWeight', q(55, 'kg'))
    const { person } = read(content).people[0]!
    expect(person.numbers).toEqual({ age: 71, weight: 58, height: 162, serumCreatinine: 1 })
    expect(person.dosingWeight).toBe(55)
  })

  test('changes in the order of their times, and one at 0 from the start', () => {
    const content = put(study(), 'patient.changes', [
      { at: q(2, 'd'), weight: q(60, 'kg') },
      { at: q(0, 'h'), serumCreatinine: q(2, 'mg/dL') }
    ])
    expect(
      read(content).people.map(({ from, path, person }) => [
        from,
        path,
        person.numbers.weight,
        person.numbers.serumCreatinine
      ])
    ).toEqual([
      [0, 'patient.changes[1]', 58, 2],
      [48, 'patient.changes[0]', 60, 2]
    ])
  })

  test('a covariate given directly may be given anew with the change of its input', () => {
    const content = put(study(), 'patient.creatinineClearance', q(30, 'mL/min'))
    put(content, 'patient.changes[0].creatinineClearance', q(20, 'mL/min'))
    expect(read(content).people.map(({ person }) => person.numbers.creatinineClearance)).toEqual([1.8, 1.2])
  })

  test('a covariate given directly does not mind a change of what it is not computed from', () => {
    const content = put(study(), 'patient.creatinineClearance', q(30, 'mL/min'))
    put(content, 'patient.changes', [{ at: q(72, 'h'), height: q(163, 'cm') }])
    // The model takes Cockcroft-Gault with the actual weight: height does not enter.
    expect(read(content).people).toHaveLength(2)
  })

  test('sessions with their clearance in L/h', () => {
    const content = put(study(), 'patient.renalReplacement', 'intermittent')
    put(content, 'patient.changes', undefined)
    put(content, 'patient.serumCreatinine', undefined)
    put(content, 'patient.creatinineClearance', q(8, 'mL/min'))
    put(content, 'patient.sessions', [
      { at: q(20, 'h'), for: q(4, 'h'), clearance: q(104, 'mL/min'), every: q(2, 'd'), count: 3 }
    ])
    expect(read(content).sessions).toEqual([
      { at: 20, duration: 4, clearance: 6.24, every: { value: 2, times: 24, per: 1 }, count: 3 }
    ])
  })
})

describe('targets become canonical', () => {
  test('with their limits, defaults and signal', () => {
    expect(read(study()).targets).toEqual([
      {
        kind: 'window',
        when: { kind: 'throughout' },
        signal: { kind: 'observed' },
        low: 10,
        high: 50,
        factor: 1,
        unit: 'mg/L',
        share: 0.9
      },
      {
        kind: 'auc24',
        when: { kind: 'steady-state' },
        role: 'efficacy',
        signal: { kind: 'observed' },
        low: 400,
        high: 600,
        factor: 1,
        unit: 'mg.h/L',
        share: 1
      },
      {
        kind: 'trough',
        when: { kind: 'every-interval' },
        role: 'safety',
        signal: { kind: 'observed' },
        high: 20,
        factor: 1,
        unit: 'mg/L',
        share: 1
      },
      {
        kind: 'level',
        when: { kind: 'steady-state' },
        signal: { kind: 'observed' },
        low: 25,
        factor: 1,
        unit: 'mg/L',
        share: 1,
        after: 1,
        from: 'dose end'
      },
      {
        kind: 'time-above',
        when: { kind: 'day', day: 1 },
        signal: { kind: 'observed' },
        low: 4,
        factor: 0.35,
        unbound: true,
        unit: '1',
        share: 0.5
      }
    ])
  })

  test('as multiples of the MIC, of the free concentration', () => {
    const content = put(study(), 'mic', q(500, 'ug/L'))
    put(content, 'targets[1]', { kind: 'auc24', perMic: true, unbound: true, low: q(100, 'h') })
    const { targets, mic } = read(content)
    expect(mic).toBe(0.5)
    expect(targets[1]).toMatchObject({ low: 100, factor: 0.35 / 0.5, unit: 'h' })
    expect(targets[4]).toMatchObject({ low: 4, factor: 0.35 / 0.5, unit: '1' })
  })

  test('in moles, by the molar mass', () => {
    const content = put(study(), 'targets[2].high', q(100, 'umol/L'))
    expect(read(content).targets[2]?.high).toBe(45.23)
  })

  test('of an effect site or an observation by its place in the model', () => {
    const content = put(study(), 'model', 'pw-102')
    put(content, 'targets', [{ kind: 'peak', of: 'brain', high: q(4, 'mg/L') }])
    put(content, 'regimens[0].doses', [
      { route: 'intravenous', amount: q(1, 'mg/kg'), over: q(1, 'min'), at: q(0, 'h') }
    ])
    put(content, 'patient.changes', undefined)
    expect(read(content).targets[0]?.signal).toEqual({ kind: 'effect-site', index: 0 })
    put(content, 'model', put(model('pw-102'), 'observations', [{ id: 'total', of: ['central', 'muscle'] }]))
    put(content, 'targets[0].of', 'total')
    expect(read(content).targets[0]?.signal).toEqual({ kind: 'observation', index: 0 })
  })
})

test('what is left out has its stated default, and no other', () => {
  const content = study()
  for (const key of ['title', 'targets', 'mic', 'now', 'clock', 'display', 'cohort', 'plan', 'levels'])
    put(content, key, undefined)
  put(content, 'regimens[0].start', undefined)
  const resolved = read(content)
  expect(resolved.title).toBe('PW-101, two compartments (invented)')
  expect(resolved.display).toEqual({ time: 'h', concentration: 'mg/L', amount: 'mg', unbound: false })
  expect(resolved.acceptAssumed).toBe(false)
  expect(resolved.regimens[0]?.start).toBe('empty')
  for (const key of ['mic', 'now', 'clock']) expect(Object.hasOwn(resolved, key)).toBe(false)
})

test('the hash is that of the file, and changes with any value in it', () => {
  expect(read(study()).hash).toBe(read(study()).hash)
  expect(read(put(study(), 'clock', '21:16')).hash).not.toBe(read(study()).hash)
})
