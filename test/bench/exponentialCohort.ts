import { kernelFor } from '../../src/numerics/kernels'
import { LinearOperators } from '../../src/numerics/linearOperators'
import type { Functional } from '../../src/numerics/operator'
import { fillMammillary, mammillary, uniformFrom } from './exponentialModels'

const N = 4
const VOLUME = 20

/**
 * Levels of a cohort at 337 hourly times over 28 oral doses of 500 mg every 12 h: one exponential a patient and a
 * matrix-vector recurrence. Returns the sum of two levels of each patient, by which the peers are compared.
 */
export function cohortChecksum(patients: number): number {
  const uniform = uniformFrom(20261)
  const none: readonly Functional[] = []
  const between = new Float64Array(N * N)
  const out = new Float64Array(N)
  const rates = { size: N, between, out }
  const operators = new LinearOperators(mammillary(N, [1, 1, 1, 1]), none, [])
  const operator = operators.create()
  const { march } = kernelFor(N)
  const states = new Float64Array(13 * N)
  const levels = new Float64Array(337)
  const scale = [0, 0, 0, 0]
  let checksum = 0
  for (let patient = 0; patient < patients; patient++) {
    for (let k = 0; k < 4; k++) scale[k] = 0.5 + uniform()
    fillMammillary(N, scale, between, out)
    operators.use(rates, none)
    operators.into(1, operator)
    for (let i = 0; i < N; i++) states[12 * N + i] = 0
    levels[0] = 0
    for (let dose = 0; dose < 28; dose++) {
      for (let i = 0; i < N; i++) states[i] = states[12 * N + i]
      states[0] += 500
      march(operator.transition, states, 12)
      for (let hour = 1; hour <= 12; hour++) levels[12 * dose + hour] = states[hour * N + 1] / VOLUME
    }
    checksum += levels[336] + levels[100]
  }
  return checksum
}
