/** What stopped a computation whose input was valid. */
export type NumericalFailureCode =
  /** A product of rates and time, or a result, leaves the range of double precision. */
  | 'out-of-range'
  /** Drug that enters a compartment can never leave it, so that there is no steady state and no finite area. */
  | 'no-way-out'
  /** The function has the same sign at both ends of the bracket. */
  | 'no-sign-change'
  /** An iteration used up its rounds. */
  | 'no-convergence'
  /** A function that was handed in yields NaN. */
  | 'not-a-number'
  /** The integrator's steps fell below what time can resolve. */
  | 'step-too-small'
  /** The integrator used up its budget of steps. */
  | 'too-many-steps'

/** A computation on valid input that cannot give a number: thrown by `numerics`, caught where a run is put together. */
export class NumericalFailure extends Error {
  readonly code: NumericalFailureCode
  /** The compartment at fault, by index, where one is. */
  readonly compartment: number | undefined

  constructor(code: NumericalFailureCode, message: string, compartment?: number) {
    super(message)
    this.name = 'NumericalFailure'
    this.code = code
    this.compartment = compartment
  }
}
