import { expect, test } from 'vitest'
import { readStudy } from '../../src/study/file/readStudy'
import { runStudy } from '../../src/study/run'
import { model, put, q, shippedModel, study } from './example'

test('what the numerics cannot do is an issue at its regimen, not a crash and not a number', () => {
  const fast = put(put(model('pw-101'), 'parameters.CL.typical', [{ value: 1e300 }]), 'checks', [])
  const read = readStudy(JSON.stringify(put(put(study(), 'model', fast), 'sampling.every', q(1, 'h'))), shippedModel)
  if (!read.ok) throw new Error(JSON.stringify(read.issues))
  const outcome = runStudy(read.study)
  expect(outcome).toMatchObject({ ok: false, issues: [{ path: 'regimens[0]' }] })
  if (!outcome.ok) expect(outcome.issues[0]?.message).toMatch(/^cannot be computed: .*\w/)
})
