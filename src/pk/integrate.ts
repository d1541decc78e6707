import { Rosenbrock } from '../numerics/rosenbrock'
import { RosenbrockRecorder } from '../numerics/rosenbrockCourse'
import { RosenbrockFailure } from '../numerics/rosenbrockFailure'
import type { RosenbrockCounts } from '../numerics/rosenbrockSystem'
import type { ReadonlyVector } from '../numerics/vector'
import { Flux } from './flux'
import { FluxTolerance, type IntegrationTolerance, type LargestAmounts } from './fluxTolerance'
import { IntegratedPiece } from './integratedPiece'
import type { Model } from './model'
import type { Segment } from './segment'
import type { BodyState } from './state'
import type { Trajectory } from './trajectory'

/** What results are computed with where nothing else is said: a trough of a ten-thousandth of the peak has its digits. */
export const WORKING_TOLERANCE: IntegrationTolerance = { relative: 1e-8, floor: 1e-4 }

/** What a linear model's exact course is compared with. */
export const INTEGRATION_WITNESS: IntegrationTolerance = { relative: 1e-11, floor: 1e-6 }

/**
 * The course of any model over gapless segments, from a state before the first one's boluses, by the Rosenbrock method
 * (METHODS 2): each segment on its own, so that every dose, infusion end, change and session is met exactly. Mass balance is
 * kept to rounding, whatever the tolerance.
 *
 * Throws `RangeError` for no segments, `RosenbrockFailure` with time (since the start), step and state where a segment
 * cannot be integrated.
 */
export function integrate(
  segments: readonly Segment[],
  initial: BodyState,
  tolerance: IntegrationTolerance = WORKING_TOLERANCE
): Trajectory {
  const last = segments.at(-1)
  if (last === undefined) throw new RangeError('a trajectory has at least one segment')
  const integrator = new Integrator(tolerance)
  const pieces: IntegratedPiece[] = []
  integrator.begin(initial)
  for (const segment of segments) pieces.push(integrator.piece(segment))
  return { end: last.start + last.duration, initial, pieces }
}

/** The state at the end of the segments, before anything given then: as `integrate`, with nothing kept on the way. */
export function stateAfter(
  segments: readonly Segment[],
  initial: BodyState,
  tolerance: IntegrationTolerance = WORKING_TOLERANCE
): BodyState {
  const integrator = new Integrator(tolerance)
  integrator.begin(initial)
  for (const segment of segments) integrator.pass(segment)
  return integrator.state
}

/** A model made ready: its right side, the method with its scratch, room for the state and the steps. */
interface Ready {
  readonly flux: Flux
  readonly method: Rosenbrock
  readonly state: Float64Array
  readonly recorder: RosenbrockRecorder
}

/** Carries one body through segments. Keeps what it made for a model; not to be shared between courses that interleave. */
export class Integrator {
  readonly #tolerance: IntegrationTolerance
  readonly #ready = new Map<Model, Ready>()
  readonly #largest: LargestAmounts = { drug: 0, target: 0 }
  #state: BodyState = { amounts: [], effectSites: [] }

  constructor(tolerance: IntegrationTolerance) {
    this.#tolerance = tolerance
  }

  /** Begin again, before the boluses of the first segment to come. */
  begin(initial: BodyState): void {
    this.#state = initial
    this.#largest.drug = 0
    this.#largest.target = 0
  }

  /** At the end of the last segment. */
  get state(): BodyState {
    return this.#state
  }

  /** Work done since this object was made, over all its models. */
  get counts(): RosenbrockCounts {
    const sum: RosenbrockCounts = { steps: 0, rejections: 0, factorisations: 0, derivatives: 0, jacobians: 0 }
    for (const { method } of this.#ready.values()) {
      sum.steps += method.counts.steps
      sum.rejections += method.counts.rejections
      sum.factorisations += method.counts.factorisations
      sum.derivatives += method.counts.derivatives
      sum.jacobians += method.counts.jacobians
    }
    return sum
  }

  /** Go through a segment and keep its course. */
  piece(segment: Segment): IntegratedPiece {
    const ready = this.#advance(segment, true)
    return new IntegratedPiece(segment, ready.flux, ready.recorder.finish(segment.duration, ready.state))
  }

  /** Go through a segment. */
  pass(segment: Segment): void {
    this.#advance(segment, false)
  }

  #advance(segment: Segment, keep: boolean): Ready {
    const ready = this.#readyFor(segment.model)
    const { flux, method, state, recorder } = ready
    flux.inputs.set(Array.from(segment.inputs))
    state.fill(0)
    flux.stateInto(withBoluses(this.#state.amounts, segment.boluses), state)
    state.set(Array.from(this.#state.effectSites), flux.coupled)
    try {
      method.advance(state, segment.duration, keep ? recorder : undefined)
    } catch (failure) {
      if (failure instanceof RosenbrockFailure) throw failure.after(segment.start)
      throw failure
    }
    const amounts = new Float64Array(flux.coupled)
    flux.amountsInto(state, amounts)
    const { compartments, effectSites } = flux.layout
    this.#state = { amounts, effectSites: state.slice(compartments, compartments + effectSites) }
    return ready
  }

  #readyFor(model: Model): Ready {
    const known = this.#ready.get(model)
    if (known !== undefined) return known
    const flux = new Flux(model)
    const tolerance = new FluxTolerance(this.#tolerance, flux, this.#largest)
    const nonnegative = new Array<boolean>(flux.size).fill(true)
    const ready: Ready = {
      flux,
      method: new Rosenbrock(flux, { tolerance, nonnegative }),
      state: new Float64Array(flux.size),
      recorder: new RosenbrockRecorder(flux.size)
    }
    this.#ready.set(model, ready)
    return ready
  }
}

function withBoluses(amounts: ReadonlyVector, boluses: ReadonlyVector): ReadonlyVector {
  return Array.from(amounts, (amount, i) => amount + boluses[i])
}
