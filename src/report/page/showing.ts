import type { Study } from '../../study/study'
import { fromCanonical } from '../../units/quantity'
import { unitOf } from '../../units/unitTable'
import { significant, typed, withUnit } from './number'

/** How the numbers of one study are shown: in the units that it asks for, total or unbound. Nothing is computed with them. */
export interface Showing {
  readonly timeUnit: string
  readonly concentrationUnit: string
  readonly amountUnit: string
  readonly areaUnit: string
  /** `unbound ` before a level where the study shows unbound ones. */
  readonly unbound: string
  /** Canonical to shown numbers. */
  time(hours: number): number
  concentration(total: number): number
  amount(mg: number): number
  area(total: number): number
  /** Computed values as text with unit, three significant figures. */
  timeText(hours: number): string
  /** A time that was typed, or follows from typed ones: every digit. */
  typedTime(hours: number): string
  typedAmount(mg: number): string
  concentrationText(total: number): string
}

/** Settles how one study's numbers are shown. Areas are in hours, over the units of the concentration where these combine. */
export function showingOf(study: Study): Showing {
  const { display, drugModel } = study
  const { molarMass, fractionUnbound } = drugModel.drug
  const factor = display.unbound && fractionUnbound !== undefined ? fractionUnbound : 1
  const [mass = 'mg', volume = 'L'] = display.concentration.split('/')
  const combined = `${mass}.h/${volume}`
  const areaUnit = unitOf('area', combined) === undefined ? 'mg.h/L' : combined
  const time = (hours: number) => fromCanonical('time', hours, display.time).value
  const concentration = (total: number) =>
    fromCanonical('concentration', total * factor, display.concentration, molarMass).value
  const amount = (mg: number) => fromCanonical('amount', mg, display.amount, molarMass).value
  return {
    timeUnit: display.time,
    concentrationUnit: display.concentration,
    amountUnit: display.amount,
    areaUnit,
    unbound: factor === 1 ? '' : 'unbound ',
    time,
    concentration,
    amount,
    area: (total) => fromCanonical('area', total * factor, areaUnit, molarMass).value,
    timeText: (hours) => withUnit(significant(time(hours)), display.time),
    typedTime: (hours) => withUnit(typed(time(hours)), display.time),
    typedAmount: (mg) => withUnit(typed(amount(mg)), display.amount),
    concentrationText: (total) => withUnit(significant(concentration(total)), display.concentration)
  }
}

/** A sentence's first letter as a capital, and its full stop. */
export function sentence(text: string): string {
  const begun = text.charAt(0).toUpperCase() + text.slice(1)
  return /[.:!?]$/.test(begun) ? begun : `${begun}.`
}

/** `A`, `A and B`, `A, B and C`. */
export function listed(items: readonly string[]): string {
  if (items.length < 2) return items.join('')
  return `${items.slice(0, -1).join(', ')} and ${items[items.length - 1]}`
}

/** A number and what it is a number of, between which no line breaks. */
const NUMBER_AND_UNIT =
  /(\d) (?=(?:%|years?|months?|weeks?|days?|kg|[mµun]?g|[mun]?mol|[md]?L|h|min|s|d|wk|cm|m2)(?:\/[\w.]+)*(?![\w]))/g

/** Text of the core as people write it: no break between number and unit, m², multiplication signs. */
export function polished(text: string): string {
  return text
    .replace(NUMBER_AND_UNIT, '$1\u00a0')
    .replace(/1\.73 m2/g, '1.73\u00a0m²')
    .replace(/\bm2\b/g, 'm²')
    .replace(/(?<=[\d)]) x (?=[\d(A-Za-z])/g, ' × ')
    .replace(/\bu(?=g\b|mol\b)/g, 'µ')
}
