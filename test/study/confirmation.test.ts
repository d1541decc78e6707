import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { confirmationSentence } from '../../src/report/confirmationText'
import { type Confirmation, confirm } from '../../src/study/confirmation'
import { readStudy } from '../../src/study/file/readStudy'
import { runStudy } from '../../src/study/run'
import { q } from './example'

function confirmationsOf(study: unknown): readonly Confirmation[] {
  const read = readStudy(JSON.stringify(study), (id) => JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8')))
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return confirm(outcome.result)
}

const shipped = (name: string): unknown => JSON.parse(readFileSync(`models/studies/${name}.json`, 'utf8'))

/** One compartment, saturable elimination alone, given at once into the vein. */
const CLOSED_FORM = {
  format: 'phasewise-study',
  version: 1,
  model: {
    format: 'phasewise-model',
    version: 1,
    id: 'saturable-bolus',
    title: 'saturable elimination (invented)',
    drug: { name: 'PW-109', moiety: 'free acid', matrix: 'plasma' },
    source: { kind: 'invented', citation: 'made up for this test' },
    parameters: {
      V: { unit: 'L', typical: [{ value: 49 }] },
      Vmax: { unit: 'mg/d', typical: [{ value: 415 }] },
      Km: { unit: 'mg/L', typical: [{ value: 5.7 }] }
    },
    compartments: [{ id: 'central', volume: 'V', observed: true }],
    transfers: [{ kind: 'saturable', from: 'central', maximumRate: 'Vmax', halfSaturation: 'Km' }],
    routes: [{ name: 'intravenous', into: 'central' }]
  },
  patient: {},
  regimens: [
    {
      name: '300 mg a day',
      doses: [{ route: 'intravenous', amount: q(300, 'mg'), at: q(0, 'h'), every: q(24, 'h') }]
    }
  ],
  sampling: { until: q(240, 'h'), every: q(2, 'h') }
}

describe('every result has a second witness', () => {
  test('a linear study: the integrator against the exponential', () => {
    const all = confirmationsOf(shipped('choosing-the-interval'))
    expect(all).toHaveLength(3)
    for (const each of all) {
      expect(each.by).toBe('second method')
      expect(each.largestRelativeDifference).toBeLessThan(1e-10)
    }
    expect(confirmationSentence(all)).toMatch(/by a second method .*nothing about how well the model fits this patient/)
  })

  test('a saturable study without a closed form: a hundredth of the tolerance', () => {
    for (const each of confirmationsOf(shipped('stepped-up-too-far'))) {
      expect(each.by).toBe('finer tolerance')
      expect(each.largestRelativeDifference).toBeLessThan(1e-6)
    }
  })

  test('a saturable study with a closed form: that form', () => {
    const [only] = confirmationsOf(CLOSED_FORM)
    expect(only?.by).toBe('closed form')
    expect(only?.largestRelativeDifference).toBeLessThan(1e-6)
    expect(only?.largestRelativeDifference).toBeGreaterThan(0)
    expect(confirmationSentence(only === undefined ? [] : [only])).toContain('by its closed form')
  })
})
