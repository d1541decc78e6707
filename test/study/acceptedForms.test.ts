import { describe, expect, test } from 'vitest'
import { readModel } from '../../src/study/file/readModel'
import { readStudy } from '../../src/study/file/readStudy'
import type { StudyResult } from '../../src/study/result'
import { runStudy } from '../../src/study/run'
import { type Json, model, put, q, shippedModel, study } from './example'

/** A study run, or its problems as text. */
function ran(raw: Json): StudyResult | string {
  const read = readStudy(JSON.stringify(raw), shippedModel)
  if (!read.ok) return read.issues.map(({ path, message }) => `${path}: ${message}`).join('\n')
  const outcome = runStudy(read.study)
  return outcome.ok ? outcome.result : outcome.issues.map(({ path, message }) => `${path}: ${message}`).join('\n')
}

function result(raw: Json): StudyResult {
  const outcome = ran(raw)
  if (typeof outcome === 'string') throw new Error(outcome)
  return outcome
}

function problemsOfModel(raw: Json): string {
  const read = readModel(JSON.stringify(raw))
  return read.ok ? '' : read.issues.map(({ path, message }) => `${path}: ${message}`).join('\n')
}

describe('a share on any kind of target', () => {
  const PLAIN = [
    { kind: 'trough', high: q(20, 'mg/L') },
    { kind: 'peak', low: q(20, 'mg/L') },
    { kind: 'minimum', low: q(5, 'mg/L') },
    { kind: 'average', low: q(5, 'mg/L') },
    { kind: 'level', low: q(5, 'mg/L'), after: q(1, 'h'), from: 'dose end' },
    { kind: 'auc24', low: q(400, 'mg.h/L') },
    { kind: 'auc-interval', low: q(400, 'mg.h/L') }
  ]
  test.each(PLAIN)('$kind: is accepted, changes no result, and a caution says so', (target) => {
    const without = result(put(study(), 'targets', [target]))
    const shared = result(put(study(), 'targets', [{ ...target, share: 0.9 }]))
    const judged = ({ regimens }: StudyResult) =>
      regimens[0]?.exposure.targets.map(({ met, value }) => ({ met, value }))
    expect(judged(shared)).toEqual(judged(without))
    expect(shared.cautions.filter((caution) => !without.cautions.includes(caution))).toEqual([
      `target 0 (${target.kind}): a share of 0.9 was given, which only shares of time have: it changes nothing`
    ])
  })

  test('a window takes its share without a caution', () => {
    const window = { kind: 'window', low: q(10, 'mg/L'), high: q(50, 'mg/L'), share: 0.9 }
    expect(result(put(study(), 'targets', [window])).cautions.join()).not.toContain('share')
  })
})

describe('an unbound target', () => {
  const withSite = () => {
    const own = model('pw-101')
    ;(own.compartments as Json[]).push({ id: 'site' })
    ;(own.transfers as Json[]).push({ kind: 'effect', from: 'central', to: 'site', rate: 'ka' })
    return own
  }

  test('of an effect site is the free fraction of what the site has, and a caution says where that fraction is from', () => {
    const of = (unbound: boolean) =>
      result(
        put(put(study(), 'model', withSite()), 'targets', [{ kind: 'peak', low: q(1, 'mg/L'), of: 'site', unbound }])
      )
    const value = ({ regimens }: StudyResult) => regimens[0]?.exposure.targets[0]?.value
    // 0.35 is the free fraction that the model states.
    expect(value(of(true))).toBe(0.35 * (value(of(false)) ?? Number.NaN))
    expect(of(true).cautions).toContain(
      'target 0 (peak): the free fraction in plasma, 0.35, is applied to an effect site, where it may differ'
    )
    expect(of(false).cautions.join()).not.toContain('free fraction')
  })

  test('is the only one that brings the caution of a constant free fraction: a limit in multiples of the MIC does not', () => {
    const raw = put(put(study(), 'mic', q(2, 'mg/L')), 'targets', [{ kind: 'peak', low: q(4, '1'), perMic: true }])
    expect(result(raw).cautions.join()).not.toContain('free fraction')
  })
})

describe('equations with a default', () => {
  test.each(['bodySurfaceArea', 'leanWeight'])('%s may leave its equation out', (name) => {
    const given = put(model('pw-101'), `covariates.${name}`, {})
    expect(problemsOfModel(given)).toBe('')
    const read = readModel(JSON.stringify(given))
    const stated = { bodySurfaceArea: 'mosteller', leanWeight: 'janmahasatian' }[name]
    expect(read.ok && read.drugModel.covariates).toMatchObject({ [name]: { equation: stated } })
  })
})

test('a check of a model without covariates needs no patient', () => {
  const own = model('pw-101')
  own.covariates = {}
  own.studied = undefined
  own.parameters = Object.fromEntries(
    Object.entries(own.parameters as Record<string, Json>).map(([name, { unit }]) => [
      name,
      { unit, typical: [{ value: 1 }] }
    ])
  )
  own.correlations = undefined
  own.checks = [{ what: 'Vss', expected: q(2, 'L'), relativeTolerance: 1e-9, from: 'closed form' }]
  expect(problemsOfModel(own)).toBe('')
})

test('of a cohort and a plan nothing is required', () => {
  expect(typeof ran(put(put(study(), 'cohort', {}), 'plan', {}))).toBe('object')
})

describe('messages', () => {
  test('a sex that is abbreviated or unknown is never corrected to the other one', () => {
    expect(ran(put(study(), 'patient.sex', 'F'))).toContain('got "F"; the nearest is "female"')
    expect(ran(put(study(), 'patient.sex', 'm'))).toContain('got "m"; the nearest is "male"')
    expect(ran(put(study(), 'patient.sex', 'woman'))).toMatch(/one of "female", "male", got "woman"$/)
  })

  test('a missing model is said once', () => {
    expect(ran(put(study(), 'model', undefined))).toBe(
      'model: model is missing; give the id of a shipped model, or a whole model'
    )
  })

  test('a model file where a study is asked is called one, and nothing else is said', () => {
    expect(ran(model('pw-101'))).toBe(
      'format: format must be "phasewise-study"; this is a model file: put it whole under "model" in a study, or run check on it'
    )
  })

  test('an uncertainty of a parameter that does not exist is a problem', () => {
    expect(problemsOfModel(put(model('pw-101'), 'typicalUncertainty', { relativeSe: { CLx: 0.06 } }))).toMatch(
      /^typicalUncertainty\.relativeSe\.CLx: no parameter is called "CLx"; the nearest is "CL"/
    )
  })

  test('an ideal weight that changes under an adjusted weight given directly is an error that names both', () => {
    const raw = put(study(), 'patient.adjustedWeight', q(55, 'kg'))
    put(raw, 'patient.changes', [{ at: q(5, 'h'), idealWeight: q(50, 'kg') }])
    expect(ran(raw)).toContain('patient.changes[0].idealWeight: idealWeight changes, but adjustedWeight')
  })
})
