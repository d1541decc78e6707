import type { Issue } from '../pk/issue'
import type { Compartment, EffectSite, Model, Observation, Transfer } from '../pk/model'
import { significant } from './covariateWords'
import type { DrugModel, DrugTransfer } from './drugModel'

/** What one individual's numbers turn the file's compartments and transfers into. */
export type WrittenOut =
  | { readonly ok: true; readonly model: Model; readonly indexOf: ReadonlyMap<string, number> }
  | { readonly ok: false; readonly issues: readonly Issue[] }

/**
 * The file's transfers as the core's. An exchange becomes two arrows, its clearance divided by each volume; a clearance an
 * arrow out at clearance / volume; a transit a chain of n compartments and n + 1 arrows, placed after `from`; an effect site
 * leaves the compartments. `value` gives the canonical value of a parameter.
 * A compartment without the volume that a transfer divides by is an issue at the transfer.
 */
export function writtenOut(drugModel: DrugModel, value: (name: string) => number): WrittenOut {
  const sites = new Set(drugModel.transfers.flatMap((transfer) => (transfer.kind === 'effect' ? [transfer.to] : [])))
  const targets = new Set(
    drugModel.transfers.flatMap((transfer) => (transfer.kind === 'binding' ? [transfer.target] : []))
  )
  const compartments: Compartment[] = []
  const chains = new Map<DrugTransfer, readonly number[]>()
  const indexOf = new Map<string, number>()
  for (const { id, volume } of drugModel.compartments) {
    if (sites.has(id)) continue
    indexOf.set(id, compartments.length)
    compartments.push({
      name: id,
      ...(volume === undefined ? {} : { volume: value(volume) }),
      column: id,
      holds: targets.has(id) ? 'target' : 'drug'
    })
    for (const transfer of drugModel.transfers)
      if (transfer.kind === 'transit' && transfer.from === id) chains.set(transfer, addStages(transfer, compartments))
  }

  const issues: Issue[] = []
  const at = (id: string): number => {
    const index = indexOf.get(id)
    if (index === undefined) throw new RangeError(`no compartment ${id} in model ${drugModel.id}`)
    return index
  }
  const volumeFor = (id: string, path: string): number => {
    const volume = compartments[at(id)]?.volume
    if (volume !== undefined) return volume
    issues.push({ path, message: `compartment ${id} needs a volume for this transfer` })
    return 1
  }

  const transfers: Transfer[] = []
  const effectSites: EffectSite[] = []
  const arrow = (from: number, to: number | 'eliminated', rate: number) =>
    transfers.push({ kind: 'first-order', from, to, rate })
  drugModel.transfers.forEach((transfer, position) => {
    const path = `model.transfers[${position}]`
    switch (transfer.kind) {
      case 'first-order':
        arrow(at(transfer.from), at(transfer.to), value(transfer.rate))
        break
      case 'elimination':
        arrow(at(transfer.from), 'eliminated', value(transfer.rate))
        break
      case 'clearance':
        arrow(at(transfer.from), 'eliminated', value(transfer.clearance) / volumeFor(transfer.from, path))
        break
      case 'exchange': {
        const [here, there] = transfer.between
        if ('clearance' in transfer) {
          const flow = value(transfer.clearance)
          arrow(at(here), at(there), flow / volumeFor(here, path))
          arrow(at(there), at(here), flow / volumeFor(there, path))
        } else {
          arrow(at(here), at(there), value(transfer.rates[0]))
          arrow(at(there), at(here), value(transfer.rates[1]))
        }
        break
      }
      case 'transit': {
        const stops = [at(transfer.from), ...(chains.get(transfer) ?? []), at(transfer.to)]
        for (let i = 0; i + 1 < stops.length; i++) arrow(stops[i]!, stops[i + 1]!, value(transfer.rate))
        break
      }
      case 'effect':
        volumeFor(transfer.from, path)
        effectSites.push({ name: transfer.to, source: at(transfer.from), rate: value(transfer.rate) })
        break
      case 'saturable':
        volumeFor(transfer.from, path)
        transfers.push({
          kind: 'saturable',
          from: at(transfer.from),
          to: transfer.to === undefined ? 'eliminated' : at(transfer.to),
          maximumRate: value(transfer.maximumRate),
          halfSaturation: value(transfer.halfSaturation),
          hill: typeof transfer.hill === 'string' ? value(transfer.hill) : (transfer.hill ?? 1)
        })
        break
      case 'binding':
        volumeFor(transfer.drug, path)
        transfers.push({
          kind: 'binding',
          drug: at(transfer.drug),
          target: at(transfer.target),
          complex: at(transfer.complex),
          association: value(transfer.association),
          dissociation: value(transfer.dissociation),
          approximation: transfer.approximation
        })
        break
      case 'production':
        transfers.push({ kind: 'production', into: at(transfer.into), rate: value(transfer.rate) })
        break
    }
  })

  issues.push(...excessiveProduction(drugModel, { compartments, transfers }))

  const observations = drugModel.observations.flatMap((observation, position): Observation[] => {
    const of = observation.of.map(at)
    const volumes = of.flatMap((index) => compartments[index]?.volume ?? [])
    const volume = volumes[0]
    const path = `model.observations[${position}]`
    if (volume === undefined) {
      issues.push({
        path,
        message: `${observation.id} needs a compartment with a volume among ${observation.of.join(', ')}`
      })
      return []
    }
    if (volumes.some((other) => other !== volume)) {
      issues.push({
        path,
        message: `${observation.id} adds amounts that share one volume, but ${observation.of.join(', ')} have different ones`
      })
    }
    return [{ name: observation.id, of, volume }]
  })

  const seen = drugModel.compartments.find((compartment) => compartment.observed)
  const observed = seen === undefined ? undefined : indexOf.get(seen.id)
  if (observed === undefined || compartments[observed]?.volume === undefined)
    issues.push({
      path: 'model.compartments',
      message: 'exactly one compartment must be observed, and it needs a volume'
    })
  if (issues.length > 0 || observed === undefined) return { ok: false, issues }
  return { ok: true, model: { compartments, transfers, effectSites, observed, observations }, indexOf }
}

/** A target that is lost by saturable paths alone has a drug-free steady state only where they can carry what is produced. */
function excessiveProduction(
  drugModel: DrugModel,
  { compartments, transfers }: Pick<Model, 'compartments' | 'transfers'>
) {
  return compartments.flatMap(({ name, holds }, place): Issue[] => {
    if (holds !== 'target') return []
    let produced = 0
    let lost = 0
    for (const transfer of transfers) {
      if (transfer.kind === 'production' && transfer.into === place) produced += transfer.rate
      if (transfer.kind === 'saturable' && transfer.from === place) lost += transfer.maximumRate
      if (transfer.kind === 'first-order' && transfer.from === place) return []
    }
    if (lost === 0 || produced < lost) return []
    const position = drugModel.transfers.findIndex(
      (transfer) => transfer.kind === 'production' && transfer.into === name
    )
    return [
      {
        path: `model.transfers[${position}]`,
        message: `the target ${name} is produced at ${significant(produced, 4)} mg/h and can be lost at ${significant(lost, 4)} mg/h at most: it has no drug-free steady state`
      }
    ]
  })
}

/** Append the stages of one transit; they share one table column, and their names stay unique if two transits run alongside. */
function addStages(
  transit: Extract<DrugTransfer, { kind: 'transit' }>,
  compartments: Compartment[]
): readonly number[] {
  const column = `${transit.from}_${transit.to}_transit`
  const already = compartments.filter((compartment) => compartment.column === column).length
  const indices: number[] = []
  for (let stage = 1; stage <= transit.stages; stage++) {
    indices.push(compartments.length)
    compartments.push({ name: `${column}_${already + stage}`, column, holds: 'drug' })
  }
  return indices
}
