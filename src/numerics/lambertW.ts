import { exp, ln } from './elementary'
import { NumericalFailure } from './numericalFailure'

/** Below this logarithm w e^w = e^L is w = e^L to the last digit. */
const TINY = -40
const ROUNDS = 100
/** 2^-48: a step this small changes nothing that matters. */
const SETTLED = 3.552713678800501e-15

/**
 * Lambert W of a positive argument that is given by its logarithm, so that it may be as large as it likes: the w with
 * w + ln w = L, to about 1e-15 (1 + |L|). Newton's iteration, which rises to the root from below [function: Corless,
 * Gonnet, Hare, Jeffrey & Knuth 1996, Adv. Comput. Math. 5:329, from memory].
 */
export function lambertWOfLog(logArgument: number): number {
  if (Number.isNaN(logArgument)) throw new NumericalFailure('not-a-number', 'Lambert W of a number that is none')
  if (logArgument < TINY) return exp(logArgument)
  let w = logArgument > 1 ? logArgument - ln(logArgument) : exp(logArgument - 1)
  for (let round = 0; round < ROUNDS; round++) {
    const next = (w * (1 + logArgument - ln(w))) / (1 + w)
    if (Math.abs(next - w) <= SETTLED * w) return next
    w = next
  }
  throw new NumericalFailure('no-convergence', `Lambert W of e^${logArgument} was not found in ${ROUNDS} rounds`)
}
