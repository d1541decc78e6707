import { readFileSync } from 'node:fs'
import { expect, test } from 'vitest'
import { INTEGRATION_WITNESS, integrate } from '../../src/pk/integrate'
import { isLinear } from '../../src/pk/model'
import { witness } from '../../src/pk/witness'
import { readStudy } from '../../src/study/file/readStudy'
import { runStudy } from '../../src/study/run'

/** One study for every shipped linear model, on every route. */
const shipped: { readonly cases: readonly { readonly study: { readonly model: string } }[] } = JSON.parse(
  readFileSync(new URL('../reference/models/courses.json', import.meta.url), 'utf8')
)

function shippedModel(id: string): unknown {
  return JSON.parse(readFileSync(new URL(`../../models/drugs/${id}.json`, import.meta.url), 'utf8'))
}

function timesUpTo(end: number): number[] {
  return Array.from({ length: 25 }, (_, k) => (k / 24) * end)
}

// The same on 200 random linear models and regimens: test/pk/witness.test.ts.
test.each(shipped.cases)('$study.model: the integrator at 1e-11 is the exponential within 1e-9', ({ study }) => {
  const read = readStudy(JSON.stringify(study), shippedModel)
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  for (const { course: exact } of outcome.result.regimens) {
    expect(exact.segments.every(({ model }) => isLinear(model))).toBe(true)
    expect(exact.method).toBe('exact')
    const integrated = integrate(exact.segments, exact.initial, INTEGRATION_WITNESS)
    const { largestRelativeDifference, massBalance } = witness(exact.trajectory, integrated, timesUpTo(exact.end))
    expect(largestRelativeDifference).toBeLessThan(1e-9)
    expect(massBalance).toBeLessThan(1e-12)
  }
})
