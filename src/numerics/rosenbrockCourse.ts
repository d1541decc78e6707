/** How the continuous extension is kept: for each step its state and D_0, D_1, D_2, then the state at the end. */
const VECTORS = 4

/**
 * The course of a system over one stretch, from 0 to `duration`: the steps that were taken and between them the
 * continuous extension of order 4. It is continuous; its slope jumps at the steps within the tolerance.
 */
export class RosenbrockCourse {
  readonly size: number
  /** Ascending, from 0 to the duration: where steps begin, and the end. */
  readonly times: Float64Array
  readonly #rows: Float64Array

  /** Made by `RosenbrockRecorder`. */
  constructor(size: number, times: Float64Array, rows: Float64Array) {
    this.size = size
    this.times = times
    this.#rows = rows
  }

  /** One state at a time. At the time of a step it is the step's own value. */
  value(index: number, time: number): number {
    const k = this.#stepAt(time)
    const start = this.times[k]
    const row = k * VECTORS * this.size
    if (time === start) return this.#rows[row + index]
    if (time === this.times[k + 1]) return this.#rows[row + VECTORS * this.size + index]
    const theta = (time - start) / (this.times[k + 1] - start)
    return this.#rows[row + index] + this.#rise(row, index, theta)
  }

  /** Write every state at a time. */
  stateInto(time: number, out: Float64Array): void {
    for (let i = 0; i < this.size; i++) out[i] = this.value(i, time)
  }

  /** How much a state rises between two times, with the digits of the rise where both lie in one step. */
  rise(index: number, from: number, to: number): number {
    const first = this.#stepAt(from)
    const last = this.#stepAt(to)
    const stride = VECTORS * this.size
    const atFrom = this.#rise(first * stride, index, this.#theta(first, from))
    const atTo = this.#rise(last * stride, index, this.#theta(last, to))
    return this.#rows[last * stride + index] - this.#rows[first * stride + index] + (atTo - atFrom)
  }

  /** Derivative of the continuous extension of one state; at the time of a step that of the step which begins there. */
  slope(index: number, time: number): number {
    const k = this.#stepAt(time)
    const n = this.size
    const row = k * VECTORS * n + index
    const rows = this.#rows
    const theta = this.#theta(k, time)
    const d0 = rows[row + n]
    const d1 = rows[row + 2 * n]
    const d2 = rows[row + 3 * n]
    const rise =
      rows[row + 4 * n] -
      rows[row] +
      (1 - 2 * theta) * (d0 + theta * (d1 + theta * d2)) +
      theta * (1 - theta) * (d1 + 2 * theta * d2)
    return rise / (this.times[k + 1] - this.times[k])
  }

  #theta(k: number, time: number): number {
    const start = this.times[k]
    return (time - start) / (this.times[k + 1] - start)
  }

  /** y(start + theta h) - y(start) of the step whose row begins at `row`. */
  #rise(row: number, index: number, theta: number): number {
    const n = this.size
    const rows = this.#rows
    const at = row + index
    const extension = rows[at + n] + theta * (rows[at + 2 * n] + theta * rows[at + 3 * n])
    return theta * (rows[at + 4 * n] - rows[at] + (1 - theta) * extension)
  }

  /** The step that a time lies in: the later one at the time between two, the last one at the end. */
  #stepAt(time: number): number {
    const times = this.times
    let low = 0
    let high = times.length - 2
    if (!(time >= 0 && time <= times[high + 1])) {
      throw new RangeError(`time ${time} is not between 0 and ${times[high + 1]}`)
    }
    while (low < high) {
      const middle = (low + high + 1) >> 1
      if (times[middle] <= time) low = middle
      else high = middle - 1
    }
    return low
  }
}

/** Takes down steps as they are made. Its room grows and is used again for the next course; a course is a copy. */
export class RosenbrockRecorder {
  readonly #size: number
  #count = 0
  #times: Float64Array
  #rows: Float64Array

  constructor(size: number) {
    this.#size = size
    this.#times = new Float64Array(64)
    this.#rows = new Float64Array(64 * VECTORS * size)
  }

  begin(): void {
    this.#count = 0
  }

  /** Room for one more step and the state after it: where the rows of the step begin. */
  get at(): number {
    return this.#count * VECTORS * this.#size
  }

  get rows(): Float64Array {
    return this.#rows
  }

  /** Make room for a step from this time and state; D_0 to D_2 are to follow at `at` + size. */
  add(time: number, state: Float64Array): void {
    this.#reserve(this.#count + 1)
    this.#times[this.#count] = time
    this.#rows.set(state, this.at)
  }

  /** The step added last is complete. */
  keep(): void {
    this.#count += 1
  }

  /** The course up to its end. */
  finish(time: number, state: Float64Array): RosenbrockCourse {
    this.add(time, state)
    return new RosenbrockCourse(
      this.#size,
      this.#times.slice(0, this.#count + 1),
      this.#rows.slice(0, this.at + this.#size)
    )
  }

  #reserve(count: number): void {
    if (count <= this.#times.length) return
    const times = new Float64Array(2 * this.#times.length)
    const rows = new Float64Array(2 * this.#rows.length)
    times.set(this.#times)
    rows.set(this.#rows)
    this.#times = times
    this.#rows = rows
  }
}
