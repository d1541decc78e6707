import type { CovariateChoices, CovariateRange, DeclaredCovariate } from '../patient/drugModel'
import type { Quantity } from '../units/quantity'
import type { Kind } from '../units/unitTable'
import { type Converter, present } from './converter'
import type { DeclaredFile, ModelFile, RangeFile } from './file/modelSchema'
import { COVARIATE_KINDS, type Covariate, covariateValue } from './knownCovariates'
import { knownNames } from './nearestName'
import { below } from './path'
import type { Problems } from './problems'

/** Keys of a patient that are no covariates, and so cannot be declared as ones. */
const RESERVED: readonly string[] = [
  'sex',
  'dosingWeight',
  'renalReplacement',
  'changes',
  'sessions',
  'at',
  ...Object.keys(COVARIATE_KINDS)
]

/** The covariates that a model declares as its own. */
export function declaredCovariates(
  file: ModelFile,
  path: string,
  problems: Problems
): Record<string, DeclaredCovariate> {
  const declared = new Map<string, DeclaredCovariate>()
  const equations: readonly string[] = ['creatinineClearance', 'estimatedGfr', 'bodySurfaceArea', 'leanWeight']
  // Computed covariates, which have an equation instead, are known by their names.
  for (const [name, own] of Object.entries(file.covariates ?? {}) as [string, DeclaredFile | undefined][]) {
    const at = below(below(path, 'covariates'), name)
    if (equations.includes(name) || own === undefined || !problems.isSound(at)) continue
    if (RESERVED.includes(name)) {
      problems.add(at, `"${name}" is known to the program and is not declared; only covariates of the model's own are`)
    } else if (own.unit !== undefined && own.categories === undefined && own.frequencies === undefined) {
      declared.set(name, { kind: 'number', unit: own.unit, ...present('asks', own.asks) })
    } else if (own.categories !== undefined && own.unit === undefined) {
      declared.set(name, {
        kind: 'category',
        categories: own.categories,
        ...present('frequencies', own.frequencies),
        ...present('asks', own.asks)
      })
      checkCategories(own.categories, own.frequencies, at, problems)
    } else {
      problems.add(at, 'a covariate of the model\'s own has either a "unit" or "categories" (with "frequencies")')
    }
  }
  return Object.fromEntries(declared)
}

function checkCategories(
  categories: readonly string[],
  frequencies: Readonly<Record<string, number>> | undefined,
  at: string,
  problems: Problems
): void {
  if (new Set(categories).size < categories.length) problems.add(below(at, 'categories'), 'a category is named twice')
  if (frequencies === undefined) return
  for (const key of Object.keys(frequencies)) {
    if (!categories.includes(key)) {
      problems.add(
        below(below(at, 'frequencies'), key),
        `there is no category "${key}"; ${knownNames(key, categories)}`
      )
    }
  }
  const sum = Object.values(frequencies).reduce((total, value) => total + value, 0)
  if (Math.abs(sum - 1) > 1e-9) problems.add(below(at, 'frequencies'), `frequencies must sum to 1, got ${sum}`)
}

/** The equations that a model states for computed covariates. */
export function covariateChoices(file: ModelFile, path: string, convert: Converter): CovariateChoices {
  const where = below(path, 'covariates')
  const { problems } = convert
  const stated = problems.isOpen(where) ? (file.covariates ?? {}) : {}
  const sound = <K extends keyof CovariateChoices>(key: K) =>
    problems.isSound(below(where, key)) ? stated[key] : undefined
  const guard = (
    kind: Kind,
    of: { creatinineAtLeast?: Quantity | undefined; atMost?: Quantity | undefined },
    at: string
  ) => ({
    ...present(
      'creatinineAtLeast',
      of.creatinineAtLeast && convert.number('creatinine', of.creatinineAtLeast, below(at, 'creatinineAtLeast'))
    ),
    ...present('atMost', of.atMost && convert.number(kind, of.atMost, below(at, 'atMost')))
  })
  const clearance = sound('creatinineClearance')
  const gfr = sound('estimatedGfr')
  const area = sound('bodySurfaceArea')
  const lean = sound('leanWeight')
  return {
    ...present(
      'creatinineClearance',
      clearance && {
        equation: clearance.equation,
        weight: clearance.weight,
        ...guard('filtration', clearance, below(where, 'creatinineClearance'))
      }
    ),
    ...present(
      'estimatedGfr',
      gfr && { equation: gfr.equation, ...guard('indexedFiltration', gfr, below(where, 'estimatedGfr')) }
    ),
    ...present('bodySurfaceArea', area && { equation: area.equation ?? 'mosteller' }),
    ...present('leanWeight', lean && { equation: lean.equation ?? 'janmahasatian' })
  }
}

/** Bounds on a covariate in its canonical unit, or the categories that were studied. */
export function resolveRange(
  range: RangeFile,
  at: string,
  covariates: ReadonlyMap<string, Covariate>,
  problems: Problems
): CovariateRange {
  const covariate = covariates.get(range.covariate)
  const unread = { covariate: range.covariate }
  if (covariate === undefined) {
    problems.add(
      below(at, 'covariate'),
      `no covariate is called "${range.covariate}"; ${knownNames(range.covariate, [...covariates.keys()])}`
    )
    return unread
  }
  if (covariate.sort === 'category') {
    if (range.categories === undefined || range.low !== undefined || range.high !== undefined) {
      problems.add(at, `"${range.covariate}" has categories: name the ones under "categories"`)
      return unread
    }
    range.categories.forEach((category, i) => {
      if (!covariate.categories.includes(category)) {
        problems.add(
          below(below(at, 'categories'), i),
          `there is no category "${category}"; ${knownNames(category, covariate.categories)}`
        )
      }
    })
    return { ...unread, categories: range.categories }
  }
  if (range.categories !== undefined)
    problems.add(below(at, 'categories'), `"${range.covariate}" is a number: give "low" or "high"`)
  if (range.low === undefined && range.high === undefined) problems.add(at, 'a range needs "low" or "high"')
  const low = range.low && covariateValue(covariate, range.low, below(at, 'low'), problems)
  const high = range.high && covariateValue(covariate, range.high, below(at, 'high'), problems)
  if (low !== undefined && high !== undefined && low > high) problems.add(at, 'low is above high')
  return { ...unread, ...present('low', low), ...present('high', high) }
}
