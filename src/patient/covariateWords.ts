import type { DrugModel } from './drugModel'
import type { ComputedCovariate, CovariateName, TypedCovariate } from './person'

interface Words {
  readonly name: string
  /** Symbol of the trade that stands in an equation. */
  readonly symbol: string
  /** Unit in which people read it: canonical x times / per. */
  readonly unit: string
  readonly times: number
  readonly per: number
}

const plain = (name: string, symbol: string, unit: string): Words => ({ name, symbol, unit, times: 1, per: 1 })
/** 1 L/h = 50/3 mL/min. */
const flow = (name: string, symbol: string): Words => ({ name, symbol, unit: 'mL/min', times: 50, per: 3 })

const WORDS: Readonly<Record<TypedCovariate | ComputedCovariate, Words>> = {
  sex: plain('sex', 'sex', ''),
  age: plain('age', 'age', 'years'),
  gestationalAge: plain('gestational age', 'GA', 'weeks'),
  postnatalAge: plain('postnatal age', 'PNA', 'years'),
  postmenstrualAge: plain('postmenstrual age', 'PMA', 'weeks'),
  weight: plain('weight', 'weight', 'kg'),
  height: plain('height', 'height', 'cm'),
  serumCreatinine: plain('serum creatinine', 'SCr', 'mg/dL'),
  cystatinC: plain('cystatin C', 'cystatin C', 'mg/L'),
  albumin: plain('albumin', 'albumin', 'g/L'),
  bodyMassIndex: plain('body mass index', 'BMI', 'kg/m2'),
  bodySurfaceArea: plain('body surface area', 'BSA', 'm2'),
  idealWeight: plain('ideal weight', 'ideal weight', 'kg'),
  adjustedWeight: plain('adjusted weight', 'adjusted weight', 'kg'),
  leanWeight: plain('lean weight', 'lean weight', 'kg'),
  creatinineClearance: flow('creatinine clearance', 'CLcr'),
  estimatedGfr: plain('estimated GFR', 'eGFR', 'mL/min/1.73 m2'),
  absoluteGfr: flow('absolute GFR', 'GFR')
}

function wordsOf(name: CovariateName): Words | undefined {
  return Object.hasOwn(WORDS, name) ? WORDS[name as keyof typeof WORDS] : undefined
}

/** `creatinine clearance` for `creatinineClearance`; a model's own covariate keeps its name. */
export function nameInWords(name: CovariateName): string {
  return wordsOf(name)?.name ?? name
}

/** `CLcr` for `creatinineClearance`. */
export function symbolOf(name: CovariateName): string {
  return wordsOf(name)?.symbol ?? name
}

/** UCUM as people write it: `mL/min/1.73 m2`, `years`, `weeks`; a pure number has none. */
export function unitInWords(unit: string): string {
  switch (unit) {
    case '1':
      return ''
    case 'a':
      return 'years'
    case 'mo':
      return 'months'
    case 'wk':
      return 'weeks'
    case 'd':
      return 'days'
    default:
      return unit.replace('{1.73_m2}', '1.73 m2')
  }
}

/**
 * A canonical value of a covariate in the unit in which it is read: `58 kg`, `29.5 mL/min`, `3 days`.
 * Significant figures: three, or as many as asked for.
 */
export function valueInWords(
  name: CovariateName,
  value: number | string,
  drugModel: Pick<DrugModel, 'declared'>,
  figures = 3
): string {
  if (typeof value === 'string') return value
  if (name === 'age' || name === 'postnatalAge') return ageInWords(value, figures)
  const words = wordsOf(name)
  if (words !== undefined) return joined(significant((value * words.times) / words.per, figures), words.unit)
  const declared = Object.hasOwn(drugModel.declared, name) ? drugModel.declared[name] : undefined
  return joined(significant(value, figures), declared?.kind === 'number' ? unitInWords(declared.unit) : '')
}

/** Shortest text of a number at a count of significant figures: `17.4`, `1500`, `0.0351`. */
export function significant(value: number, figures: number): string {
  return String(Number(value.toPrecision(figures)))
}

/** Years; months under two years, days under three months. */
function ageInWords(years: number, figures: number): string {
  if (years >= 2 || years < 0) return joined(significant(years, figures), 'years')
  if (years >= 0.25) return joined(significant(years * 12, figures), 'months')
  return joined(significant(years * 365.25, figures), 'days')
}

function joined(number: string, unit: string): string {
  return unit === '' ? number : `${number} ${unit}`
}
