import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, expect, test } from 'vitest'
import { phasewise } from './phasewise'

const folder = mkdtempSync(join(tmpdir(), 'phasewise-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

/** A study with a dose of 3 g where the label allows 2. */
function overLimit(reason?: string): string {
  const model = JSON.parse(readFileSync('models/drugs/pw-101.json', 'utf8'))
  model.drug.limits = [{ of: 'single', value: { value: 2, unit: 'g' }, source: 'an invented label' }]
  return JSON.stringify({
    format: 'phasewise-study',
    version: 1,
    model,
    patient: { weight: { value: 70, unit: 'kg' }, creatinineClearance: { value: 100, unit: 'mL/min' } },
    regimens: [
      {
        name: 'too much',
        doses: [
          {
            route: 'intravenous',
            amount: { value: 3, unit: 'g' },
            over: { value: 1, unit: 'h' },
            at: { value: 0, unit: 'h' },
            reason
          }
        ]
      }
    ],
    sampling: { until: { value: 24, unit: 'h' }, every: { value: 12, unit: 'h' } }
  })
}

const SAID =
  'too much: dose 1 of line 1 is over the single limit of the drug without a reason given (limit: an invented label)'

test.each(['exposure', 'phases', 'check'])('%s says a dose over a limit, as text and in its document', (verb) => {
  expect(phasewise([verb, '-'], overLimit()).out).toContain(`Caution: ${SAID}.`)
  expect(JSON.parse(phasewise([verb, '-', '--json'], overLimit()).out).cautions).toContain(SAID)
})

test('the table says it in its document, in its metadata, and beside a bare CSV on the error stream', () => {
  const bare = phasewise(['table', '-'], overLimit())
  expect(bare.status).toBe(0)
  expect(bare.error).toBe(`Caution: ${SAID}.\n`)
  const document = phasewise(['table', '-', '--json'], overLimit())
  expect(document.error).toBe('')
  expect(JSON.parse(document.out).cautions).toContain(SAID)
  const file = join(folder, 'table.csv')
  phasewise(['table', '-', '--out', file], overLimit())
  expect(JSON.parse(readFileSync(`${file}-metadata.json`, 'utf8'))['rdfs:comment']).toContain(SAID)
})

test('with a reason it is no caution', () => {
  expect(phasewise(['table', '-'], overLimit('agreed with the pharmacist')).error).toBe('')
})

test('check --json prints its document for a file that is not there too', () => {
  const { status, out } = phasewise(['check', join(folder, 'none.json'), '--json'])
  expect(status).toBe(1)
  expect(JSON.parse(out)).toMatchObject({ valid: false, problems: [{ path: '' }], checks: [], witness: null })
  expect(JSON.parse(out).problems[0].message).toMatch(/there is no such file$/)
})

test('a model file that forgot its format is told so, not that it is a bad study', () => {
  const model = JSON.parse(readFileSync('models/drugs/pw-101.json', 'utf8'))
  delete model.format
  expect(phasewise(['check', '-'], JSON.stringify(model)).error).toBe(
    'format: format is missing; it must be "phasewise-model"\n'
  )
})

test('a place that cannot be written is said in words, and nothing is left there', () => {
  const { status, error } = phasewise(['table', '-', '--out', folder], overLimit())
  expect(status).toBe(1)
  expect(error).toBe(`${folder} cannot be written: it is a folder\n`)
  const nowhere = join(folder, 'none', 'table.csv')
  expect(phasewise(['table', '-', '--out', nowhere], overLimit()).error).toBe(
    `${nowhere} cannot be written: there is no such folder\n`
  )
  expect(readdirSync(folder).filter((name) => name.includes('.part'))).toEqual([])
})
