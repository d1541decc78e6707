/**
 * Replace the leading `size` x `size` block of a row-major matrix, whose rows are `stride` apart, by its triangular
 * factors with partial pivoting: multipliers below the diagonal, and the reciprocals of the pivots on it. `pivots[k]` is the
 * row exchanged with row k. Returns whether the block is regular; where it is not, what is left of it is of no use.
 */
export function factorInto(matrix: Float64Array, size: number, stride: number, pivots: Int32Array): boolean {
  for (let k = 0; k < size; k++) {
    const rowK = k * stride
    let largest = Math.abs(matrix[rowK + k])
    let pivot = k
    for (let i = k + 1; i < size; i++) {
      const candidate = Math.abs(matrix[i * stride + k])
      if (candidate > largest) {
        largest = candidate
        pivot = i
      }
    }
    pivots[k] = pivot
    // Not `largest <= 0`: a NaN is no pivot either.
    if (!(largest > 0 && largest < Number.POSITIVE_INFINITY)) return false
    if (pivot !== k) {
      const rowP = pivot * stride
      for (let j = 0; j < size; j++) {
        const kept = matrix[rowK + j]
        matrix[rowK + j] = matrix[rowP + j]
        matrix[rowP + j] = kept
      }
    }
    const reciprocal = 1 / matrix[rowK + k]
    matrix[rowK + k] = reciprocal
    for (let i = k + 1; i < size; i++) {
      const rowI = i * stride
      const multiplier = matrix[rowI + k]
      if (multiplier === 0) continue
      const scaled = multiplier * reciprocal
      matrix[rowI + k] = scaled
      for (let j = k + 1; j < size; j++) matrix[rowI + j] -= scaled * matrix[rowK + j]
    }
  }
  return true
}

/** Replace the first `size` numbers of `vector` by the solution of the system that `factorInto` has factored. */
export function solveInto(
  factors: Float64Array,
  size: number,
  stride: number,
  pivots: Int32Array,
  vector: Float64Array
): void {
  // Rows were exchanged whole, multipliers too: every exchange comes before the first elimination.
  for (let k = 0; k < size; k++) {
    const pivot = pivots[k]
    if (pivot !== k) {
      const kept = vector[k]
      vector[k] = vector[pivot]
      vector[pivot] = kept
    }
  }
  for (let i = 1; i < size; i++) {
    const row = i * stride
    let sum = vector[i]
    for (let j = 0; j < i; j++) sum -= factors[row + j] * vector[j]
    vector[i] = sum
  }
  for (let i = size - 1; i >= 0; i--) {
    const row = i * stride
    let sum = vector[i]
    for (let j = i + 1; j < size; j++) sum -= factors[row + j] * vector[j]
    vector[i] = sum * factors[row + i]
  }
}
