import type { Functional } from '../../src/numerics/operator'
import type { Rates } from '../../src/numerics/rates'
import small from '../reference/numerics/exponential-1-to-5.json'
import middle from '../reference/numerics/exponential-7-to-12.json'
import large from '../reference/numerics/exponential-24.json'

/** The operators of one reference model, as the generator wrote them. */
export interface ReferenceModel {
  readonly name: string
  readonly size: number
  readonly between: readonly number[]
  readonly out: readonly number[]
  readonly observed: number
  readonly volume: number
  readonly effects: readonly number[]
  readonly inputs: readonly number[]
  readonly areaToInfinity?: readonly number[]
  readonly operators: readonly ReferenceOperator[]
}

export interface ReferenceOperator {
  readonly duration: number
  readonly transition: readonly number[]
  readonly sink: readonly number[]
  readonly response: readonly number[]
  readonly sinkResponse: readonly number[]
  readonly rows: readonly number[]
  readonly direct: readonly number[]
  readonly steadyAfterBolus?: readonly number[]
  readonly steadyInfusion?: readonly number[]
}

/** Eighteen models of 1 to 24 compartments, computed in more than 500 digits (`test/reference/generate`). */
export const referenceModels: readonly ReferenceModel[] = [...small.cases, ...middle.cases, ...large.cases]

export function ratesOf(model: ReferenceModel): Rates {
  return { size: model.size, between: model.between, out: model.out }
}

/** The area under the observed concentration, then the effect sites. */
export function functionalsOf(model: ReferenceModel): readonly Functional[] {
  const at = (weight: number) => Array.from({ length: model.size }, (_, i) => (i === model.observed ? weight : 0))
  return [
    { weights: at(1 / model.volume), decay: 0 },
    ...model.effects.map((rate) => ({ weights: at(rate / model.volume), decay: rate }))
  ]
}
