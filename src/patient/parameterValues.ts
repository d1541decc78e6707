import type { Issue } from '../pk/issue'
import { nameInWords, significant, unitInWords, valueInWords } from './covariateWords'
import type { DrugModel, Parameter } from './drugModel'
import { type Covariates, toCanonical, typicalValue } from './relation'

/** One individual's value of a parameter. */
export interface ParameterValue {
  readonly name: string
  /** `CL`, or `CL/F` where it contains the bioavailability. */
  readonly label: string
  /** Canonical. */
  readonly value: number
  /** In the unit that the file states. */
  readonly stated: number
  readonly unit: string
}

/** What a parameter is used as; decides which values can be. */
export type Role =
  | 'volume'
  | 'clearance'
  | 'rate'
  | 'maximum rate'
  | 'production rate'
  | 'half-saturation'
  | 'Hill exponent'
  | 'bioavailability'
  | 'lag'
  | 'fraction'
  | 'release time'

/** What contains 1/F where a model is apparent: all that is measured in amounts of drug or in volumes. */
const PER_BIOAVAILABILITY: readonly Role[] = ['volume', 'clearance', 'maximum rate', 'production rate']

/** Every role of each parameter of a model, by name. A parameter that nothing uses has none. */
export function rolesOf(drugModel: DrugModel): ReadonlyMap<string, ReadonlySet<Role>> {
  const roles = new Map<string, Set<Role>>()
  const add = (name: string | number | undefined, role: Role) => {
    if (typeof name === 'string') roles.set(name, (roles.get(name) ?? new Set()).add(role))
  }
  for (const compartment of drugModel.compartments) add(compartment.volume, 'volume')
  for (const transfer of drugModel.transfers) {
    switch (transfer.kind) {
      case 'first-order':
      case 'elimination':
      case 'transit':
      case 'effect':
        add(transfer.rate, 'rate')
        break
      case 'exchange':
        if ('clearance' in transfer) add(transfer.clearance, 'clearance')
        else for (const rate of transfer.rates) add(rate, 'rate')
        break
      case 'clearance':
        add(transfer.clearance, 'clearance')
        break
      case 'saturable':
        add(transfer.maximumRate, 'maximum rate')
        add(transfer.halfSaturation, 'half-saturation')
        add(transfer.hill, 'Hill exponent')
        break
      case 'binding':
        add(transfer.association, 'rate')
        add(transfer.dissociation, 'rate')
        break
      case 'production':
        add(transfer.rate, 'production rate')
        break
    }
  }
  for (const route of drugModel.routes) {
    add(route.bioavailability, 'bioavailability')
    add(route.lag, 'lag')
    for (const part of route.parts) {
      add(part.fraction, 'fraction')
      add(part.lag, 'lag')
      add(part.over, 'release time')
    }
  }
  return roles
}

/** Every parameter's typical value for these covariates; a value that cannot be is an issue naming parameter and covariates. */
export function parameterValues(
  drugModel: DrugModel,
  covariates: Covariates,
  path: string
): { readonly values: ReadonlyMap<string, ParameterValue>; readonly issues: readonly Issue[] } {
  const roles = rolesOf(drugModel)
  const values = new Map<string, ParameterValue>()
  const issues: Issue[] = []
  for (const parameter of drugModel.parameters) {
    const used = roles.get(parameter.name) ?? new Set<Role>()
    const stated = typicalValue(parameter, covariates)
    const value = toCanonical(parameter, stated)
    const over = drugModel.apparent && PER_BIOAVAILABILITY.some((role) => used.has(role)) ? '/F' : ''
    const { name, unit } = parameter
    values.set(name, { name, label: `${name}${over}`, value, stated, unit })
    const wrong = impossible(value, used)
    if (wrong === undefined) continue
    issues.push({
      path,
      message: `${name} comes out as ${inWords(stated, unit)}${because(parameter, covariates, drugModel)}: ${wrong}`
    })
  }
  return { values, issues }
}

/** Why a value cannot be, or undefined where it can. */
function impossible(value: number, roles: ReadonlySet<Role>): string | undefined {
  if (!Number.isFinite(value)) return 'not a finite number'
  for (const role of roles) {
    switch (role) {
      case 'bioavailability':
        if (!(value > 0 && value <= 1)) return 'a bioavailability must be above 0 and at most 1'
        break
      case 'fraction':
        if (!(value >= 0 && value <= 1)) return 'the fraction of a part must be from 0 to 1'
        break
      case 'lag':
        if (!(value >= 0)) return 'a lag time must be 0 or above'
        break
      default:
        if (!(value > 0)) return `a ${role} must be above 0`
    }
  }
  return undefined
}

function inWords(value: number, unit: string): string {
  const words = unitInWords(unit)
  return `${significant(value, 3)}${words === '' ? '' : ` ${words}`}`
}

/** ` with weight 58 kg and creatinine clearance 29.5 mL/min`; empty for a parameter that reads no covariate. */
function because(parameter: Parameter, covariates: Covariates, drugModel: DrugModel): string {
  const names = [...new Set(parameter.typical.flatMap((term) => term.factors.map((factor) => factor.covariate)))]
  const read = names.flatMap((name) => {
    const covariate = covariates.get(name)
    return covariate === undefined ? [] : [`${nameInWords(name)} ${valueInWords(name, covariate.value, drugModel)}`]
  })
  return read.length === 0 ? '' : ` with ${read.join(' and ')}`
}
