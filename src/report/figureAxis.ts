/** Where a value stands on an axis, and where the axis carries a mark. */
export interface Axis {
  /** Pixel of a value; for a logarithmic axis the value is above 0. */
  readonly place: (value: number) => number
  readonly ticks: readonly Tick[]
  /** Values at or below it have no place: 0 on a logarithmic axis. */
  readonly floor: number
}

export interface Tick {
  readonly at: number
  /** Empty for a mark without a number. */
  readonly label: string
}

/** A linear axis from 0 to a round number at or above `top`. */
export function linearAxis(top: number, from: number, to: number, marks: number): Axis {
  const step = roundStep(top / marks)
  const end = Math.max(1, Math.ceil(top / step - 1e-9)) * step
  const count = Math.round(end / step)
  const ticks = Array.from({ length: count + 1 }, (_, k) => ({ at: k * step, label: decimal(k * step, step) }))
  return { place: (value) => from + ((to - from) * value) / end, ticks, floor: Number.NEGATIVE_INFINITY }
}

/** A logarithmic axis over `low` to `top`, widened to 1, 2 or 5 times a power of ten. */
export function logarithmicAxis(low: number, top: number, from: number, to: number): Axis {
  const start = roundDown(low)
  const end = roundUp(top)
  const decades = Math.log10(end / start)
  const ticks: Tick[] = []
  for (let power = Math.floor(Math.log10(start)); power <= Math.ceil(Math.log10(end)); power++) {
    for (let digit = 1; digit < 10; digit++) {
      const at = Number(`${digit}e${power}`)
      if (at < start * (1 - 1e-9) || at > end * (1 + 1e-9)) continue
      const spoken = digit === 1 || ((digit === 2 || digit === 5) && decades <= 2.5)
      if (spoken || decades <= 4) ticks.push({ at, label: spoken ? decimal(at, at) : '' })
    }
  }
  const span = Math.log(end / start)
  return { place: (value) => from + ((to - from) * Math.log(value / start)) / span, ticks, floor: 0 }
}

/** 1, 2 or 5 times a power of ten, at or above x. */
export function roundStep(x: number): number {
  return roundUp(x)
}

function roundUp(x: number): number {
  const power = Math.floor(Math.log10(x))
  for (const digit of [1, 2, 5, 10]) {
    const step = Number(`${digit}e${power}`)
    if (step >= x * (1 - 1e-9)) return step
  }
  return Number(`1e${power + 1}`)
}

function roundDown(x: number): number {
  const power = Math.floor(Math.log10(x) + 1e-9)
  for (const digit of [5, 2]) {
    const step = Number(`${digit}e${power}`)
    if (step <= x * (1 + 1e-9)) return step
  }
  return Number(`1e${power}`)
}

function decimal(x: number, step: number): string {
  if (x === 0) return '0'
  const places = Math.max(0, -Math.floor(Math.log10(step) + 1e-9))
  if (places > 6 || x >= 1e6) return x.toExponential(0).replace('e+', 'e')
  return x.toFixed(places).replace(/\B(?=(\d{3})+(?!\d))(?<!\.\d*)/g, '\u202f')
}
