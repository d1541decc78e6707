import type { Issue } from '../pk/issue'
import type { Route, Subject, WeightDescriptor } from '../pk/subject'
import type { Kilograms } from '../units/canonical'
import { ageIssues } from './ages'
import { surfaceAreaOf } from './bodyEstimates'
import type { Covariate } from './covariates'
import type { DrugModel } from './drugModel'
import { type Finding, findingsOf } from './findings'
import { covariatesFor } from './needs'
import { type ParameterValue, parameterValues } from './parameterValues'
import type { Person } from './person'
import { outsideValid } from './ranges'
import { WEIGHT_DESCRIPTORS, weightBy } from './weightDescriptor'
import { writtenOut } from './writtenOut'

/** What a drug model and a person make together: numbers to compute with, and what must be read beside them. */
export interface Individual {
  readonly subject: Subject
  /** Typical values for this person, by name, in the order of the file. */
  readonly parameters: ReadonlyMap<string, ParameterValue>
  /** The covariates that the model reads, with how each was obtained. */
  readonly covariates: readonly Covariate[]
  readonly findings: readonly Finding[]
}

export type IndividualOrIssues =
  | { readonly ok: true; readonly individual: Individual }
  | { readonly ok: false; readonly issues: readonly Issue[] }

/**
 * One individual: covariates found or computed, parameters at their typical values, the model with these numbers in it,
 * routes with their bioavailability and lag. `path` is where the person's values stand in the file, for the issues:
 * something missing, ages that contradict, a covariate outside `valid`, a parameter that cannot be.
 */
export function individual(drugModel: DrugModel, person: Person, path: string): IndividualOrIssues {
  const { covariates, issues: missing } = covariatesFor(drugModel, person, path)
  const early = [...ageIssues(person, path), ...missing, ...outsideValid(drugModel, person, path)]
  if (early.length > 0) return { ok: false, issues: early }

  const { values: parameters, issues: impossible } = parameterValues(drugModel, covariates, path)
  if (impossible.length > 0) return { ok: false, issues: impossible }

  const value = (name: string): number => {
    const found = parameters.get(name)
    if (found === undefined) throw new RangeError(`no parameter ${name} in model ${drugModel.id}`)
    return found.value
  }
  const out = writtenOut(drugModel, value)
  if (!out.ok) return out
  const routes = drugModel.routes.map((route) => routeOf(route, value, out.indexOf))
  const uneven = unevenRoutes(routes, path)
  if (uneven.length > 0) return { ok: false, issues: uneven }

  const surfaceArea = surfaceForDoses(person)
  const subject: Subject = {
    model: out.model,
    routes,
    weights: weightsForDoses(drugModel, person),
    ...(person.dosingWeight === undefined ? {} : { dosingWeight: person.dosingWeight }),
    ...(surfaceArea === undefined ? {} : { surfaceArea })
  }
  return {
    ok: true,
    individual: {
      subject,
      parameters,
      covariates: [...covariates.values()],
      findings: findingsOf(drugModel, person, covariates)
    }
  }
}

function routeOf(
  route: DrugModel['routes'][number],
  value: (name: string) => number,
  indexOf: ReadonlyMap<string, number>
): Route {
  return {
    name: route.name,
    input: route.input,
    bioavailability: route.bioavailability === undefined ? 1 : value(route.bioavailability),
    lag: route.lag === undefined ? 0 : value(route.lag),
    parts: route.parts.map((part) => {
      const into = indexOf.get(part.into)
      if (into === undefined) throw new RangeError(`route ${route.name} leads to ${part.into}, which holds no drug`)
      return {
        into,
        fraction: typeof part.fraction === 'string' ? value(part.fraction) : part.fraction,
        lag: part.lag === undefined ? 0 : value(part.lag),
        ...(part.over === undefined ? {} : { over: value(part.over) })
      }
    })
  }
}

/** Drug neither appears nor vanishes on the way in: the parts of a route sum to 1. */
function unevenRoutes(routes: readonly Route[], path: string): readonly Issue[] {
  return routes.flatMap((route) => {
    const sum = route.parts.reduce((total, part) => total + part.fraction, 0)
    if (Math.abs(sum - 1) <= 1e-9) return []
    return [{ path, message: `the fractions of the parts of route ${route.name} come to ${sum}, and must sum to 1` }]
  })
}

function weightsForDoses(drugModel: DrugModel, person: Person): Subject['weights'] {
  const weights: Partial<Record<WeightDescriptor, Kilograms>> = {}
  for (const word of WEIGHT_DESCRIPTORS) {
    const weight = weightBy(word, person, drugModel.covariates.leanWeight?.equation ?? 'janmahasatian')
    if (weight.kind === 'computed') weights[word] = weight.value
  }
  return weights
}

/** mg/m2 uses the surface area that was given, else Mosteller's, whatever the model's covariate relations use. */
function surfaceForDoses(person: Person): number | undefined {
  const given = person.numbers.bodySurfaceArea
  if (given !== undefined) return given
  const area = surfaceAreaOf('mosteller', person)
  return area.kind === 'computed' ? area.value : undefined
}
