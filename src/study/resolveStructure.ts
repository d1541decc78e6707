import type { DrugModel, DrugRoute, DrugTransfer } from '../patient/drugModel'
import { checkBindings } from './checkBindings'
import { present } from './converter'
import type { ModelFile } from './file/modelSchema'
import { ModelNames, type ParameterUse } from './modelNames'
import { below } from './path'
import type { Problems } from './problems'
import { resolveTransfer } from './resolveTransfer'
import { open } from './soundMembers'

export type Structure = Pick<DrugModel, 'compartments' | 'transfers' | 'routes' | 'observations'> & {
  /** Where each parameter is used, and as what. */
  readonly uses: ReadonlyMap<string, readonly ParameterUse[]>
}

/** Compartments, transfers, routes and observations, every name in them checked. */
export function resolveStructure(file: ModelFile, path: string, problems: Problems): Structure {
  const names = new ModelNames(file, path, problems)
  for (const [i, compartment] of open(file.compartments, below(path, 'compartments'), problems)) {
    if (compartment.volume !== undefined) names.parameter(compartment.volume, 'volume', `${i}.volume`)
  }
  checkObserved(names, below(path, 'compartments'), problems)
  const transfers: DrugTransfer[] = []
  for (const [at, transfer] of open(file.transfers, below(path, 'transfers'), problems)) {
    const resolved = resolveTransfer(transfer, at, names)
    if (resolved !== undefined) transfers.push(resolved)
  }
  checkBindings(file, path, names)
  return {
    compartments: [...names.compartments.values()],
    transfers: inOrderOfSites(transfers, [...names.compartments.keys()]),
    routes: resolveRoutes(file, path, names),
    observations: resolveObservations(file, path, names),
    uses: names.uses
  }
}

/** Effect transfers change places among themselves so that effect sites count in the order of the compartments. */
function inOrderOfSites(transfers: readonly DrugTransfer[], order: readonly string[]): DrugTransfer[] {
  const effects = transfers.filter((transfer) => transfer.kind === 'effect')
  effects.sort((a, b) => order.indexOf(a.to) - order.indexOf(b.to))
  return transfers.map((transfer) => (transfer.kind === 'effect' ? (effects.shift() ?? transfer) : transfer))
}

function checkObserved(names: ModelNames, path: string, problems: Problems): void {
  if (!problems.isSound(path)) return
  const observed = [...names.compartments.values()].filter((compartment) => compartment.observed)
  const [first, second] = observed
  if (first === undefined) {
    problems.add(path, 'no compartment is observed; mark the one whose concentration is measured with "observed": true')
  } else if (second !== undefined) {
    problems.add(path, `exactly one compartment is observed, not ${observed.map(({ id }) => `"${id}"`).join(' and ')}`)
  }
  ;[...names.compartments.values()].forEach(({ id, volume, observed: isObserved }, i) => {
    const at = below(path, i)
    if (names.effectSites.has(id)) {
      if (isObserved)
        problems.add(below(at, 'observed'), `"${id}" is an effect site and cannot be the observed compartment`)
      if (volume !== undefined) problems.add(below(at, 'volume'), `"${id}" is an effect site, which has no volume`)
    } else if (isObserved && volume === undefined) {
      problems.add(at, `the observed compartment "${id}" needs a volume; name its parameter under "volume"`)
    }
  })
}

const INTRAVENOUS = /intraven|^i\.?v\.?(?:$|[^a-z])/i

function resolveRoutes(file: ModelFile, path: string, names: ModelNames): DrugRoute[] {
  const { problems } = names
  const routes: DrugRoute[] = []
  const seen = new Set<string>()
  for (const [at, route] of open(file.routes, below(path, 'routes'), problems)) {
    if (seen.has(route.name))
      problems.add(below(at, 'name'), `there is another route "${route.name}"; names are unique`)
    seen.add(route.name)
    if ((route.into === undefined) === (route.parts === undefined)) {
      problems.add(at, 'a route needs either "into" or "parts"')
    }
    const parts = route.parts?.map((part, i) => resolvePart(part, below(below(at, 'parts'), i), names))
    const known = route.parts?.map((part) => part.fraction).filter((fraction) => typeof fraction === 'number')
    const sum = known?.reduce((total, fraction) => total + fraction, 0)
    if (sum !== undefined && route.parts !== undefined) {
      const whole = known?.length === route.parts.length
      if (whole ? Math.abs(sum - 1) > 1e-9 : sum > 1 + 1e-9) {
        problems.add(below(at, 'parts'), `the fractions of the parts must sum to 1, got ${sum}`)
      }
    }
    const into = route.into === undefined ? undefined : names.compartment(route.into, below(at, 'into'))
    const resolved: DrugRoute = {
      name: route.name,
      input: route.input ?? 'bolus',
      parts: parts ?? (into === undefined ? [] : [{ into, fraction: 1 }]),
      ...present(
        'bioavailability',
        route.bioavailability && names.parameter(route.bioavailability, 'fraction', below(at, 'bioavailability'))
      ),
      ...present('lag', route.lag && names.parameter(route.lag, 'time', below(at, 'lag')))
    }
    if (file.apparent === true) checkApparent(resolved, at, names)
    routes.push(resolved)
  }
  return routes
}

type PartFile = NonNullable<ModelFile['routes'][number]['parts']>[number]

function resolvePart(part: PartFile, at: string, names: ModelNames): DrugRoute['parts'][number] {
  return {
    into: names.compartment(part.into, below(at, 'into')),
    fraction:
      typeof part.fraction === 'number'
        ? part.fraction
        : names.parameter(part.fraction, 'fraction', below(at, 'fraction')),
    ...present('lag', part.lag && names.parameter(part.lag, 'time', below(at, 'lag'))),
    ...present('over', part.over && names.parameter(part.over, 'time', below(at, 'over')))
  }
}

/** Apparent clearances and volumes contain 1/F, so that a dose given straight into the blood would be overstated by F. */
function checkApparent(route: DrugRoute, at: string, names: ModelNames): void {
  const intoObserved = route.parts.some((part) => names.compartments.get(part.into)?.observed === true)
  if (route.input === 'infusion' || (INTRAVENOUS.test(route.name) && intoObserved)) {
    names.problems.add(
      at,
      `"${route.name}" is an intravenous route, but the model is apparent (its clearances and volumes contain 1/F); leave the route out`
    )
  }
}

function resolveObservations(
  file: ModelFile,
  path: string,
  names: ModelNames
): { id: string; of: readonly string[] }[] {
  const { problems } = names
  const taken = new Set(names.compartments.keys())
  const observations: { id: string; of: readonly string[] }[] = []
  for (const [at, observation] of open(file.observations, below(path, 'observations'), problems)) {
    if (taken.has(observation.id)) {
      problems.add(below(at, 'id'), `"${observation.id}" names a compartment or another observation already`)
    }
    taken.add(observation.id)
    observation.of.forEach((id, i) => {
      names.compartment(id, below(below(at, 'of'), i))
      if (observation.of.indexOf(id) < i) problems.add(below(below(at, 'of'), i), `"${id}" is counted twice`)
    })
    const volumes = new Set(
      observation.of.map((id) => names.compartments.get(id)?.volume).filter((id) => id !== undefined)
    )
    if (volumes.size !== 1) {
      problems.add(below(at, 'of'), 'the compartments of an observation share one volume, which one of them must name')
    }
    observations.push({ id: observation.id, of: observation.of })
  }
  return observations
}
