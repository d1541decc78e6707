import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import type { ReadonlyVector } from '../src/numerics/vector'
import type { DrugModel } from '../src/patient/drugModel'
import { areaBetween, valueAt } from '../src/pk/curve'
import { INTEGRATION_WITNESS, integrate } from '../src/pk/integrate'
import { isLinear, type Model } from '../src/pk/model'
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

/** By two general-purpose solvers that agree to 2e-11, from the files alone: test/reference/models/nonlinear.py. */
const nonlinear: { readonly cases: readonly ModelCourses[] } = JSON.parse(textOf('./reference/models/nonlinear.json'))

interface ModelCourses {
  readonly study: { readonly model: string; readonly title: string }
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
    const linear = courses.cases.map(({ study }) => study.model)
    const others = nonlinear.cases.map(({ study }) => study.model)
    expect([...new Set([...linear, ...others])].sort()).toEqual(models.map(({ id }) => id).sort())
    for (const model of others) expect(linear).not.toContain(model)
  })

  test.each(nonlinear.cases)(
    '$study.title: within 1e-7 of two independent solvers as computed, within 1e-10 at a tight tolerance',
    ({ study, expected }) => {
      const { regimens } = resultOf(JSON.stringify(study))
      expect(regimens.map(({ name }) => name)).toEqual(expected.map(({ regimen }) => regimen))
      regimens.forEach(({ course }, i) => {
        expect(course.method).toBe('integrated')
        const tight = integrate(course.segments, course.initial, INTEGRATION_WITNESS)
        for (const row of expected[i].rows) {
          expectRow(course.trajectory, row, 1e-7)
          expectRow(tight, row, 1e-10)
        }
        expectSound(course.trajectory)
      })
    }
  )

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
  test('are PW-101 to PW-112', () => {
    expect(invented.map(({ id }) => id)).toEqual(Array.from({ length: 12 }, (_, i) => `pw-${101 + i}`))
  })

  test('use every transfer, exchange by clearance and by rates, a Hill exponent, binding in full and approximated', () => {
    const used = invented.flatMap(({ drugModel }) =>
      drugModel.transfers.map((transfer) =>
        transfer.kind === 'exchange' && 'rates' in transfer ? 'exchange by rates' : transfer.kind
      )
    )
    const kinds = ['first-order', 'exchange', 'exchange by rates', 'clearance', 'elimination', 'transit', 'effect']
    expect(new Set(used)).toEqual(new Set([...kinds, 'saturable', 'binding', 'production']))
    const transfers = invented.flatMap(({ drugModel }) => drugModel.transfers)
    expect(transfers.some((transfer) => transfer.kind === 'saturable' && transfer.hill !== undefined)).toBe(true)
    const bindings = transfers.flatMap((transfer) => (transfer.kind === 'binding' ? [transfer.approximation] : []))
    expect(new Set(bindings)).toEqual(new Set(['none', 'quasi-steady-state']))
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

describe('the antibody PW-111 and its approximation PW-112', () => {
  const patient = { weight: { value: 75, unit: 'kg' } }
  const curves = ['pw-111', 'pw-112'].map((model) => {
    const dose = { route: 'subcutaneous', amount: { value: 150, unit: 'mg' }, at: { value: 0, unit: 'd' } }
    const text = JSON.stringify({
      format: 'phasewise-study',
      version: 1,
      title: 'one dose',
      model,
      patient,
      regimens: [{ name: 'once', doses: [dose] }],
      sampling: { until: { value: 42, unit: 'd' }, every: { value: 1, unit: 'd' } }
    })
    return resultOf(text).regimens[0].course.trajectory
  })
  const [full, approximated] = curves

  test('are the same numbers but for the approximation', () => {
    const [one, two] = ['pw-111', 'pw-112'].map((id) => {
      const { parameters, compartments, transfers, routes, observations } = fileOf(id)
      const other = transfers.map((transfer) =>
        transfer.kind === 'binding' ? { ...transfer, approximation: undefined } : transfer
      )
      return { parameters, compartments, transfers: other, routes, observations }
    })
    expect(one).toEqual(two)
  })

  test('carry target and complex in drug-equivalent mass in the volume of the drug', () => {
    const { model } = full.pieces[0].segment
    const place = (name: string): number => model.compartments.findIndex((compartment) => compartment.name === name)
    expect(model.compartments.map(({ holds }) => holds)).toEqual(['drug', 'drug', 'drug', 'target', 'drug'])
    expect(isLinear(model)).toBe(false)
    // By hand: 1 nmol of 148 kg/mol is 0.148 mg.
    const binding = model.transfers.find((transfer) => transfer.kind === 'binding')
    expectWithin(binding?.association ?? Number.NaN, 0.4 / 0.148, { relative: 1e-15 })
    expect(binding).toMatchObject({ drug: place('central'), target: place('receptor'), complex: place('complex') })
    expect(binding?.dissociation).toBe(0.04)
    const production = model.transfers.find((transfer) => transfer.kind === 'production')
    expectWithin(production?.rate ?? Number.NaN, 0.75 * 0.148, { relative: 1e-15 })
    expect(model.observations.map(({ of, volume }) => [of, volume])).toEqual([
      [[1, 4], 3.1],
      [[3], 3.1],
      [[3, 4], 3.1]
    ])
  })

  test('begin with the target that the body makes and loses, 0.75 nmol/h over 0.06 /h, and no drug', () => {
    for (const { initial } of curves) {
      expectWithin(initial.amounts[3], (0.75 / 0.06) * 0.148, { relative: 1e-12 })
      expect(Array.from(initial.amounts).filter((_, i) => i !== 3)).toEqual([0, 0, 0, 0])
    }
  })

  test('lie on each other within 1 % of the peak, and differ', () => {
    const differences = Array.from({ length: 42 }, (_, day) => {
      const [a, b] = curves.map((curve) => valueAt(curve, { kind: 'observed' }, 24 * (day + 1), 'before'))
      return Math.abs(a - b)
    })
    const peak = Math.max(
      ...Array.from({ length: 42 }, (_, d) => valueAt(full, { kind: 'observed' }, 24 * (d + 1), 'before'))
    )
    expect(Math.max(...differences)).toBeLessThan(0.01 * peak)
    expect(Math.max(...differences)).toBeGreaterThan(1e-5 * peak)
    expect(approximated.pieces.length).toBe(full.pieces.length)
  })
})

describe('what the sources of the nonlinear models print', () => {
  const value = (id: string, name: string): number => {
    const parameter = fileOf(id).parameters[name]
    return parameter.typical[0].value
  }

  // Grasela et al. 1983, abstract: the printed maximum rate and half-saturation; levels by Km R / (Vm - R), recomputed.
  test.each([
    [200, 5.3023255814],
    [250, 8.63636363636],
    [300, 14.8695652174],
    [350, 30.6923076923],
    [400, 152]
  ])('phenytoin: %s mg of acid a day lead to %s mg/L in an adult of 70 kg', (amount, level) => {
    expectWithin(phenytoinAverage(amount) ?? Number.NaN, level, { relative: 1e-9 })
  })

  test.each([415, 430])('phenytoin: %s mg of acid a day have no steady state', (amount) => {
    expect(phenytoinAverage(amount)).toBeUndefined()
  })

  test('ethanol: the volumes sum to the printed 35.8 L within 0.5 %', () => {
    expectWithin(value('ethanol-norberg-2000', 'VC') + value('ethanol-norberg-2000', 'VT'), 35.8, { relative: 0.005 })
  })

  test('omalizumab: half-lives of free drug and free IgE are the printed 23 and 2.4 days, and IgE some 427 ng/mL', () => {
    const of = (name: string): number => value('omalizumab-hayashi-2007', name)
    expectWithin((Math.LN2 * of('Vx')) / of('CLx') / 24, 23, { absolute: 0.5 })
    expectWithin((Math.LN2 * of('Vx')) / of('CLe') / 24, 2.4, { absolute: 0.05 })
    // nmol/h x 190 ug/nmol over mL/h is ug/mL; the source's production over clearance, 30.3 / 71.
    expectWithin((of('P') * 190) / of('CLe'), 30.3 / 71, { relative: 1e-12 })
    // Printed dissociation constant, complex in 3630 mL and drug in 5900.
    expectWithin((((of('koff') + of('kc')) / of('kon')) * 3630) / 5900, 1.07, { relative: 1e-12 })
    expectWithin(of('kc') * 3630, 7.32 + 5.86, { relative: 1e-12 })
  })
})

/** Average level at steady state of an endless oral input of acid, where there is one. */
function phenytoinAverage(amount: number): number | undefined {
  const day = { value: 24, unit: 'h' }
  const zero = { value: 0, unit: 'h' }
  const dose = { route: 'oral', product: 'phenytoin acid', over: day, at: zero, every: day }
  const text = JSON.stringify({
    format: 'phasewise-study',
    version: 1,
    title: 'a steady state',
    model: 'phenytoin-grasela-1983',
    patient: { age: { value: 30, unit: 'a' }, weight: { value: 70, unit: 'kg' }, origin: 'European' },
    regimens: [{ name: 'daily', doses: [{ ...dose, amount: { value: amount, unit: 'mg' } }] }],
    sampling: { until: { value: 48, unit: 'h' }, every: { value: 12, unit: 'h' } }
  })
  return resultOf(text).regimens[0].exposure.steadyState.average
}

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
  test('are seven, in the invented scenario', () => {
    expect(studies.length).toBe(7)
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

  test('stepped up too far: one step reaches the window, two at once have no steady state and leave it', () => {
    expect(metAll('stepped-up-too-far')).toEqual(['200 mg every 12 h from day 8'])
    const [now, step, tooFar] = resultOf(textOf('../models/studies/stepped-up-too-far.json')).regimens
    expect(now.exposure.steadyState.average).toBeLessThan(10)
    // A third more drug, more than twice the level.
    expect(step.exposure.steadyState.average).toBeGreaterThan(2 * (now.exposure.steadyState.average ?? Number.NaN))
    // 550 mg of salt a day x 0.92 x 0.95 against 500 mg/d x (62 / 70)^0.75.
    expect(tooFar.exposure.steadyState.why.average).toBe(
      'no steady state: the dose rate 480.7 mg/d is above the capacity 456.5 mg/d'
    )
    expect(step.overLimits).toEqual([])
    expect(tooFar.overLimits.map(({ of }) => of)).toEqual(['step'])
  })

  test('bound by its target: the same amount every 2 weeks after a larger first dose holds the target throughout', () => {
    expect(metAll('bound-by-its-target')).toEqual(['150 mg first, then 75 mg every 2 weeks'])
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

/** Linear amounts move through at most a dozen states, each good to some 1e-14: 1e-12 leaves room for the sums. */
function expectRow(trajectory: Trajectory, row: ExpectedRow, relative = 1e-12): void {
  const time = row.time_h
  const near = (actual: number, expected: number, what: string): void =>
    expectWithin(actual, expected, { relative }, `${what} at ${time} h`)
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
  const drugIn = (model: Model, amounts: ReadonlyVector): number =>
    sumOf(Array.from(amounts).filter((_, i) => model.compartments[i].holds === 'drug'))
  let before = drugIn(trajectory.pieces[0].segment.model, trajectory.initial.amounts)
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
      expectWithin(
        drugIn(segment.model, amounts) + gone,
        before + there,
        { absolute: 1e-12 * largest },
        'drug in and out'
      )
    }
    before = drugIn(segment.model, amounts)
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

function fileOf(id: string) {
  const model = models.find((file) => file.id === id)
  if (model === undefined) throw new RangeError(`no model ${id}`)
  return model.file
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
