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

const SPELLED_OUT: Readonly<Record<string, string>> = { a: 'year', mo: 'month', wk: 'week', d: 'day' }

/** UCUM as people write it: `mL/min/1.73 m2`, `years`, `1 week`; a pure number has none. */
export function unitInWords(unit: string, count = 2): string {
  if (unit === '1') return ''
  const word = Object.hasOwn(SPELLED_OUT, unit) ? SPELLED_OUT[unit] : undefined
  if (word !== undefined) return count === 1 ? word : `${word}s`
  return unit.replace('{1.73_m2}', '1.73 m2')
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

/** Years from two on; below, whole months or whole days where it is either, else months, and days under three months. */
function ageInWords(years: number, figures: number): string {
  if (years >= 2 || years < 0) return joined(significant(years, figures), 'years')
  const days = years * 365.25
  if (!whole(12 * years) && (whole(days) || years < 0.25)) return joined(significant(days, figures), 'days')
  return years === 0 ? '0 days' : joined(significant(12 * years, figures), 'months')
}

function whole(value: number): boolean {
  return Math.abs(value - Math.round(value)) <= 1e-9 * Math.max(1, Math.abs(value))
}

function joined(number: string, unit: string): string {
  return unit === '' ? number : `${number} ${unit}`
}
