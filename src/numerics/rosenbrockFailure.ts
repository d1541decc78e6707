import { NumericalFailure, type NumericalFailureCode } from './numericalFailure'

/** Where and why an integration had to stop. */
export class RosenbrockFailure extends NumericalFailure {
  /** Since the start of the stretch, in the unit of time of the system. */
  readonly time: number
  readonly step: number
  /** The last state that is good. */
  readonly state: readonly number[]

  constructor(code: NumericalFailureCode, why: string, time: number, step: number, state: Float64Array) {
    super(code, `${why} at time ${time} with a step of ${step} from the state [${state.join(', ')}]`)
    this.name = 'RosenbrockFailure'
    this.time = time
    this.step = step
    this.state = Array.from(state)
  }
}
