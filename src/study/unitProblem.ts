import { isUnitOfActivity, nearestUnit } from '../units/nearestUnit'
import type { Quantity } from '../units/quantity'
import { KIND_NAMES, KINDS, type Kind, unitOf, unitsOf } from '../units/unitTable'

/** Which sign the value of a quantity may have. */
export type Sign = 'positive' | 'not negative' | 'any'

const EXAMPLES: Readonly<Record<Kind, Quantity>> = {
  amount: { value: 500, unit: 'mg' },
  dose: { value: 500, unit: 'mg' },
  doseRate: { value: 50, unit: 'mg/h' },
  time: { value: 12, unit: 'h' },
  hours: { value: 400, unit: 'h' },
  age: { value: 60, unit: 'a' },
  ageInWeeks: { value: 38, unit: 'wk' },
  bodyWeight: { value: 70, unit: 'kg' },
  height: { value: 170, unit: 'cm' },
  surfaceArea: { value: 1.8, unit: 'm2' },
  bodyMassIndex: { value: 24, unit: 'kg/m2' },
  creatinine: { value: 1, unit: 'mg/dL' },
  cystatin: { value: 0.9, unit: 'mg/L' },
  albumin: { value: 40, unit: 'g/L' },
  filtration: { value: 90, unit: 'mL/min' },
  indexedFiltration: { value: 90, unit: 'mL/min/{1.73_m2}' },
  concentration: { value: 10, unit: 'mg/L' },
  massConcentration: { value: 10, unit: 'mg/L' },
  area: { value: 400, unit: 'mg.h/L' },
  clearance: { value: 5, unit: 'L/h' },
  volume: { value: 20, unit: 'L' },
  rateConstant: { value: 0.5, unit: '/h' },
  amountRate: { value: 10, unit: 'mg/h' },
  association: { value: 0.1, unit: 'L/nmol/h' },
  fraction: { value: 0.5, unit: '1' },
  number: { value: 1, unit: '1' },
  molarMass: { value: 450, unit: 'g/mol' }
}

/** What a quantity should be: of a kind, or of one that other parts of the file decide, with the units of an example. */
export interface QuantityAsked {
  readonly kind?: Kind
  readonly exampleUnits?: readonly string[]
  readonly sign: Sign
}

/**
 * What is wrong with a value that should be a quantity, and what would be right; undefined where nothing is.
 * `name` is what the file calls it: "amount needs a unit, for example { "value": 500, "unit": "mg" }".
 */
export function quantityProblem(raw: unknown, name: string, asked: QuantityAsked): string | undefined {
  const { kind, sign } = asked
  const show = (typed?: number) => examplesOf(asked, typed)
  if (raw === undefined) return `${name} is missing; for example ${show()}`
  if (typeof raw === 'number') return `${name} needs a unit, for example ${show(raw)}`
  if (typeof raw !== 'object' || raw === null || Array.isArray(raw)) {
    return `${name} must be a value with its unit, for example ${show()}`
  }
  const { value, unit, ...rest } = raw as Record<string, unknown>
  const extra = Object.keys(rest).at(0)
  if (extra !== undefined) return `unknown key "${extra}" in ${name}; a quantity has "value" and "unit" only`
  if (value === undefined) return `${name} needs a value, for example ${show()}`
  if (typeof value !== 'number') return `the value of ${name} must be a number, for example ${show()}`
  if (!Number.isFinite(value)) return `the value of ${name} must be finite`
  if (unit === undefined) return `${name} needs a unit, for example ${show(value)}`
  if (typeof unit !== 'string') return `the unit of ${name} must be text, for example ${show(value)}`
  const problems = [kind === undefined ? undefined : unitProblem(unit, kind), signProblem({ value, unit }, name, sign)]
  return problems.filter((problem) => problem !== undefined).join('; ') || undefined
}

/** What is wrong with a unit code for a kind, and what would be right; undefined where it fits. */
export function unitProblem(typed: string, kind: Kind): string | undefined {
  if (unitOf(kind, typed) !== undefined) return undefined
  const accepted = `use ${listed(kind)}`
  if (isUnitOfActivity(typed)) {
    return `"${typed}" is a unit of activity; drugs measured in units of activity are not handled: ${accepted}`
  }
  if (unitOf('indexedFiltration', typed) !== undefined && (kind === 'filtration' || kind === 'clearance')) {
    return `"${typed}" is indexed to 1.73 m2 of body surface, an absolute rate is asked; multiply by the body surface area / 1.73 m2 and ${accepted}`
  }
  if (kind === 'indexedFiltration' && unitOf('filtration', typed) !== undefined) {
    return `"${typed}" is an absolute rate, one indexed to 1.73 m2 of body surface is asked: ${accepted}`
  }
  const nearest = nearestUnit(kind, typed)
  if (nearest !== undefined) return `unknown unit "${typed}"; did you mean "${nearest}"?`
  const other = KINDS.find((candidate) => unitOf(candidate, typed) !== undefined)
  if (other === undefined) return `unknown unit "${typed}"; ${accepted}`
  const only = other === 'dose' || other === 'doseRate' ? ' (reckoned on the patient, in doses only)' : ''
  return `"${typed}" is a unit of ${KIND_NAMES[other]}${only}, not of ${KIND_NAMES[kind]}; ${accepted}`
}

/** The units of a kind, canonical first, as a sentence lists them. */
export function listed(kind: Kind): string {
  const codes = unitsOf(kind).map((unit) => unit.code)
  return codes.length > 12 ? `${codes.slice(0, 12).join(', ')} or the like` : codes.join(', ')
}

function signProblem(quantity: Quantity, name: string, sign: Sign): string | undefined {
  if (sign === 'positive' && !(quantity.value > 0)) {
    return `${name} must be greater than 0, got ${quantity.value} ${quantity.unit}`
  }
  if (sign === 'not negative' && !(quantity.value >= 0)) {
    return `${name} must not be negative, got ${quantity.value} ${quantity.unit}`
  }
  return undefined
}

/** Examples of what is asked, with the number that was typed where there is one. */
function examplesOf({ kind, exampleUnits }: QuantityAsked, typed?: number): string {
  const example = EXAMPLES[kind ?? 'amount']
  return (exampleUnits ?? [example.unit])
    .map((unit) => `{ "value": ${typed ?? example.value}, "unit": ${JSON.stringify(unit)} }`)
    .join(' or ')
}
