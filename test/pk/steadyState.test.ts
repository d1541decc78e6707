import { describe, expect, test } from 'vitest'
import { expectWithin } from '../expectWithin'
import { exposureFor, target } from './exposures'
import { hours, line, mammillary, oneCompartment, subjectOf } from './subjects'

const precise = { relative: 1e-9 }

// The woman of 71 years of the PW-101 model (invented): CL 1.5016, V1 17.4, Q 9, V2 38. Values to 9 digits were computed
// from exponential sums with independent code.
const pw101 = subjectOf(mammillary({ volumes: [17.4, 38], clearance: 1.5016171875, exchanges: [9] }))

/** The number, or a failure that prints the reason why there is none. */
function number(value: number | undefined, why: string | undefined): number {
  if (value === undefined) throw new Error(`not defined: ${why}`)
  return value
}

describe('accumulation, two compartments, 750 mg over 1 h', () => {
  test.each([
    [24, 2.04848505, 24.8382647],
    [12, 3.24134975, 22.5467743]
  ])('every %s h: ratio %s, effective half-life %s h', (interval, ratio, half) => {
    const { steadyState } = exposureFor(pw101, [line(750, { over: 1, every: hours(interval) })], 168)
    const { accumulationRatio, effectiveHalfLife, operationalHalfLife, why } = steadyState
    expectWithin(number(accumulationRatio, why.accumulationRatio), ratio, { relative: 5e-9 })
    expectWithin(number(effectiveHalfLife, why.effectiveHalfLife), half, { relative: 5e-9 })
    expectWithin(number(operationalHalfLife, why.operationalHalfLife), 11.8489555, { relative: 5e-9 })
    expect(steadyState.period).toBe(interval)
    expectWithin(number(steadyState.auc24, why.auc24), (750 * 24) / interval / 1.5016171875, { relative: 1e-13 })
  })
})
