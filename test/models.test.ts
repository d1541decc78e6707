import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import type { DrugModel } from '../src/patient/drugModel'
import { areaBetween, valueAt } from '../src/pk/curve'
import type { Trajectory } from '../src/pk/trajectory'
import { checkModel } from '../src/study/checkedModel'
import { readModel } from '../src/study/file/readModel'
import { readStudy } from '../src/study/file/readStudy'
import type { StudyResult } from '../src/study/result'
import { runStudy } from '../src/study/run'
import { expectWithin } from './expectWithin'

const drugs = filesIn('../models/drugs')
const studies = filesIn('../models/studies')
const models = drugs.map((file) => ({ id: file.id, ...modelOf(file) }))
const invented = models.filter(({ drugModel }) => drugModel.source.kind === 'invented')
const published = models.filter(({ drugModel }) => drugModel.source.kind === 'published')

/** Recomputed in 40-digit arithmetic from the files alone by test/reference/models/recompute.py. */
const courses: { readonly cases: readonly ModelCourses[] } = JSON.parse(textOf('./reference/models/courses.json'))

interface ModelCourses {
  readonly study: { readonly model: string }
  readonly expected: readonly { readonly regimen: string; readonly rows: readonly ExpectedRow[] }[]
}

interface ExpectedRow {
  readonly time_h: number
  readonly concentration_mg_L: number
  readonly effectSites_mg_L: readonly number[]
  readonly observations_mg_L: readonly number[]
  readonly auc_mg_h_L: number
  readonly eliminated_mg: number
}

describe('every model file', () => {
  test.each(models)('$id carries its own id and reproduces its own checks', ({ id, drugModel, checks }) => {
    expect(drugModel.id).toBe(id)
    expect(checks.length).toBeGreaterThan(0)
    expect(checkModel(drugModel, checks).filter(({ pass }) => !pass)).toEqual([])
  })

  test.each(models)(
    '$id holds its arithmetic to 1e-9 where no printed value with few digits stands behind it',
    ({ checks }) => {
      for (const { from, relativeTolerance } of checks) {
        if (from === 'printed in the source') expect(relativeTolerance).toBeLessThanOrEqual(0.05)
        else expect(relativeTolerance).toBeLessThanOrEqual(1e-9)
      }
    }
  )

  test('a check fails when a number of its model is changed', () => {
    const changed = textOf('../models/drugs/pw-101.json').replace('"value": 38 ', '"value": 39 ')
    const reading = readModel(changed)
    expect(reading.ok && checkModel(reading.drugModel, reading.checks).map(({ pass }) => pass)).toEqual([false])
  })

  test('every model has a reference course', () => {
    expect(courses.cases.map(({ study }) => study.model).sort()).toEqual(models.map(({ id }) => id).sort())
  })

  test.each(courses.cases)('$study.model agrees with 40-digit arithmetic on every route', ({ study, expected }) => {
    const { regimens } = resultOf(JSON.stringify(study))
    expect(regimens.map(({ name }) => name)).toEqual(expected.map(({ regimen }) => regimen))
    regimens.forEach(({ course: { trajectory } }, i) => {
      for (const row of expected[i].rows) expectRow(trajectory, row)
      expectSound(trajectory)
    })
  })
})

describe('the invented drugs', () => {
  test('are PW-101 to PW-108', () => {
    expect(invented.map(({ id }) => id)).toEqual([1, 2, 3, 4, 5, 6, 7, 8].map((n) => `pw-10${n}`))
  })

  test('use every linear transfer, exchange by clearance and by rates', () => {
    const used = invented.flatMap(({ drugModel }) =>
      drugModel.transfers.map((transfer) =>
        transfer.kind === 'exchange' && 'rates' in transfer ? 'exchange by rates' : transfer.kind
      )
    )
    expect(new Set(used)).toEqual(
      new Set(['first-order', 'exchange', 'exchange by rates', 'clearance', 'elimination', 'transit', 'effect'])
    )
  })

  test('use every kind of factor', () => {
    const used = invented.flatMap(({ drugModel }) =>
      drugModel.parameters.flatMap(({ typical }) => typical.flatMap(({ factors }) => factors.map(({ kind }) => kind)))
    )
    expect(new Set(used)).toEqual(new Set(['power', 'linear', 'exponential', 'maturation', 'category', 'step']))
  })

  test('use a product, apparent parameters, lag, bioavailability, parts of a route, limits and a sampling time', () => {
    const some = (has: (drugModel: DrugModel) => boolean): boolean => invented.some(({ drugModel }) => has(drugModel))
    expect(some(({ drug }) => drug.products.some(({ fraction }) => fraction < 1))).toBe(true)
    expect(some(({ apparent }) => apparent)).toBe(true)
    expect(some(({ routes }) => routes.some(({ lag }) => lag !== undefined))).toBe(true)
    expect(some(({ routes }) => routes.some(({ bioavailability }) => bioavailability !== undefined))).toBe(true)
    expect(some(({ routes }) => routes.some(({ parts }) => parts.some(({ over }) => over !== undefined)))).toBe(true)
    expect(some(({ drug }) => drug.sampleAfter !== undefined)).toBe(true)
    expect(some(({ observations }) => observations.length > 0)).toBe(true)
    expect(some(({ valid }) => valid.length > 0)).toBe(true)
    expect(some(({ parameters }) => parameters.some(({ typical }) => typical.length > 1))).toBe(true)
    const limits = new Set(invented.flatMap(({ drugModel }) => drugModel.drug.limits.map(({ of }) => of)))
    expect(limits).toEqual(new Set(['single', 'daily', 'rate', 'total', 'step']))
    const declared = invented.flatMap(({ drugModel }) => Object.values(drugModel.declared))
    expect(declared.some(({ kind }) => kind === 'number')).toBe(true)
    expect(declared.some((own) => own.kind === 'category' && own.frequencies !== undefined)).toBe(true)
  })

  test('state between-subject variability of every kind, correlations and a residual', () => {
    const files = invented.map(({ file }) => file)
    const kinds = files.flatMap(({ parameters }) =>
      Object.values(parameters).flatMap(({ variability }) => variability?.kind ?? [])
    )
    expect(new Set(kinds)).toEqual(new Set(['log-normal', 'normal', 'logit-normal']))
    expect(files.every(({ residual }) => residual !== undefined)).toBe(true)
    expect(files.every(({ correlations }) => correlations !== undefined)).toBe(true)
  })
})

describe('the published models', () => {
  test('are at least ten, three of children or neonates and two of whole blood among them', () => {
    expect(published.length).toBeGreaterThanOrEqual(10)
    const young = published.filter(({ drugModel }) => /child|infant|neonate/.test(drugModel.studied?.description ?? ''))
    const blood = published.filter(({ drugModel }) => drugModel.drug.matrix === 'whole blood')
    expect(young.length).toBeGreaterThanOrEqual(3)
    expect(blood.length).toBeGreaterThanOrEqual(2)
  })

  test.each(published)(
    '$id says whom it was built on, its citation, what was read and what to beware of',
    ({ drugModel }) => {
      const { source, studied } = drugModel
      expect(source.citation.length).toBeGreaterThan(20)
      expect(source.read).toBeDefined()
      expect(source.cautions.length).toBeGreaterThan(0)
      expect(studied?.description).toBeTruthy()
    }
  )

  test.each(published)(
    '$id says that it is not confirmed exactly where no printed value is checked',
    ({ drugModel, checks }) => {
      const confirmed = checks.some(({ from }) => from === 'printed in the source')
      const saysNot = drugModel.source.cautions.includes('Transcribed, not confirmed against a printed result.')
      expect(saysNot).toBe(!confirmed)
    }
  )

  test('an illustration says so in its title, and nothing else does', () => {
    for (const { id, drugModel } of published) {
      const assumed = drugModel.parameters.some(
        (parameter) => parameter.assumed !== undefined || parameter.typical.some((term) => term.assumed !== undefined)
      )
      expect(drugModel.title.endsWith('an illustration'), id).toBe(assumed)
    }
  })
})

describe('the worked studies', () => {
  test('are five, in the invented scenario', () => {
    expect(studies.length).toBe(5)
    const names = studies.map(({ text }) => resultOf(text).study.drugModel.source.kind)
    expect(new Set(names)).toEqual(new Set(['invented']))
  })

  test.each(studies)('$id runs to finite, nonnegative numbers and conserves the drug', ({ text }) => {
    for (const { course } of resultOf(text).regimens) expectSound(course.trajectory)
  })

  test('choosing the interval: of three regimens exactly the one every 18 h meets all targets', () => {
    expect(metAll('choosing-the-interval')).toEqual(['500 mg every 18 h'])
  })

  test('loading dose: only the threefold first dose keeps every trough above the limit', () => {
    expect(metAll('loading-dose')).toEqual(['240 mg first, then 80 mg every week'])
  })

  test('fast distribution: only the infusion that is stepped down stays in the window at the effect site', () => {
    expect(metAll('fast-distribution')).toEqual(['1.2 mg/kg, then 7, 5.5 and 4.5 mg/kg/h'])
  })

  test('changing renal function: going on overshoots, half the dose does not', () => {
    expect(metAll('changing-renal-function')).toEqual(['500 mg every 12 h from day 4'])
  })

  test('dialysis: a dose before the session does not reach the target, one after it does', () => {
    expect(metAll('dialysis')).not.toContain('1 g before each session')
    expect(metAll('dialysis')).toContain('1 g after each session')
  })
})

/** Names of the regimens that meet every target; a target that cannot be evaluated is not met. */
function metAll(id: string): readonly string[] {
  const study = studies.find((file) => file.id === id)
  if (study === undefined) return []
  return resultOf(study.text).regimens.flatMap(({ name, exposure }) =>
    exposure.targets.every(({ met }) => met === true) ? [name] : []
  )
}

/** Amounts move through at most a dozen states, each good to some 1e-14: 1e-12 leaves room for the sums. */
function expectRow(trajectory: Trajectory, row: ExpectedRow): void {
  const time = row.time_h
  const near = (actual: number, expected: number, what: string): void =>
    expectWithin(actual, expected, { relative: 1e-12 }, `${what} at ${time} h`)
  near(valueAt(trajectory, { kind: 'observed' }, time, 'before'), row.concentration_mg_L, 'concentration')
  near(areaBetween(trajectory, { kind: 'observed' }, 0, time), row.auc_mg_h_L, 'area')
  row.effectSites_mg_L.forEach((value, index) => {
    near(valueAt(trajectory, { kind: 'effect-site', index }, time, 'before'), value, `effect site ${index}`)
  })
  row.observations_mg_L.forEach((value, index) => {
    near(valueAt(trajectory, { kind: 'observation', index }, time, 'before'), value, `observation ${index}`)
  })
  near(eliminatedBy(trajectory, time), row.eliminated_mg, 'eliminated')
}

function eliminatedBy(trajectory: Trajectory, time: number): number {
  let sum = 0
  for (const piece of trajectory.pieces) {
    const { start, duration } = piece.segment
    if (start < time) sum += piece.eliminated(Math.min(duration, time - start))
  }
  return sum
}

/** Nonnegative and finite within every piece, and at its end exactly as much drug as there was and entered. */
function expectSound(trajectory: Trajectory): void {
  let before = sumOf(trajectory.initial.amounts)
  for (const piece of trajectory.pieces) {
    const { segment } = piece
    const amounts = new Float64Array(segment.model.compartments.length)
    const entered = sumOf(segment.boluses) + sumOf(segment.inputs) * segment.duration
    for (const share of [0, 0.25, 0.5, 1]) {
      const offset = share * segment.duration
      piece.amountsInto(offset, amounts)
      const gone = piece.eliminated(offset)
      const there = sumOf(segment.boluses) + sumOf(segment.inputs) * offset
      const values = [...amounts, gone, piece.concentration({ kind: 'observed' }, offset)]
      if (!values.every((value) => Number.isFinite(value) && value >= 0)) {
        expect.fail(`at ${segment.start} h + ${offset} h: ${values.join(', ')}`)
      }
      const largest = Math.max(before + entered, 1e-300)
      expectWithin(sumOf(amounts) + gone, before + there, { absolute: 1e-12 * largest }, 'drug in and out')
    }
    before = sumOf(amounts)
  }
}

function sumOf(values: { readonly length: number; readonly [index: number]: number }): number {
  let sum = 0
  for (let i = 0; i < values.length; i++) sum += values[i]
  return sum
}

const results = new Map<string, StudyResult>()

function resultOf(study: string): StudyResult {
  const known = results.get(study)
  if (known !== undefined) return known
  const reading = readStudy(study, shippedModel)
  if (!reading.ok) throw new Error(reading.issues.map(({ path, message }) => `${path}: ${message}`).join('\n'))
  const outcome = runStudy(reading.study)
  if (!outcome.ok) throw new Error(outcome.issues.map(({ path, message }) => `${path}: ${message}`).join('\n'))
  results.set(study, outcome.result)
  return outcome.result
}

function shippedModel(id: string): unknown {
  const file = drugs.find((drug) => drug.id === id)
  return file === undefined ? undefined : JSON.parse(file.text)
}

function modelOf({ text }: { readonly text: string }) {
  const reading = readModel(text)
  if (!reading.ok) throw new Error(reading.issues.map(({ path, message }) => `${path}: ${message}`).join('\n'))
  return reading
}

function filesIn(folder: string): readonly { readonly id: string; readonly text: string }[] {
  return readdirSync(new URL(folder, import.meta.url))
    .sort()
    .map((name) => ({ id: name.replace(/\.json$/, ''), text: textOf(`${folder}/${name}`) }))
}

function textOf(path: string): string {
  return readFileSync(new URL(path, import.meta.url), 'utf8')
}
