/**
 * Products with one small square matrix B, row-major, n x n. The sizes 2 to 5 are written out (`kernel2.ts` to `kernel5.ts`): B is held
 * in local variables and the loops over rows or columns touch nothing but them. Larger ones are loops, which are faster
 * than a written-out n = 8, whose 64 values fit no registers.
 */
export interface Kernel {
  /** `count` rows A, one after another: out = A B. `out` must be neither. */
  readonly rows: (a: Float64Array, count: number, b: Float64Array, out: Float64Array) => void
  /** `count` rows A and `columns` columns C, both one after another: out = A C, column by column. `out` must be neither. */
  readonly columns: (a: Float64Array, count: number, c: Float64Array, columns: number, out: Float64Array) => void
  /** Steps of x <- B x: `states` holds x in its first n places and receives `count` successors behind it. */
  readonly march: (b: Float64Array, states: Float64Array, count: number) => void
  /** The first `count` rows of `a`, in place: every column divided by its sum. */
  readonly balance: (a: Float64Array, count: number) => void
}
