import { spectrum } from '../numerics/spectrum'
import type { Hours, PerHour } from '../units/canonical'
import { type Disposition, restricted } from './disposition'

/** A rate outside the disposition: absorption, a transit, an effect site. */
export interface InputRate {
  /** Of the compartment, or of the effect site; compartments of one rate that share a column are one line. */
  readonly name: string
  readonly rate: PerHour
  readonly halfLife: Hours
  /** Compartments in a row with this rate: the stages of a transit. */
  readonly stages: number
  /** Slower than the slowest phase of the disposition, so that it sets the final slope. */
  readonly setsFinalSlope: boolean
}

/**
 * Rates at which drug leaves the compartments before the disposition, in the order in which drug passes them. A rate that
 * sets the final slope is slower than `slowest`, the slowest of the disposition, so that the level falls with it in the end.
 */
export function inputRates({ model, rates, before }: Disposition, slowest: PerHour | undefined): InputRate[] {
  const lines: { name: string; column: string; rate: PerHour; stages: number }[] = []
  for (const group of before) {
    const { column } = model.compartments[group[0]]
    const name = group.map((i) => model.compartments[i].name).join(', ')
    for (const { rate } of spectrum(restricted(rates, group))) {
      const same = lines.find((line) => line.column === column && line.rate === rate)
      if (same === undefined) lines.push({ name, column, rate, stages: 1 })
      else same.stages += 1
    }
  }
  return lines.map(({ name, rate, stages }) => ({
    ...{ name, rate, halfLife: Math.LN2 / rate, stages },
    setsFinalSlope: slowest !== undefined && rate < slowest
  }))
}
