import { mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { phasewise } from './phasewise'

const STUDY = JSON.parse(readFileSync('models/studies/choosing-the-interval.json', 'utf8'))

let folder: string
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'phasewise-bad-'))
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

/** The demonstration study with something changed, as text. */
function changed(change: (study: typeof STUDY) => void): string {
  const study = structuredClone(STUDY)
  change(study)
  return JSON.stringify(study)
}

/** Each with the beginning of the line that must be printed. */
const CASES: readonly (readonly [string, string, RegExp])[] = [
  ['not JSON', '{ "format": ', /line \d+/],
  ['a duplicate key', '{ "format": "phasewise-study", "format": "phasewise-study" }', /^format: .*twice|duplicate/m],
  ['an unknown key', changed((s) => Object.assign(s, { regimes: [] })), /^regimes: .*regimens/m],
  [
    'a missing unit',
    changed((s) => Object.assign(s.regimens[0].doses[1], { amount: 500 })),
    /^regimens\[0\]\.doses\[1\]\.amount: .*unit/m
  ],
  ['an unknown unit', changed((s) => Object.assign(s.patient.weight, { unit: 'kilo' })), /^patient\.weight.*: /m],
  [
    'a unit that is not UCUM',
    changed((s) => Object.assign(s.regimens[0].doses[1].amount, { unit: 'mcg' })),
    /^regimens\[0\]\.doses\[1\]\.amount.*: .*"?ug/m
  ],
  ['the wrong kind', changed((s) => Object.assign(s.patient.weight, { unit: 'mg' })), /^patient\.weight.*: /m],
  [
    'indexed where absolute is asked',
    changed((s) =>
      Object.assign(s.patient, {
        serumCreatinine: undefined,
        changes: [],
        creatinineClearance: { value: 30, unit: 'mL/min/{1.73_m2}' }
      })
    ),
    /^patient\.creatinineClearance.*: /m
  ],
  [
    'a negative number',
    changed((s) => Object.assign(s.regimens[0].doses[1].amount, { value: -500 })),
    /^regimens\[0\]\.doses\[1\]\.amount.*: /m
  ],
  [
    'a number too large for a double',
    changed(() => undefined).replace('"value":58', '"value":1e999'),
    /^patient\.weight.*: /m
  ],
  [
    'a zero-length infusion',
    changed((s) => Object.assign(s.regimens[0].doses[1].over, { value: 0 })),
    /^regimens\[0\]\.doses\[1\]\.over.*: /m
  ],
  [
    'an unknown route',
    changed((s) => Object.assign(s.regimens[0].doses[1], { route: 'intravenus' })),
    /^regimens\[0\]\.doses\[1\]\.route: .*intravenous/m
  ],
  [
    'an unknown product',
    changed((s) => Object.assign(s.regimens[0].doses[1], { product: 'salt' })),
    /^regimens\[0\]\.doses\[1\]\.product: /m
  ],
  ['an unknown model', changed((s) => Object.assign(s, { model: 'pw-999' })), /^model: .*pw-999/m],
  [
    'a missing covariate',
    changed((s) => {
      delete s.patient.age
    }),
    /^patient\.age: /m
  ],
  [
    'a start in steady state of a drug that never leaves',
    changed((s) => {
      const model = JSON.parse(readFileSync('models/drugs/pw-101.json', 'utf8'))
      model.compartments.push({ id: 'sink' })
      model.transfers.push({ kind: 'first-order', from: 'central', to: 'sink', rate: 'ka' })
      model.checks = []
      s.model = model
      s.regimens[0].start = 'steady-state'
      s.regimens[0].doses = [
        {
          route: 'oral',
          amount: { value: 500, unit: 'mg' },
          at: { value: 0, unit: 'h' },
          every: { value: 12, unit: 'h' }
        }
      ]
    }),
    /^regimens\[0\]\.start: .*sink/m
  ],
  [
    'a grid of too many rows',
    changed((s) => Object.assign(s.sampling.every, { value: 1, unit: 'ms' })),
    /^sampling\.every/m
  ],
  [
    'a grid of over 5,000,000 rows',
    changed((s) => Object.assign(s.sampling.every, { value: 0.1, unit: 's' })),
    /^sampling\.every: /m
  ],
  [
    'over 100,000 doses',
    changed((s) => Object.assign(s.regimens[0].doses[1].every, { value: 1, unit: 's' })),
    /^regimens\[0\]\.doses.*: .*100000/m
  ],
  [
    'a parameter that comes out at or under 0',
    changed((s) => {
      const model = JSON.parse(readFileSync('models/drugs/pw-101.json', 'utf8'))
      model.parameters.CL.typical = [
        { value: 1, factors: [{ kind: 'linear', covariate: 'age', reference: { value: 40, unit: 'a' }, slope: -0.05 }] }
      ]
      model.checks = []
      s.model = model
    }),
    /CL/
  ],
  [
    'a model that fails its own check',
    changed((s) => {
      const model = JSON.parse(readFileSync('models/drugs/pw-101.json', 'utf8'))
      model.checks[0].expected.value *= 1.01
      s.model = model
    }),
    /^model\.checks\[0\]: .*fails/m
  ]
]

describe('bad input: exit status 1, a line a problem with its path, no stack trace, nothing written', () => {
  test.each(CASES)('%s', (_, text, line) => {
    const file = join(folder, 'out.csv')
    const { status, out, error } = phasewise(['table', '-', '--out', file], text)
    expect(status).toBe(1)
    expect(out).toBe('')
    expect(error).toMatch(line)
    expect(error).not.toMatch(/\n\s+at /)
    expect(readdirSync(folder)).toEqual([])
  })

  test('every problem is listed, not only the first', () => {
    const text = changed((s) => {
      s.regimens[0].doses[1].amount.unit = 'mcg'
      s.patient.weight.unit = 'stone'
      s.extra = 1
    })
    const { error } = phasewise(['table', '-'], text)
    expect(error.trimEnd().split('\n').length).toBeGreaterThanOrEqual(3)
  })

  test('not UTF-8', () => {
    const { status, error } = phasewise(['table', '-'], Uint8Array.of(0x7b, 0xff, 0xfe, 0x7d))
    expect(status).toBe(1)
    expect(error).toContain('UTF-8')
  })

  test('over 20 MB', () => {
    const { status, error } = phasewise(['table', '-'], `${' '.repeat(20_000_001)}{}`)
    expect(status).toBe(1)
    expect(error).toContain('20 MB')
  })

  test('no such file', () => {
    const { status, error } = phasewise(['table', 'no-such-study.json'])
    expect(status).toBe(1)
    expect(error).toBe('no-such-study.json cannot be read: there is no such file\n')
  })

  test('an unknown verb or option: exit status 1 and what is known', () => {
    expect(phasewise(['tabel', 'x.json']).status).toBe(1)
    expect(phasewise(['tabel', 'x.json']).error).toContain('table')
    expect(phasewise(['table', 'x.json', '--jsn']).status).toBe(1)
  })
})
