import { exp, pow } from '../numerics/elementary'
import type { Covariate } from './covariates'
import type { CovariateUnit, Factor, Parameter } from './drugModel'
import type { CovariateName } from './person'

/** What a relation may read: every covariate that the model uses, by name. */
export type Covariates = ReadonlyMap<CovariateName, Covariate>

/** A step's bound is reached within this relative distance: a converted bound may be a rounding off. */
const REACHED = 1e-12

/**
 * Typical value of a parameter in the unit that the file states: the sum of its terms, each a coefficient times its factors.
 * May come out infinite, NaN or negative from a covariate far outside the model: the caller checks it.
 * Throws `RangeError` where a covariate is missing or of the wrong kind, which the caller must have made sure of.
 */
export function typicalValue(parameter: Pick<Parameter, 'typical'>, covariates: Covariates): number {
  let sum = 0
  for (const term of parameter.typical) {
    let product = term.value
    for (const factor of term.factors) product *= factorValue(factor, covariates)
    sum += product
  }
  return sum
}

/** Stated unit to canonical, by the exact ratio. */
export function toCanonical(parameter: Pick<Parameter, 'toCanonical'>, stated: number): number {
  return (stated * parameter.toCanonical.times) / parameter.toCanonical.per
}

/** One factor, a pure number. The covariate is first brought to the unit in which the file states the factor's numbers. */
export function factorValue(factor: Factor, covariates: Covariates): number {
  if (factor.kind === 'category') {
    const category = covariates.get(factor.covariate)?.value
    const value =
      typeof category === 'string' && Object.hasOwn(factor.values, category) ? factor.values[category] : undefined
    if (value === undefined) throw new RangeError(`no value of ${factor.covariate} for category ${category}`)
    return value
  }
  const x = inUnit(factor, covariates)
  switch (factor.kind) {
    case 'power':
      return pow(x / factor.reference, factor.exponent)
    case 'linear':
      return 1 + factor.slope * (x - factor.reference)
    case 'exponential':
      return exp(factor.rate * (x - factor.reference))
    case 'maturation':
      // x^e / (x^e + half^e), divided through by x^e: no power of a large covariate can overflow.
      return 1 / (1 + pow(factor.half / x, factor.exponent))
    case 'step':
      return x >= factor.at - REACHED * Math.abs(factor.at) ? factor.from : factor.below
  }
}

function inUnit(factor: { covariate: CovariateName; in: CovariateUnit }, covariates: Covariates): number {
  const value = covariates.get(factor.covariate)?.value
  if (typeof value !== 'number') throw new RangeError(`covariate ${factor.covariate} is not a number here: ${value}`)
  return (value * factor.in.times) / factor.in.per
}
