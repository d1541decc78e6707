import type { Dose } from '../../src/pk/dose'
import type { Model } from '../../src/pk/model'
import type { Session } from '../../src/pk/sessions'
import type { Signal } from '../../src/pk/trajectory'

/** One sample of a dense course: just after what is given at its time, or just before it where `before` is set. */
export interface DenseSample {
  readonly time: number
  readonly level: number
  /** Area under the level since 0. */
  readonly area: number
}

/** A course as nothing but samples. */
export interface DenseCourse {
  readonly samples: readonly DenseSample[]
  /** Largest difference of two neighbouring samples of one stretch. */
  readonly jump: number
  /** Longest distance of two neighbouring samples. */
  readonly step: number
}

export interface DenseRequest {
  readonly doses: readonly Dose[]
  readonly models: readonly { readonly from: number; readonly model: Model }[]
  readonly sessions: readonly Session[]
  readonly signal: Signal
  readonly until: number
  /** Further times that a sample is wanted just before and just after. */
  readonly cuts: readonly number[]
  /** Samples in each panel of a stretch between two events; panels double in length from the fastest time on. */
  readonly density: number
  /** Amounts at 0, then the levels at the effect sites; empty where absent. */
  readonly initial?: readonly number[]
}

/**
 * The slow and obvious course: between events, equal steps with the textbook exponential of one augmented matrix (amounts,
 * effect sites, area, and a 1 that carries the inputs), one after another. Nothing is shared with the program but types.
 */
export function denseCourse(request: DenseRequest): DenseCourse {
  const { doses, until, density, signal } = request
  const times = eventTimes(request)
  const [{ model: first }] = request.models
  const n = first.compartments.length
  const sites = first.effectSites.length
  const size = n + sites + 2
  let state = new Array<number>(size).fill(0)
  request.initial?.forEach((value, i) => {
    state[i] = value
  })
  state[size - 1] = 1
  const samples: DenseSample[] = []
  let jump = 0
  let step = 0
  for (let k = 0; k + 1 < times.length; k++) {
    const middle = (times[k] + times[k + 1]) / 2
    const model = request.models.filter(({ from }) => from <= middle).at(-1)?.model ?? first
    for (const dose of doses) {
      if (dose.kind === 'bolus' && near(dose.start, times[k])) state[dose.into] += dose.amount
    }
    const matrix = augmented(model, request, middle, size)
    samples.push({ time: times[k], level: levelOf(state, model, signal), area: state[size - 2] })
    for (const { from, to } of panels(times[k], times[k + 1], matrix)) {
      const h = (to - from) / density
      const exponential = textbookExponential(matrix.map((row) => row.map((entry) => entry * h)))
      step = Math.max(step, h)
      for (let i = 1; i <= density; i++) {
        state = exponential.map((row) => row.reduce((sum, entry, j) => sum + entry * state[j], 0))
        const level = levelOf(state, model, signal)
        jump = Math.max(jump, Math.abs(level - (samples.at(-1)?.level ?? level)))
        samples.push({ time: i === density ? to : from + i * h, level, area: state[size - 2] })
      }
    }
  }
  if (until !== times.at(-1)) throw new Error('the course does not end where it should')
  return { samples, jump, step }
}

/** Samples from just after `from` to just before `to`. */
export function between(course: DenseCourse, from: number, to: number): readonly DenseSample[] {
  const { samples } = course
  let first = samples.findIndex(({ time }) => time >= from - 1e-9)
  while (first + 1 < samples.length && near(samples[first + 1].time, samples[first].time)) first += 1
  let last = first
  while (last + 1 < samples.length && samples[last + 1].time < to - 1e-9) last += 1
  if (last + 1 < samples.length && near(samples[last + 1].time, to)) last += 1
  return samples.slice(first, last + 1)
}

/** A stretch in panels, the first as long as the fastest time in it, each later one twice the one before. */
function panels(from: number, to: number, matrix: readonly (readonly number[])[]): { from: number; to: number }[] {
  const fastest = Math.max(...matrix.map((row, i) => Math.abs(row[i])))
  const count = Math.max(1, Math.ceil(Math.log2((to - from) * fastest)) + 1)
  const ends = Array.from({ length: count }, (_, p) => from + (to - from) / 2 ** (count - 1 - p))
  return ends.map((end, p) => ({ from: p === 0 ? from : ends[p - 1], to: end }))
}

function eventTimes({ doses, models, sessions, cuts, until }: DenseRequest): number[] {
  const all = [
    ...cuts,
    ...doses.flatMap((dose) => (dose.kind === 'bolus' ? [dose.start] : [dose.start, dose.start + dose.duration])),
    ...models.map(({ from }) => from),
    ...sessions.flatMap(({ start, duration }) => [start, start + duration])
  ]
  const inside = all.filter((time) => time > 0 && time < until && !near(time, until)).sort((a, b) => a - b)
  const times = [0]
  for (const time of inside) if (!near(time, times[times.length - 1])) times.push(time)
  return [...times, until]
}

function near(a: number, b: number): boolean {
  return Math.abs(a - b) <= 1e-11 * Math.max(1, Math.abs(a))
}

function levelOf(state: readonly number[], model: Model, signal: Signal): number {
  if (signal.kind === 'effect-site') return state[model.compartments.length + signal.index]
  return state[model.observed] / (model.compartments[model.observed].volume ?? Number.NaN)
}

function augmented(model: Model, request: DenseRequest, at: number, size: number): number[][] {
  const matrix = Array.from({ length: size }, () => new Array<number>(size).fill(0))
  const n = model.compartments.length
  const one = size - 1
  for (const transfer of model.transfers) {
    if (transfer.kind !== 'first-order') throw new Error('linear models only')
    matrix[transfer.from][transfer.from] -= transfer.rate
    if (transfer.to !== 'eliminated') matrix[transfer.to][transfer.from] += transfer.rate
  }
  for (const { start, duration, clearance } of request.sessions) {
    if (start < at && at < start + duration) {
      matrix[model.observed][model.observed] -= clearance / (model.compartments[model.observed].volume ?? Number.NaN)
    }
  }
  model.effectSites.forEach(({ source, rate }, i) => {
    matrix[n + i][source] += rate / (model.compartments[source].volume ?? Number.NaN)
    matrix[n + i][n + i] -= rate
  })
  const { signal } = request
  if (signal.kind === 'effect-site') matrix[size - 2][n + signal.index] = 1
  else matrix[size - 2][model.observed] = 1 / (model.compartments[model.observed].volume ?? Number.NaN)
  for (const dose of request.doses) {
    if (dose.kind === 'infusion' && dose.start < at && at < dose.start + dose.duration) {
      matrix[dose.into][one] += dose.amount / dose.duration
    }
  }
  return matrix
}

/** Scaling and squaring of the plain series, to 20 terms. */
function textbookExponential(matrix: readonly (readonly number[])[]): number[][] {
  const size = matrix.length
  const norm = Math.max(...matrix.map((row) => row.reduce((sum, entry) => sum + Math.abs(entry), 0)))
  const squarings = Math.max(0, Math.ceil(Math.log2(norm * 4)))
  const scaled = matrix.map((row) => row.map((entry) => entry / 2 ** squarings))
  let sum = identity(size)
  let term = identity(size)
  for (let k = 1; k <= 20; k++) {
    term = product(term, scaled).map((row) => row.map((entry) => entry / k))
    sum = sum.map((row, i) => row.map((entry, j) => entry + term[i][j]))
  }
  for (let k = 0; k < squarings; k++) sum = product(sum, sum)
  return sum
}

function identity(size: number): number[][] {
  return Array.from({ length: size }, (_, i) => Array.from({ length: size }, (_, j) => (i === j ? 1 : 0)))
}

function product(a: readonly (readonly number[])[], b: readonly (readonly number[])[]): number[][] {
  return a.map((row) => b[0].map((_, j) => row.reduce((sum, entry, k) => sum + entry * b[k][j], 0)))
}
