import { ln } from '../numerics/elementary'
import { lambertWOfLog } from '../numerics/lambertW'
import type { Hours, Litres, MilligramHoursPerLitre, Milligrams, MilligramsPerLitre } from '../units/canonical'
import type { Model, Saturable } from './model'
import type { Segment } from './segment'
import type { BodyState } from './state'
import type { Piece, Signal, Trajectory } from './trajectory'

/**
 * The course in closed form where there is one: one compartment, saturable elimination without a Hill exponent and
 * nothing else, boluses alone. C = Km W((C0/Km) e^((C0 - Vmax t/V)/Km)) [Beal 1982, J. Pharmacokinet. Biopharm. 10:109;
 * Schnell & Mendoza 1997, J. Theor. Biol. 187:207, both from memory]. Undefined for any other course.
 */
export function michaelisMentenCourse(segments: readonly Segment[], initial: BodyState): Trajectory | undefined {
  const last = segments.at(-1)
  if (last === undefined) return undefined
  const pieces: MichaelisMentenPiece[] = []
  let amount = initial.amounts[0]
  for (const segment of segments) {
    const elimination = onlyElimination(segment.model)
    if (elimination === undefined || segment.inputs[0] !== 0) return undefined
    const piece = new MichaelisMentenPiece(segment, elimination, amount + segment.boluses[0])
    pieces.push(piece)
    amount = piece.amount(segment.duration)
  }
  return { end: last.start + last.duration, initial, pieces }
}

interface Elimination extends Saturable {
  readonly volume: Litres
}

function onlyElimination({ compartments, transfers, effectSites, observations }: Model): Elimination | undefined {
  const [transfer] = transfers
  const volume = compartments[0]?.volume
  if (compartments.length !== 1 || transfers.length !== 1 || volume === undefined) return undefined
  if (effectSites.length > 0 || observations.length > 0) return undefined
  if (transfer.kind !== 'saturable' || transfer.to !== 'eliminated' || transfer.hill !== 1) return undefined
  return { ...transfer, volume }
}

class MichaelisMentenPiece implements Piece {
  readonly segment: Segment
  readonly probes: readonly Hours[]
  readonly #elimination: Elimination
  readonly #first: MilligramsPerLitre

  constructor(segment: Segment, elimination: Elimination, amount: Milligrams) {
    this.segment = segment
    // The level only falls: it turns nowhere between the ends.
    this.probes = [0, segment.duration]
    this.#elimination = elimination
    this.#first = amount / elimination.volume
  }

  amount(offset: Hours): Milligrams {
    return this.#level(offset) * this.#elimination.volume
  }

  amountsInto(offset: Hours, out: Float64Array): void {
    out[0] = this.amount(offset)
  }

  concentration(_: Signal, offset: Hours): MilligramsPerLitre {
    return this.#level(offset)
  }

  slope(_: Signal, offset: Hours): number {
    const { maximumRate, halfSaturation, volume } = this.#elimination
    const level = this.#level(offset)
    return (-maximumRate * level) / ((halfSaturation + level) * volume)
  }

  area(signal: Signal, offset: Hours): MilligramHoursPerLitre {
    return this.areaBetween(signal, 0, offset)
  }

  /** From dC/dt: the integral of C dt is that of (Km + C) V/Vmax dC. */
  areaBetween(_: Signal, from: Hours, to: Hours): MilligramHoursPerLitre {
    const { maximumRate, halfSaturation, volume } = this.#elimination
    const [high, low] = [this.#level(from), this.#level(to)]
    return (volume / maximumRate) * (high - low) * (halfSaturation + (high + low) / 2)
  }

  eliminated(offset: Hours): Milligrams {
    return (this.#first - this.#level(offset)) * this.#elimination.volume
  }

  #level(offset: Hours): MilligramsPerLitre {
    if (offset === 0 || this.#first === 0) return this.#first
    const { maximumRate, halfSaturation, volume } = this.#elimination
    const fallen = (maximumRate / volume) * offset
    return halfSaturation * lambertWOfLog(ln(this.#first / halfSaturation) + (this.#first - fallen) / halfSaturation)
  }
}
