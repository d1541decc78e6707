import { NumericalFailure, type NumericalFailureCode } from './numericalFailure'

/** What is known of an integration that had to stop. */
export interface RosenbrockStop {
  readonly why: string
  /** In the unit of time of the system, since the start of the stretch unless moved. */
  readonly time: number
  readonly step: number
  /** The last state that is good. */
  readonly state: readonly number[]
}

/** Where and why an integration had to stop. */
export class RosenbrockFailure extends NumericalFailure {
  readonly stop: RosenbrockStop

  constructor(code: NumericalFailureCode, stop: RosenbrockStop) {
    const { why, time, step, state } = stop
    super(code, `${why} at time ${time} with a step of ${step} from the state [${state.join(', ')}]`)
    this.name = 'RosenbrockFailure'
    this.stop = stop
  }

  /** The same failure with its time counted from `start` before the stretch. */
  after(start: number): RosenbrockFailure {
    return new RosenbrockFailure(this.code, { ...this.stop, time: start + this.stop.time })
  }
}
