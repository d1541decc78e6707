/** A vector or a row-major matrix that the callee reads and never writes. */
export interface ReadonlyVector {
  readonly length: number
  readonly [index: number]: number
}
