import type { Hours } from '../units/canonical'
import type { Course } from './course'
import { volumeOf } from './linearRates'
import { offsetIn } from './locate'
import type { Model } from './model'
import { type RowKind, rowTimes, type SamplingTimes } from './profileTimes'
import type { BodyState } from './state'
import { isBefore } from './times'
import type { Piece } from './trajectory'

/** What one number of a row is: mg/L for a concentration, mg for an amount, mg.h/L for the area, the last two since 0. */
export type ProfileColumn =
  | { readonly kind: 'concentration' }
  | { readonly kind: 'amount'; readonly name: string }
  | { readonly kind: 'effect-site'; readonly name: string }
  | { readonly kind: 'observation'; readonly name: string }
  | { readonly kind: 'auc' }
  | { readonly kind: 'eliminated' }

/** One row of the concentration table. The generator that yields it writes into it again for the next. */
export interface ProfileRow {
  readonly time: Hours
  readonly row: RowKind
  /** One a column, in the order of `profileColumns`. */
  readonly values: Float64Array
}

/** The table's columns after time and row, in order; an amount column where its first compartment stands. */
export function profileColumns(model: Model): ProfileColumn[] {
  return [
    { kind: 'concentration' },
    ...amountColumns(model).map((name): ProfileColumn => ({ kind: 'amount', name })),
    ...model.effectSites.map(({ name }): ProfileColumn => ({ kind: 'effect-site', name })),
    ...model.observations.map(({ name }): ProfileColumn => ({ kind: 'observation', name })),
    { kind: 'auc' },
    { kind: 'eliminated' }
  ]
}

/**
 * The rows of a regimen's concentration table, one after another in one buffer, so that a table of any length takes no
 * more memory than a row. A sample at the time of a dose is taken before it; an `after dose` row follows where a bolus
 * enters the observed compartment at that time.
 */
export function* profileRows(course: Course, sampling: SamplingTimes): Generator<ProfileRow> {
  const reader = new RowReader(course)
  const row: { time: Hours; row: RowKind; readonly values: Float64Array } = {
    time: 0,
    row: 'sample',
    values: reader.values
  }
  for (const { time, row: kind } of rowTimes(course, sampling)) {
    row.time = time
    row.row = kind
    reader.readBefore(time)
    yield row
    if (kind === 'before dose' && reader.bolusEntersObserved()) {
      row.row = 'after dose'
      reader.readAfter()
      yield row
    }
  }
}

/** Distinct amount columns of compartments that hold drug, by first appearance. */
function amountColumns(model: Model): string[] {
  return [...new Set(model.compartments.filter(({ holds }) => holds === 'drug').map(({ column }) => column))]
}

/** Goes through a course in ascending time, with the area and the eliminated amount up to the piece that it is in. */
class RowReader {
  readonly values: Float64Array
  readonly #pieces: readonly Piece[]
  readonly #initial: BodyState
  /** For each compartment the position of its amount column, or -1. */
  readonly #columnOf: readonly number[]
  readonly #amounts: Float64Array
  readonly #columns: number
  #index = 0
  #offset = 0
  readonly #auc = new RunningSum()
  readonly #eliminated = new RunningSum()

  constructor(course: Course) {
    const { model } = course.segments[0]
    const columns = amountColumns(model)
    this.#pieces = course.trajectory.pieces
    this.#initial = course.initial
    this.#columnOf = model.compartments.map(({ column, holds }) => (holds === 'drug' ? columns.indexOf(column) : -1))
    this.#columns = columns.length
    this.#amounts = new Float64Array(model.compartments.length)
    this.values = new Float64Array(profileColumns(model).length)
  }

  /** Write the values just before anything given at `time`, after a change of the person at it. */
  readBefore(time: Hours): void {
    this.#goTo(time)
    const piece = this.#pieces[this.#index]
    if (this.#offset > 0) this.#write(piece.segment.model, piece, this.#offset, piece, this.#offset)
    else if (this.#index > 0) {
      const previous = this.#pieces[this.#index - 1]
      this.#write(piece.segment.model, previous, previous.segment.duration, piece, 0)
    } else this.#write(piece.segment.model, undefined, 0, piece, 0)
  }

  /** Write the values just after what is given at the time last read. */
  readAfter(): void {
    const piece = this.#pieces[this.#index]
    this.#write(piece.segment.model, piece, this.#offset, piece, this.#offset)
  }

  /** Whether a bolus enters the observed compartment at the time last read. */
  bolusEntersObserved(): boolean {
    const { boluses, model } = this.#pieces[this.#index].segment
    return this.#offset === 0 && boluses[model.observed] > 0
  }

  #goTo(time: Hours): void {
    while (this.#index + 1 < this.#pieces.length && !isBefore(time, this.#pieces[this.#index + 1].segment.start)) {
      const piece = this.#pieces[this.#index]
      this.#auc.add(piece.area({ kind: 'observed' }, piece.segment.duration))
      this.#eliminated.add(piece.eliminated(piece.segment.duration))
      this.#index += 1
    }
    this.#offset = offsetIn(this.#pieces[this.#index], time)
  }

  /** State from `source` (undefined: as at the beginning), sums up to an offset of the current piece. */
  #write(model: Model, source: Piece | undefined, offset: Hours, current: Piece, elapsed: Hours): void {
    const amounts = this.#amounts
    const values = this.values
    if (source === undefined) for (let i = 0; i < amounts.length; i++) amounts[i] = this.#initial.amounts[i]
    else source.amountsInto(offset, amounts)
    values.fill(0)
    values[0] = amounts[model.observed] / volumeOf(model, model.observed)
    for (let i = 0; i < amounts.length; i++) if (this.#columnOf[i] >= 0) values[1 + this.#columnOf[i]] += amounts[i]
    let at = 1 + this.#columns
    for (let index = 0; index < model.effectSites.length; index++) {
      values[at++] = source?.concentration({ kind: 'effect-site', index }, offset) ?? this.#initial.effectSites[index]
    }
    for (const { of, volume } of model.observations) {
      let sum = 0
      for (const i of of) sum += amounts[i]
      values[at++] = sum / volume
    }
    values[at++] = this.#auc.plus(current.area({ kind: 'observed' }, elapsed))
    values[at] = this.#eliminated.plus(current.eliminated(elapsed))
  }
}

/** Compensated sum [Neumaier 1974, Z. Angew. Math. Mech. 54:39, from memory] of numbers that are not negative. */
class RunningSum {
  #sum = 0
  #lost = 0

  add(value: number): void {
    const sum = this.#sum + value
    this.#lost += this.#sum >= value ? this.#sum - sum + value : value - sum + this.#sum
    this.#sum = sum
  }

  /** The sum with one more number, which is not added. */
  plus(value: number): number {
    return this.#sum + (this.#lost + value)
  }
}
