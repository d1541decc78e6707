/** Seeded random choices (Mulberry32 by Tommy Ettinger, public domain): the same seed draws the same, everywhere. */
export class Draw {
  #state: number

  constructor(seed: number) {
    this.#state = seed >>> 0
  }

  /** Uniform on [0, 1). */
  unit(): number {
    this.#state = (this.#state + 0x6d2b79f5) >>> 0
    let t = this.#state
    t = Math.imul(t ^ (t >>> 15), t | 1)
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61)
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }

  chance(probability: number): boolean {
    return this.unit() < probability
  }

  /** A whole number from low to high, both included. */
  whole(low: number, high: number): number {
    return low + Math.floor(this.unit() * (high - low + 1))
  }

  /** A number as a person would type it: three significant digits, between low and high. */
  typed(low: number, high: number): number {
    return Math.min(high, Math.max(low, Number((low + this.unit() * (high - low)).toPrecision(3))))
  }

  /** The same, evenly over orders of magnitude. */
  typedLog(low: number, high: number): number {
    return Math.min(high, Math.max(low, Number((low * (high / low) ** this.unit()).toPrecision(3))))
  }

  of<T>(choices: readonly T[]): T {
    const chosen = choices[this.whole(0, choices.length - 1)]
    if (chosen === undefined) throw new RangeError('there is nothing to choose from')
    return chosen
  }
}
