import { exp, expm1 } from '../numerics/elementary'
import { LinearOperators } from '../numerics/linearOperators'
import { emptyOperator, type Operator } from '../numerics/operator'
import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramsPerLitre } from '../units/canonical'
import { type Disposition, dispositionOf, responseTo } from './disposition'
import type { Model } from './model'
import { type Phase, phasesOfDisposition } from './phases'
import { inputColumns } from './propagate'
import type { Segment } from './segment'
import type { Piece, Trajectory } from './trajectory'

/** Operators kept for one model. */
const KEPT = 2048

/** A model's phases, ready to follow the part that each has in the concentration. */
interface PhasedModel {
  readonly disposition: Disposition
  readonly phases: readonly Phase[]
  /** Coefficients of the phases in the response to 1 mg in a compartment, as they are first asked for. */
  readonly responses: Map<number, readonly number[]>
}

/** Each phase's part of the observed concentration over one piece, fastest phase first; the parts sum to it. */
export class PartsPiece {
  readonly piece: Piece
  readonly phases: readonly Phase[]
  readonly #start: readonly number[]
  readonly #operators: PartOperators
  readonly #amounts: Float64Array
  readonly #rates: readonly number[]
  readonly #direct: number

  /** `start` are the parts just after the segment's boluses. */
  constructor(piece: Piece, operators: PartOperators, start: readonly number[]) {
    const { segment } = piece
    this.piece = piece
    this.phases = operators.phases
    this.#start = start
    this.#operators = operators
    this.#amounts = new Float64Array(segment.model.compartments.length)
    piece.amountsInto(0, this.#amounts)
    this.#rates = operators.inputs.map((compartment) => segment.inputs[compartment])
    this.#direct = segment.inputs[segment.model.observed]
  }

  /** Parts at an offset from the segment's start [mg/L]. */
  at(offset: Hours): readonly MilligramsPerLitre[] {
    if (offset === 0) return this.#start
    const operator = this.#operators.at(offset)
    return this.phases.map(({ eigenvalue, coefficient }, i) => {
      const infused = (coefficient * this.#direct * -expm1(-eigenvalue * offset)) / eigenvalue
      const taken = absorbed(operator, i, this.#amounts, this.#rates)
      return exp(-eigenvalue * offset) * this.#start[i] + (coefficient < 0 ? -taken : taken) + infused
    })
  }
}

/**
 * The parts of the phases along a trajectory of a linear model: the response of each phase to the actual input. Drug from
 * before the disposition enters by a functional row that decays with the phase (METHODS 1.2), a bolus by its coefficient,
 * an infusion by its integral; no difference of two rates is formed, and the part of a phase with a positive coefficient
 * is never negative. Where the model changes, and for drug in the body at time 0, the amounts are taken apart anew into
 * the phases of the model then in force; parts may be negative from there on. In words why the parts are not defined.
 */
export function phaseParts(trajectory: Trajectory): readonly PartsPiece[] | string {
  const models = new Map<Model, PhasedModel>()
  const operators = new Map<Model, PartOperators>()
  const segments = trajectory.pieces.map(({ segment }) => segment)
  const columns = inputColumns(segments)
  const pieces: PartsPiece[] = []
  for (const piece of trajectory.pieces) {
    const { segment } = piece
    const phased = models.get(segment.model) ?? phasedModel(segment.model)
    if (typeof phased === 'string') return phased
    models.set(segment.model, phased)
    const beside = entersBeside(phased.disposition, segment)
    if (beside !== undefined) return beside
    const own = operators.get(segment.model) ?? new PartOperators(phased, columns.get(segment.model) ?? [])
    operators.set(segment.model, own)
    pieces.push(new PartsPiece(piece, own, partsAtStart(piece, pieces.at(-1), phased, trajectory)))
  }
  return pieces
}

/** Operators whose functionals are the phases' responses to what leaves the compartments before the disposition. */
class PartOperators {
  readonly phases: readonly Phase[]
  readonly inputs: readonly number[]
  readonly #operators: LinearOperators
  readonly #empty: () => Operator
  readonly #made = new Map<Hours, Operator>()

  constructor({ disposition, phases }: PhasedModel, inputs: readonly number[]) {
    const { rates, members, model } = disposition
    const { size, between } = rates
    const inside = new Set(members)
    const functionals = phases.map(({ eigenvalue, coefficient }) => ({
      weights: Array.from({ length: size }, (_, j) =>
        inside.has(j) ? 0 : Math.abs(coefficient) * between[model.observed * size + j]
      ),
      decay: eigenvalue
    }))
    this.phases = phases
    this.inputs = inputs
    this.#operators = new LinearOperators(rates, functionals, inputs)
    this.#empty = () => emptyOperator(size, inputs.length, functionals.length)
  }

  /** What the phases take up in `offset` hours. Equal segments ask for the same offsets again. */
  at(offset: Hours): Operator {
    const known = this.#made.get(offset)
    if (known !== undefined) return known
    if (this.#made.size >= KEPT) this.#made.clear()
    const operator = this.#empty()
    this.#operators.into(offset, operator)
    this.#made.set(offset, operator)
    return operator
  }
}

/** What has come from before the disposition into one phase's part. */
function absorbed(operator: Operator, phase: number, amounts: ReadonlyVector, inputRates: ReadonlyVector): number {
  const n = amounts.length
  const m = inputRates.length
  let sum = 0
  for (let j = 0; j < n; j++) sum += operator.rows[phase * n + j] * amounts[j]
  for (let k = 0; k < m; k++) sum += operator.direct[phase * m + k] * inputRates[k]
  return sum
}

function phasedModel(model: Model): PhasedModel | string {
  const disposition = dispositionOf(model)
  const phases = phasesOfDisposition(disposition)
  if (typeof phases === 'string') return phases
  const beside = disposition.before
    .flat()
    .flatMap((j) =>
      disposition.members.filter(
        (i) => i !== model.observed && disposition.rates.between[i * disposition.rates.size + j] > 0
      )
    )
  return beside.length > 0 ? enters(model, beside[0]) : { disposition, phases, responses: new Map() }
}

/** Why the parts are not defined where drug enters the disposition elsewhere than in the observed compartment. */
function entersBeside({ members, model }: Disposition, segment: Segment): string | undefined {
  const beside = members.find((i) => i !== model.observed && (segment.boluses[i] > 0 || segment.inputs[i] > 0))
  return beside === undefined ? undefined : enters(model, beside)
}

function enters(model: Model, compartment: number): string {
  const { name } = model.compartments[compartment]
  return `drug enters "${name}" beside the observed compartment, for which the phases' parts are not defined`
}

function partsAtStart(
  piece: Piece,
  previous: PartsPiece | undefined,
  phased: PhasedModel,
  trajectory: Trajectory
): readonly number[] {
  const { model, boluses } = piece.segment
  const { phases } = phased
  if (previous?.piece.segment.model === model) {
    const parts = previous.at(previous.piece.segment.duration)
    return parts.map((part, i) => part + phases[i].coefficient * boluses[model.observed])
  }
  const startsEmpty = phased.disposition.members.every((i) => !(trajectory.initial.amounts[i] > 0))
  if (previous === undefined && startsEmpty) {
    return phases.map(({ coefficient }) => coefficient * boluses[model.observed])
  }
  const amounts = new Float64Array(model.compartments.length)
  piece.amountsInto(0, amounts)
  return takenApart(phased, amounts)
}

/** The amounts in a disposition as parts of its phases: each compartment's contribution by its own response. */
function takenApart({ disposition, phases, responses }: PhasedModel, amounts: ReadonlyVector): number[] {
  const { model, rates, members } = disposition
  const parts = phases.map(() => 0)
  for (const j of members) {
    if (!(amounts[j] > 0)) continue
    const response = responses.get(j) ?? responseTo(model, rates, j).map(({ coefficient }) => coefficient ?? 0)
    responses.set(j, response)
    response.forEach((coefficient, i) => {
      parts[i] += coefficient * amounts[j]
    })
  }
  return parts
}
