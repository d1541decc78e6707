import type { Issue } from '../pk/issue'
import { covariateOf } from './covariates'
import { nameInWords, valueInWords } from './covariateWords'
import type { CovariateRange, DrugModel } from './drugModel'
import type { CovariateName, Person } from './person'

/** Rounding in a conversion that still counts as on a bound. */
const ON_THE_BOUND = 1e-9

/** Where a value lies against a range. `by` is the distance as a share of the bound that it passes, where that is not 0. */
export type Position =
  | { readonly kind: 'inside' }
  | { readonly kind: 'below' | 'above'; readonly by?: number }
  /** A category that is not among those of the range. */
  | { readonly kind: 'other' }

export function positionIn(range: CovariateRange, value: number | string): Position {
  // A category against bounds, or a number against categories, is never "inside".
  if (typeof value === 'string') return range.categories?.includes(value) ? { kind: 'inside' } : { kind: 'other' }
  if (range.categories !== undefined) return { kind: 'other' }
  const { low, high } = range
  if (low !== undefined && value < low - ON_THE_BOUND * Math.abs(low))
    return low === 0 ? { kind: 'below' } : { kind: 'below', by: (low - value) / Math.abs(low) }
  if (high !== undefined && value > high + ON_THE_BOUND * Math.abs(high))
    return high === 0 ? { kind: 'above' } : { kind: 'above', by: (value - high) / Math.abs(high) }
  return { kind: 'inside' }
}

/** `weight 150 kg is 36 % above 110 kg`, `weight 40 kg is 11 % below 45 kg`; digits enough to tell value and bound apart. */
export function outsideInWords(
  range: CovariateRange,
  value: number | string,
  position: Exclude<Position, { kind: 'inside' }>,
  drugModel: Pick<DrugModel, 'declared'>
): string {
  const name = nameInWords(range.covariate)
  if (position.kind === 'other') return `${name} ${value} is not among ${(range.categories ?? []).join(', ')}`
  const bound = position.kind === 'below' ? range.low : range.high
  if (bound === undefined) throw new RangeError(`no bound that ${name} could be ${position.kind}`)
  const [shown, against] = toldApart(range.covariate, value, bound, drugModel)
  const by = position.by === undefined ? '' : `${percent(position.by)} `
  return `${name} ${shown} is ${by}${position.kind} ${against}`
}

/** `45 to 110 kg`, `from 18 years`, `up to 140 mL/min`, `female, male`. */
export function rangeInWords(range: CovariateRange, drugModel: Pick<DrugModel, 'declared'>): string {
  if (range.categories !== undefined) return range.categories.join(', ')
  const show = (value: number) => valueInWords(range.covariate, value, drugModel, 4)
  if (range.low === undefined) return range.high === undefined ? 'any' : `up to ${show(range.high)}`
  if (range.high === undefined) return `from ${show(range.low)}`
  const [low, high] = [show(range.low), show(range.high)]
  const unit = high.slice(high.indexOf(' '))
  // One unit serves both, unless an age's low bound reads in days and its high one in years.
  return `${high.includes(' ') && low.endsWith(unit) ? low.slice(0, -unit.length) : low} to ${high}`
}

/** A covariate outside the range for which the model's equations hold at all is an error, not a caution. */
export function outsideValid(drugModel: DrugModel, person: Person, path: string): readonly Issue[] {
  return drugModel.valid.flatMap((range) => {
    const covariate = covariateOf(range.covariate, person, drugModel)
    if (covariate.kind === 'not computed') return []
    const position = positionIn(range, covariate.value)
    if (position.kind === 'inside') return []
    const said = outsideInWords(range, covariate.value, position, drugModel)
    const message = `${said}: the equations of ${drugModel.title} do not hold there (valid: ${rangeInWords(range, drugModel)})`
    return [{ path: `${path}.${range.covariate}`, message }]
  })
}

function toldApart(
  name: CovariateName,
  value: number | string,
  bound: number,
  drugModel: Pick<DrugModel, 'declared'>
): readonly [string, string] {
  for (let figures = 3; figures < 15; figures++) {
    const pair = [valueInWords(name, value, drugModel, figures), valueInWords(name, bound, drugModel, figures)] as const
    if (pair[0] !== pair[1]) return pair
  }
  return [valueInWords(name, value, drugModel, 15), valueInWords(name, bound, drugModel, 15)]
}

function percent(share: number): string {
  const points = share * 100
  if (points < 1) return 'less than 1 %'
  return `${points < 10 ? Number(points.toPrecision(2)) : Math.round(points)} %`
}
