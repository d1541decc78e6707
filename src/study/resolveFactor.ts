import type { CovariateUnit, Factor } from '../patient/drugModel'
import type { Quantity } from '../units/quantity'
import type { FactorFile } from './file/modelSchema'
import { type Covariate, covariateUnit } from './knownCovariates'
import { knownNames } from './nearestName'
import { below } from './path'
import type { Problems } from './problems'

/** One factor of a term, its covariate known and its unit one of that covariate's; undefined after a problem. */
export function resolveFactor(
  factor: FactorFile,
  at: string,
  covariates: ReadonlyMap<string, Covariate>,
  problems: Problems
): Factor | undefined {
  const path = below(at, 'covariate')
  const covariate = covariates.get(factor.covariate)
  if (covariate === undefined) {
    const hint =
      factor.covariate === 'dosingWeight'
        ? 'the dosing weight never enters a covariate relation; use "weight"'
        : `no covariate is called "${factor.covariate}"; ${knownNames(factor.covariate, [...covariates.keys()])}; a model declares its own under "covariates"`
    problems.add(path, hint)
    return undefined
  }
  if (factor.kind === 'category') {
    if (covariate.sort !== 'category') {
      problems.add(path, `"${factor.covariate}" is a number, a factor "category" needs a covariate with categories`)
      return undefined
    }
    return resolveCategory(factor, covariate.categories, at, problems)
  }
  if (covariate.sort === 'category') {
    problems.add(path, `"${factor.covariate}" has categories; use a factor "category"`)
    return undefined
  }
  const named = (key: string, quantity: Quantity): [number, CovariateUnit] | undefined => {
    const unit = covariateUnit(covariate, quantity.unit, below(at, key), problems)
    return unit === undefined ? undefined : [quantity.value, unit]
  }
  const { covariate: name } = factor
  switch (factor.kind) {
    case 'power': {
      const reference = named('reference', factor.reference)
      return (
        reference && {
          kind: 'power',
          covariate: name,
          reference: reference[0],
          in: reference[1],
          exponent: factor.exponent
        }
      )
    }
    case 'linear': {
      const reference = named('reference', factor.reference)
      return (
        reference && { kind: 'linear', covariate: name, reference: reference[0], in: reference[1], slope: factor.slope }
      )
    }
    case 'exponential': {
      const reference = named('reference', factor.reference)
      return (
        reference && {
          kind: 'exponential',
          covariate: name,
          reference: reference[0],
          in: reference[1],
          rate: factor.rate
        }
      )
    }
    case 'maturation': {
      const half = named('half', factor.half)
      return half && { kind: 'maturation', covariate: name, half: half[0], in: half[1], exponent: factor.exponent }
    }
    case 'step': {
      const place = named('at', factor.at)
      return (
        place && { kind: 'step', covariate: name, at: place[0], in: place[1], below: factor.below, from: factor.from }
      )
    }
  }
}

function resolveCategory(
  factor: Extract<FactorFile, { kind: 'category' }>,
  categories: readonly string[],
  at: string,
  problems: Problems
): Factor {
  const path = below(at, 'values')
  for (const key of Object.keys(factor.values)) {
    if (!categories.includes(key)) {
      problems.add(below(path, key), `"${factor.covariate}" has no category "${key}"; ${knownNames(key, categories)}`)
    }
  }
  const missing = categories.filter((category) => !Object.hasOwn(factor.values, category))
  if (missing.length > 0) {
    problems.add(path, `a value is missing for ${missing.map((category) => `"${category}"`).join(', ')}`)
  }
  return { kind: 'category', covariate: factor.covariate, values: factor.values }
}
