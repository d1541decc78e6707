import type {
  CovariateChoices,
  CovariateRange,
  DeclaredCovariate,
  DoseLimit,
  Drug,
  DrugModel
} from '../patient/drugModel'
import type { Quantity } from '../units/quantity'
import type { Kind } from '../units/unitTable'
import { Converter, present } from './converter'
import type { ModelFile, RangeFile } from './file/modelSchema'
import { COMPUTED, COVARIATE_KINDS, type Covariate, covariateValue, knownCovariates } from './knownCovariates'
import { knownNames } from './nearestName'
import { below } from './path'
import type { Problems } from './problems'
import { kindOf, resolveParameters } from './resolveParameters'
import { resolveStructure } from './resolveStructure'
import { open } from './soundMembers'

/** A model read as far as it could be; complete where its file has no problem. */
export interface ResolvedModel {
  readonly drugModel: DrugModel
  readonly covariates: ReadonlyMap<string, Covariate>
  readonly convert: Converter
  /** What each parameter is, by its use. */
  readonly kindOfParameter: (name: string) => Kind | undefined
}

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

/** Computed covariates that a model uses only after it has said by which equation. */
const NEEDING_EQUATION = {
  creatinineClearance: 'creatinineClearance',
  estimatedGfr: 'estimatedGfr',
  absoluteGfr: 'estimatedGfr'
} as const

/** A model file, its shape already compared, in names that exist and canonical units. Every problem goes to `problems`. */
export function resolveModel(file: ModelFile, path: string, problems: Problems): ResolvedModel {
  const at = (key: string) => below(path, key)
  const sound = <K extends keyof ModelFile & string>(key: K) => (problems.isSound(at(key)) ? file[key] : undefined)
  const drugFile = sound('drug')
  const convert = new Converter(problems, molarMass(drugFile))
  const declared = problems.isOpen(at('covariates')) ? declaredCovariates(file, path, problems) : {}
  const covariates = knownCovariates(declared)
  const structure = resolveStructure(file, path, problems)
  const parameters = resolveParameters({ file, path, uses: structure.uses, covariates, convert })
  const choices = covariateChoices(file, path, convert)
  const ranges = (list: readonly RangeFile[] | undefined, where: string) =>
    [...open(list, where, problems)].map(([place, range]) => resolveRange(range, place, covariates, problems))
  const studied = problems.isOpen(at('studied')) ? file.studied : undefined
  const source = sound('source')
  if (source?.kind === 'published' && file.studied === undefined) {
    problems.add(at('studied'), 'a published model says whom it was built on: "studied" with a description is missing')
  }
  const valid = ranges(file.valid, at('valid'))
  checkEquations({ choices, parameters, valid }, path, problems)
  const { uses, ...parts } = structure
  const drugModel: DrugModel = {
    id: file.id,
    title: file.title,
    drug: drugFile === undefined ? UNREAD_DRUG : resolveDrug(drugFile, at('drug'), convert),
    apparent: file.apparent === true,
    source: {
      kind: source?.kind ?? 'user',
      citation: source?.citation ?? '',
      cautions: source?.cautions ?? [],
      ...present('doi', source?.doi),
      ...present('read', source?.read)
    },
    ...(studied !== undefined && {
      studied: {
        description: studied.description,
        ranges: ranges(studied.ranges, below(at('studied'), 'ranges')),
        ...present('subjects', studied.subjects)
      }
    }),
    covariates: choices,
    declared,
    parameters,
    valid,
    ...parts
  }
  const units = new Map(parameters.map(({ name, unit }) => [name, unit]))
  return { drugModel, covariates, convert, kindOfParameter: (name) => kindOf(name, units.get(name) ?? '', uses) }
}

const UNREAD_DRUG: Drug = { name: '', moiety: '', matrix: '', products: [], limits: [] }

function molarMass(drug: ModelFile['drug'] | undefined): number | undefined {
  if (drug?.molarMass === undefined) return undefined
  return drug.molarMass.unit === 'kg/mol' ? drug.molarMass.value * 1000 : drug.molarMass.value
}

function resolveDrug(drug: ModelFile['drug'], path: string, convert: Converter): Drug {
  const products = drug.products ?? []
  products.forEach((product, i) => {
    if (products.findIndex((other) => other.name === product.name) < i) {
      convert.problems.add(
        below(below(below(path, 'products'), i), 'name'),
        `there is another product "${product.name}"; names are unique`
      )
    }
  })
  const sampleAfter = drug.sampleAfter
  return {
    name: drug.name,
    moiety: drug.moiety,
    matrix: drug.matrix,
    products,
    limits: (drug.limits ?? []).map((limit, i) => {
      const at = below(below(path, 'limits'), i)
      if (limit.product !== undefined && !products.some((product) => product.name === limit.product)) {
        const known = products.map((product) => product.name)
        convert.problems.add(
          below(at, 'product'),
          `no product is called "${limit.product}"; ${knownNames(limit.product, known)}`
        )
      }
      const kind = limit.of === 'rate' ? 'amountRate' : 'amount'
      const resolved: DoseLimit = {
        of: limit.of,
        value: convert.number(kind, limit.value, below(at, 'value')),
        source: limit.source,
        ...present('product', limit.product)
      }
      return resolved
    }),
    ...present('molarMass', convert.molarMass),
    ...present('fractionUnbound', drug.fractionUnbound),
    ...(sampleAfter !== undefined && {
      sampleAfter: {
        delay: convert.number('time', sampleAfter, below(path, 'sampleAfter')),
        from: sampleAfter.from,
        ...present('source', sampleAfter.source)
      }
    })
  }
}

function declaredCovariates(file: ModelFile, path: string, problems: Problems): Record<string, DeclaredCovariate> {
  const declared = new Map<string, DeclaredCovariate>()
  const equations: readonly string[] = ['creatinineClearance', 'estimatedGfr', 'bodySurfaceArea', 'leanWeight']
  for (const [name, own] of Object.entries(file.covariates ?? {})) {
    const at = below(below(path, 'covariates'), name)
    if (equations.includes(name) || own === undefined || !problems.isSound(at) || 'equation' in own) continue
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

function covariateChoices(file: ModelFile, path: string, convert: Converter): CovariateChoices {
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
    ...present('bodySurfaceArea', sound('bodySurfaceArea')),
    ...present('leanWeight', sound('leanWeight'))
  }
}

function resolveRange(
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

/** A renal covariate that can be computed in several ways needs its equation stated where the model uses it. */
function checkEquations(
  model: Pick<DrugModel, 'parameters' | 'valid'> & { choices: CovariateChoices },
  path: string,
  problems: Problems
): void {
  const used = new Set<string>(model.valid.map((range) => range.covariate))
  for (const { typical } of model.parameters) {
    for (const term of typical) for (const factor of term.factors) used.add(factor.covariate)
  }
  for (const name of COMPUTED) {
    const key = name in NEEDING_EQUATION ? NEEDING_EQUATION[name as keyof typeof NEEDING_EQUATION] : undefined
    if (key === undefined || !used.has(name) || model.choices[key] !== undefined) continue
    if (!problems.isSound(below(below(path, 'covariates'), key))) continue
    const words = key === 'creatinineClearance' ? 'its equation and its weight' : 'its equation'
    problems.add(below(path, 'covariates'), `the model uses ${name}; state ${words} under "${key}"`)
  }
}
