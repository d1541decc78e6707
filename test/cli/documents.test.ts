import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { expectWithin } from '../expectWithin'
import { phasewise } from './phasewise'

const FOLDER = 'models/studies'
const STUDY = `${FOLDER}/choosing-the-interval.json`
const STUDIES = readdirSync(FOLDER).filter((name) => name.endsWith('.json'))

let folder: string
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'phasewise-documents-'))
})
afterAll(() => rmSync(folder, { recursive: true, force: true }))

/** The one JSON document that a verb prints. */
function document(verb: string, study: string) {
  const { status, out, error } = phasewise([verb, study, '--json'])
  expect(error).toBe('')
  expect(status).toBe(0)
  return JSON.parse(out)
}

/** Every `null` of a group has its reason under its own name. */
function expectReasons(group: Record<string, unknown>, names: readonly string[]): void {
  const why = group.why as Record<string, string>
  for (const name of names) {
    expect(group, name).toHaveProperty(name)
    if (group[name] === null) expect(why[name], name).toMatch(/\w/)
  }
}

const INTERVAL = ['auc_mg_h_L', 'peak_mg_L', 'peakTime_h', 'trough_mg_L', 'minimum_mg_L', 'average_mg_L']
const STEADY_STATE = [
  'period_h',
  'auc24_mg_h_L',
  'peak_mg_L',
  'trough_mg_L',
  'minimum_mg_L',
  'average_mg_L',
  'fluctuation',
  'swing',
  'accumulationRatio',
  'effectiveHalfLife_h',
  'reached90_h',
  'timeInWindow'
]

/** Whether the model of a study has elimination or binding that saturates. */
function saturates(name: string): boolean {
  const { model } = JSON.parse(readFileSync(`${FOLDER}/${name}`, 'utf8'))
  const { transfers } = JSON.parse(readFileSync(`models/drugs/${model}.json`, 'utf8'))
  return transfers.some(({ kind }: { kind: string }) => kind === 'saturable' || kind === 'binding')
}

describe.each(STUDIES)('%s', (name) => {
  const study = `${FOLDER}/${name}`

  test('exposure --json has every fixed key, and a reason for every null', () => {
    const { regimens } = document('exposure', study)
    expect(regimens.length).toBeGreaterThan(0)
    for (const regimen of regimens) {
      expect(Object.keys(regimen)).toEqual(
        expect.arrayContaining([
          'name',
          'intervals',
          'days',
          'steadyState',
          'timeInWindow',
          'timeAbove',
          'timeBelow',
          'targets'
        ])
      )
      expectReasons(regimen, ['timeInWindow', 'timeAbove', 'timeBelow'])
      expectReasons(regimen.steadyState, STEADY_STATE)
      for (const interval of regimen.intervals) {
        expect(interval.end_h).toBeGreaterThan(interval.start_h)
        expectReasons(interval, INTERVAL)
      }
      expect(regimen.intervals.at(-1).incomplete).toBe(true)
      for (const day of regimen.days) expectReasons(day, ['auc_mg_h_L', 'timeInWindow', 'timeAbove', 'timeBelow'])
      for (const target of regimen.targets) {
        expect(Object.keys(target)).toEqual(expect.arrayContaining(['index', 'kind', 'when', 'met', 'value', 'unit']))
        if (target.met === null) expect(target.why.value).toMatch(/\w/)
      }
    }
  })

  test('phases --json has every fixed key; shares of the area sum to 1 where the model is linear', () => {
    const { stretches, distribution } = document('phases', study)
    for (const stretch of stretches) {
      expectReasons(stretch, ['rulingPhase', 'stiffness', 'longestExplicitStep_h', 'vss_L', 'mrt_h', 'clearance_L_h'])
      if (saturates(name)) {
        expect(stretch.phases).toEqual([])
        expect(stretch.why.stiffness).toMatch(/^the model is not linear/)
        continue
      }
      const shares = stretch.phases.map((phase: { shareOfAuc: number }) => phase.shareOfAuc)
      expectWithin(
        shares.reduce((sum: number, share: number) => sum + share, 0),
        1,
        { relative: 1e-12 }
      )
      const rates = stretch.phases.map((phase: { eigenvalue_per_h: number }) => phase.eigenvalue_per_h)
      expect([...rates].sort((a, b) => b - a)).toEqual(rates)
    }
    for (const over of distribution) {
      expect(Object.keys(over)).toEqual(expect.arrayContaining(['regimen', 'interval', 'over_h']))
      if (over.over_h === null) expect(over.why.over_h).toMatch(/\w/)
    }
  })

  test('check --json is valid, its checks pass and two methods agree', () => {
    const found = document('check', study)
    expect(found.valid).toBe(true)
    expect(found.problems).toEqual([])
    for (const check of found.checks) expect(check.pass, check.what).toBe(true)
    // Of a model that saturates the witness is the working tolerance, 1e-8 a step, against a hundredth of it.
    expect(found.witness.largestRelativeDifference).toBeLessThan(saturates(name) ? 1e-7 : 1e-9)
    expect(found.witness.massBalance).toBeLessThan(1e-12)
  })

  test('the reports for a terminal carry the caution', () => {
    for (const verb of ['exposure', 'phases', 'check']) {
      expect(phasewise([verb, study]).out).toContain('not a medical device')
    }
  })
})

test('a study shorter than 24 h has no highest running AUC24, and its document says why', () => {
  const study = JSON.parse(readFileSync(STUDY, 'utf8'))
  study.sampling.until = { value: 20, unit: 'h' }
  for (const { doses } of study.regimens) for (const dose of doses) delete dose.exceptions
  const { status, out } = phasewise(['exposure', '-', '--json'], JSON.stringify(study))
  expect(status).toBe(0)
  const [regimen] = JSON.parse(out).regimens
  expect(regimen.highestRunningAuc24).toBeNull()
  expect(regimen.why.highestRunningAuc24).toBe('the study is shorter than 24 h')
})

describe('files', () => {
  test.each(['exposure', 'phases'])('%s --out writes one value a row, with its unit, and the metadata', (verb) => {
    const file = join(folder, `${verb}.csv`)
    expect(phasewise([verb, STUDY, '--out', file]).status).toBe(0)
    const [header, ...lines] = readFileSync(file, 'utf8').trimEnd().split('\r\n')
    expect(header).toBe('regimen,over,from_h,to_h,quantity,value,unit,note')
    expect(lines.length).toBeGreaterThan(20)
    expect(JSON.parse(readFileSync(`${file}-metadata.json`, 'utf8'))['rdfs:comment'][0]).toContain(
      'not a medical device'
    )
  })

  test('a name that ends in .json holds the document', () => {
    const file = join(folder, 'exposure.json')
    phasewise(['exposure', STUDY, '--out', file])
    expect(readFileSync(file, 'utf8')).toBe(phasewise(['exposure', STUDY, '--json']).out)
  })
})

describe('phasewise check', () => {
  test.each(readdirSync('models/drugs').filter((name) => name.endsWith('.json')))(
    '%s is valid and passes its own checks',
    (name) => {
      const { status, out, error } = phasewise(['check', `models/drugs/${name}`, '--json'])
      expect(error).toBe('')
      expect(status).toBe(0)
      expect(JSON.parse(out).valid).toBe(true)
    }
  )

  test('prints its document for bad input too, and lists the problems on the error stream; exit status 1', () => {
    const study = JSON.parse(readFileSync(STUDY, 'utf8'))
    study.patient.weight.unit = 'stone'
    const { status, out, error } = phasewise(['check', '-', '--json'], JSON.stringify(study))
    expect(status).toBe(1)
    const found = JSON.parse(out)
    expect(found.valid).toBe(false)
    expect(found.problems[0].path).toMatch(/^patient\.weight/)
    expect(found.witness).toBeNull()
    expect(error).toContain(found.problems[0].path)
  })

  test('a model that fails its own check: exit status 1, what was expected and got', () => {
    const model = JSON.parse(readFileSync('models/drugs/pw-101.json', 'utf8'))
    model.checks[0].expected.value *= 1.01
    const file = join(folder, 'model.json')
    writeFileSync(file, JSON.stringify(model))
    const { status, out, error } = phasewise(['check', file, '--json'])
    expect(status).toBe(1)
    expect(JSON.parse(out).checks[0]).toMatchObject({ what: 'terminal half-life', pass: false })
    expect(error).toMatch(/^checks\[0\]: .*expected 11\.8/)
  })

  test('a published model without a printed result is said to be transcribed, not confirmed', () => {
    expect(phasewise(['check', 'models/drugs/vancomycin-buelga-2005.json']).out).toContain(
      'transcribed, not confirmed against a printed result'
    )
  })
})
