import type { DrugCompartment } from '../patient/drugModel'
import type { Kind } from '../units/unitTable'
import { present } from './converter'
import type { ModelFile } from './file/modelSchema'
import { knownNames } from './nearestName'
import { below } from './path'
import type { Problems } from './problems'
import { open } from './soundMembers'

export interface ParameterUse {
  readonly kind: Kind
  readonly path: string
}

/** The names of one model file while its structure is read: what they stand for, and where parameters are used. */
export class ModelNames {
  readonly problems: Problems
  readonly parameters: readonly string[]
  readonly compartments: ReadonlyMap<string, DrugCompartment>
  readonly effectSites: ReadonlySet<string>
  readonly uses = new Map<string, ParameterUse[]>()

  constructor(file: ModelFile, path: string, problems: Problems) {
    this.problems = problems
    this.parameters = problems.isOpen(below(path, 'parameters')) ? Object.keys(file.parameters) : []
    this.compartments = readCompartments(file, path, problems)
    this.effectSites = effectSites(file, path, problems)
  }

  /** Note that a parameter is used as a quantity of the kind. */
  parameter(name: string, kind: Kind, path: string): string {
    if (!this.parameters.includes(name)) {
      this.problems.add(path, `no parameter is called "${name}"; ${knownNames(name, this.parameters)}`)
      return name
    }
    const uses = this.uses.get(name) ?? []
    uses.push({ kind, path })
    this.uses.set(name, uses)
    return name
  }

  /** A compartment that holds drug, so not an effect site; `withVolume` where a concentration or a clearance is taken. */
  compartment(id: string, path: string, need: 'any' | 'with volume' = 'any'): string {
    const compartment = this.compartments.get(id)
    if (compartment === undefined) {
      this.problems.add(path, `no compartment is called "${id}"; ${knownNames(id, [...this.compartments.keys()])}`)
    } else if (this.effectSites.has(id)) {
      this.problems.add(path, `"${id}" is an effect site, which holds no drug: it takes no dose and no other transfer`)
    } else if (need === 'with volume' && compartment.volume === undefined) {
      this.problems.add(path, `compartment "${id}" needs a volume here; name its parameter under "volume"`)
    }
    return id
  }
}

function readCompartments(file: ModelFile, path: string, problems: Problems): Map<string, DrugCompartment> {
  const compartments = new Map<string, DrugCompartment>()
  for (const [at, { id, volume, observed }] of open(file.compartments, below(path, 'compartments'), problems)) {
    if (compartments.has(id)) problems.add(below(at, 'id'), `there is another compartment "${id}"; ids are unique`)
    else compartments.set(id, { id, observed: observed === true, ...present('volume', volume) })
  }
  shareVolumes(compartments, bindingsOf(file, path, problems))
  return compartments
}

/** Target and complex are in the volume of the drug that binds; as many rounds as a complex may bind again. */
function shareVolumes(compartments: Map<string, DrugCompartment>, bindings: ReturnType<typeof bindingsOf>): void {
  for (let round = 0; round < bindings.length; round++) {
    for (const [, { drug, target, complex }] of bindings) {
      const volume = compartments.get(drug)?.volume
      if (volume === undefined) continue
      for (const id of [target, complex]) {
        const compartment = compartments.get(id)
        if (compartment !== undefined && compartment.volume === undefined)
          compartments.set(id, { ...compartment, volume })
      }
    }
  }
}

type BindingFile = Extract<ModelFile['transfers'][number], { kind: 'binding' }>

/** The sound bindings of a file with their paths. */
export function bindingsOf(file: ModelFile, path: string, problems: Problems): [string, BindingFile][] {
  const bindings: [string, BindingFile][] = []
  for (const [at, transfer] of open(file.transfers, below(path, 'transfers'), problems)) {
    if (transfer.kind === 'binding') bindings.push([at, transfer])
  }
  return bindings
}

function effectSites(file: ModelFile, path: string, problems: Problems): Set<string> {
  const sites = new Set<string>()
  for (const [at, transfer] of open(file.transfers, below(path, 'transfers'), problems)) {
    if (transfer.kind !== 'effect') continue
    if (sites.has(transfer.to))
      problems.add(below(at, 'to'), `"${transfer.to}" is the effect site of another transfer already`)
    sites.add(transfer.to)
  }
  return sites
}
