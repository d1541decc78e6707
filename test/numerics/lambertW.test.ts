import { describe, expect, test } from 'vitest'
import { lambertWOfLog } from '../../src/numerics/lambertW'
import { expectWithin } from '../expectWithin'

describe('Lambert W of an argument given by its logarithm', () => {
  test('W(1) is the omega constant, W(e) is 1', () => {
    // Omega constant: OEIS A030178.
    expectWithin(lambertWOfLog(0), 0.5671432904097838, { relative: 4e-16 })
    expectWithin(lambertWOfLog(1), 1, { relative: 4e-16 })
  })

  test('w + ln w gives the logarithm back, over arguments from e^-600 to e^1e6', () => {
    for (const logArgument of [-600, -100, -41, -39, -5, -0.1, 0.5, 2, 10, 700, 1e4, 1e6]) {
      const w = lambertWOfLog(logArgument)
      expectWithin(
        w + Math.log(w),
        logArgument,
        { absolute: 4e-15 * (1 + Math.abs(logArgument)) },
        `L = ${logArgument}`
      )
    }
  })

  test('what is no number is refused', () => {
    expect(() => lambertWOfLog(Number.NaN)).toThrow('none')
  })
})
