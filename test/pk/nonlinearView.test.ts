import { describe, expect, test } from 'vitest'
import { courseOf } from '../../src/pk/course'
import type { Model } from '../../src/pk/model'
import { type NonlinearView, nonlinearView } from '../../src/pk/nonlinearView'
import type { DoseLine } from '../../src/pk/prescription'
import { expectWithin } from '../expectWithin'
import { target } from './exposures'
import { mixed, saturable } from './nonlinearModels'
import { hours, line, oneCompartment, subjectOf } from './subjects'

const volume = 49
const half = 5.7
const daily = 415
const phenytoin = saturable({ volume, maximumRate: daily / 24, halfSaturation: half })
const window = target({ kind: 'window', low: 10, high: 20 })

function viewOf(
  lines: readonly DoseLine[],
  { model = phenytoin, until = 28 * 24, now }: { model?: Model; until?: number; now?: number } = {}
): NonlinearView | string | undefined {
  const request = {
    prescription: { name: 'regimen', start: 'empty' as const, lines },
    stretches: [{ from: 0, subject: subjectOf(model) }],
    sessions: [],
    until,
    path: 'regimens[0]'
  }
  const outcome = courseOf(request)
  if (!outcome.ok) throw new Error(JSON.stringify(outcome.issues))
  return nonlinearView({ course: outcome.course, request, window, ...(now !== undefined && { now }) })
}

function definedView(...given: Parameters<typeof viewOf>): NonlinearView {
  const view = viewOf(...given)
  if (view === undefined || typeof view === 'string') throw new Error(`no view: ${view}`)
  return view
}

function number(value: number | undefined): number {
  return value ?? Number.NaN
}

/** Steady state of daily boluses [mg] by the integrated Michaelis-Menten equation (Beal 1982, from memory). */
function closedForm(dose: number, maximum = daily): { average: number; peak: number } {
  const rise = dose / volume
  const trough = rise / Math.expm1((maximum - dose) / (volume * half))
  return { average: ((volume / maximum) * rise * (half + trough + rise / 2)) / 1, peak: trough + rise }
}

describe('the view of daily boluses into one saturable compartment', () => {
  const view = definedView([line(250, { every: hours(24) })])

  test('goes up to 95 % of capacity, ascending, with the present dose in it', () => {
    expectWithin(number(view.capacity?.rate), daily / 24, { relative: 1e-12 })
    const rates = view.curve.map(({ doseRate }) => doseRate * 24)
    expect(rates).toEqual([...rates].sort((a, b) => a - b))
    expectWithin(number(rates.at(-1)), 0.95 * daily, { relative: 1e-12 })
    expect(view.curve.filter(({ factor }) => factor === 1)).toHaveLength(1)
    for (const { doseRate, average, peak } of view.curve) {
      const expected = closedForm(24 * doseRate)
      expectWithin(average, expected.average, { relative: 1e-3 }, `${24 * doseRate} mg/d`)
      expectWithin(peak, expected.peak, { relative: 1e-3 }, `${24 * doseRate} mg/d`)
    }
  })

  test('marks the present dose, with the slope there', () => {
    expectWithin(24 * view.doseRate, 250, { relative: 1e-12 })
    expectWithin(number(view.current?.average), closedForm(250).average, { relative: 1e-7 })
    expectWithin(number(view.current?.peak), closedForm(250).peak, { relative: 1e-7 })
    const slope = (closedForm(250.01).average - closedForm(249.99).average) / (0.02 / 24)
    expectWithin(number(view.slope), slope, { relative: 1e-4 })
  })

  test('shows 80 % of capacity', () => {
    expectWithin(24 * number(view.at80?.doseRate), 332, { relative: 1e-12 })
    expectWithin(number(view.at80?.average), closedForm(332).average, { relative: 1e-7 })
  })

  test('finds the largest next step, and what it gives at a 15 % lower maximum rate', () => {
    const step = view.nextStep
    if (step === undefined) throw new Error(view.why.nextStep)
    expect(step.peak).toBeLessThanOrEqual(20)
    expectWithin(step.peak, 20, { relative: 1e-6 })
    expectWithin(closedForm(24 * step.doseRate).peak, 20, { relative: 1e-6 })
    expectWithin(step.rise, step.doseRate - 250 / 24, { relative: 1e-12 })
    if (typeof step.atLowerMaximum === 'string') throw new Error(step.atLowerMaximum)
    const lower = closedForm(24 * step.doseRate, 0.85 * daily)
    expectWithin(step.atLowerMaximum.average, lower.average, { relative: 1e-6 })
    expectWithin(step.atLowerMaximum.peak, lower.peak, { relative: 1e-6 })
  })

  test('gives instantaneous half-lives at the window and at the steady state', () => {
    expect(view.halfLives.map(({ of }) => of)).toEqual(['low limit', 'high limit', 'minimum', 'average', 'peak'])
    for (const { level, halfLife } of view.halfLives) {
      expectWithin(halfLife, (Math.LN2 * (half + level) * volume) / (daily / 24), { relative: 1e-11 })
    }
  })

  test('counts the time to 90 % of a change from the present', () => {
    const now = 5 * 24
    const early = definedView([line(250, { every: hours(24) })], { now })
    // Areas of daily windows by the closed form from dose to dose, half-lives of days apart: recomputed here step by step.
    const level = (initial: number): number => {
      let [low, high] = [0, initial]
      for (let k = 0; k < 200; k++) {
        const middle = (low + high) / 2
        const time = ((initial - middle + half * Math.log(initial / middle)) * volume) / daily
        if (time > 1) low = middle
        else high = middle
      }
      return high
    }
    const areas: number[] = []
    let trough = 0
    for (let day = 0; day < 200; day++) {
      const initial = trough + 250 / volume
      trough = level(initial)
      areas.push((volume / daily) * (initial - trough) * (half + (initial + trough) / 2))
    }
    const goal = closedForm(250).average
    const change = Math.abs(goal - areas[4])
    let last = 0
    for (let k = 5; k < 200; k++) if (Math.abs(areas[k] - goal) > 0.1 * change) last = k - 4
    expect(early.reached90OfChange).toBe(24 * (last + 1))
  })
})

describe('the view of other regimens', () => {
  test('above capacity has a curve and reasons', () => {
    const view = definedView([line(430, { every: hours(24) })])
    const why = 'no steady state: the dose rate 430 mg/d is above the capacity 415 mg/d'
    for (const name of ['current', 'slope', 'reached90OfChange', 'nextStep']) expect(view.why[name]).toBe(why)
    expect(view.curve.length).toBeGreaterThan(10)
    expectWithin(number(view.at80?.average), closedForm(332).average, { relative: 1e-7 })
  })

  test('already above the window has no next step', () => {
    const view = definedView([line(350, { every: hours(24) })])
    expect(view.nextStep).toBeUndefined()
    expect(view.why.nextStep).toBe('the steady state of the present dose is not under the window’s top')
  })

  test('a step that a 15 % lower maximum rate cannot carry says so', () => {
    const narrow = saturable({ volume, maximumRate: daily / 24, halfSaturation: 0.5 })
    const view = definedView([line(200, { every: hours(12) })], { model: narrow })
    expect(view.nextStep?.atLowerMaximum).toMatch(
      /^no steady state: the dose rate .* is above the capacity 352.8 mg\/d$/
    )
  })

  test('an endless infusion alone: Css = Km R / (Vmax - R), its slope Km Vmax / (Vmax - R)^2', () => {
    const view = definedView([line(300 * 28, { over: 28 * 24 })])
    for (const { doseRate, average } of view.curve) {
      const rate = 24 * doseRate
      expectWithin(average, (half * rate) / (daily - rate), { relative: 1e-9 })
    }
    expectWithin(number(view.slope), (24 * half * daily) / (daily - 300) ** 2, { relative: 1e-4 })
    // R at Css 20: 322.957198444 mg/d (K26, Grasela, Sheiner et al. 1983, recomputed with independent code).
    expectWithin(24 * number(view.nextStep?.doseRate), 322.957198444, { relative: 1e-6 })
  })

  test('without a capacity goes to three times the present dose', () => {
    const view = definedView([line(100, { every: hours(12) })], { model: mixed() })
    expect(view.capacity).toBeUndefined()
    expect(view.at80).toBeUndefined()
    expect(view.why.capacity).toBe('nothing limits how much can leave the body')
    expect(view.why.at80).toBe(view.why.capacity)
    const last = view.curve.at(-1)
    expectWithin(number(last?.factor), 2.85, { relative: 1e-12 })
    // More than in proportion: the saturable path carries less and less of it.
    const [first] = view.curve
    expect(number(last?.average) / number(last?.factor)).toBeGreaterThan(first.average / first.factor)
  })

  test('is none for a linear model, and for a regimen that does not repeat', () => {
    const linear = oneCompartment({ volume: 20, k: 0.1 })
    expect(viewOf([line(100, { every: hours(12) })], { model: linear })).toBeUndefined()
    expect(viewOf([line(100)])).toBe('no dose repeats at the end')
  })
})
