import type { ReadonlyVector } from '../numerics/vector'
import type { Hours, MilligramsPerHour } from '../units/canonical'
import type { Dose } from './dose'
import type { Model } from './model'
import type { Segment } from './segment'
import { type Session, withAddedClearance } from './sessions'
import { isBefore, sameTime } from './times'

/** A model from `from` on, until the next stretch; the first is in force from the start. */
export interface ModelStretch {
  readonly from: Hours
  readonly model: Model
}

export interface TimelineRequest {
  /** Drug entering compartments, in any order; what enters at or after `until` is left out. */
  readonly doses: readonly Dose[]
  readonly models: readonly ModelStretch[]
  readonly sessions: readonly Session[]
  readonly until: Hours
}

/**
 * Gapless segments from 0 to `until`, cut where an input, the person or a session starts or ends. Times within 1e-12
 * relative are one cut, at the earliest of them. A change of the person acts before a dose at that time, which shows in
 * the model of the segment; a running infusion keeps its rate. Each infusion's rate is its amount over the length
 * between its two cuts, so that exactly its amount enters; an infusion too short to have two cuts enters at once.
 */
export function timeline(request: TimelineRequest): Segment[] {
  const { models, sessions, until } = request
  const doses = request.doses.filter((dose) => isBefore(dose.start, until))
  const cuts = cutsOf(request, doses)
  const size = models[0].model.compartments.length
  const none: ReadonlyVector = new Array<number>(size).fill(0)
  const boluses = new Map<number, number[]>()
  const starts = new Map<number, Infusion[]>()
  for (const dose of doses) place(dose, cuts, size, boluses, starts)
  const inForce = new ModelsInForce(models, sessions)
  const segments: Segment[] = []
  let running: Infusion[] = []
  let inputs = none
  for (let k = 0; k + 1 < cuts.length; k++) {
    const still = running.filter((infusion) => infusion.endCut > k)
    const begun = starts.get(k) ?? []
    if (begun.length > 0 || still.length < running.length) {
      running = [...still, ...begun]
      inputs = running.length === 0 ? none : summed(running, size)
    }
    const start = cuts[k]
    segments.push({
      start,
      duration: cuts[k + 1] - start,
      model: inForce.at(start),
      boluses: boluses.get(k) ?? none,
      inputs
    })
  }
  return segments
}

interface Infusion {
  readonly into: number
  readonly rate: MilligramsPerHour
  /** Index of the cut at which it ends; beyond the cuts where it runs past the end. */
  readonly endCut: number
}

/** Ascending times from 0 to `until` at which something starts or ends. */
function cutsOf(request: TimelineRequest, doses: readonly Dose[]): Hours[] {
  const { models, sessions, until } = request
  const times: Hours[] = []
  for (const dose of doses) {
    times.push(dose.start)
    if (dose.kind === 'infusion') times.push(dose.start + dose.duration)
  }
  for (const stretch of models) times.push(stretch.from)
  for (const session of sessions) times.push(session.start, session.start + session.duration)
  times.sort((a, b) => a - b)
  const cuts: Hours[] = [0]
  for (const time of times) {
    if (time > 0 && isBefore(time, until) && !sameTime(time, cuts[cuts.length - 1])) cuts.push(time)
  }
  cuts.push(until)
  return cuts
}

function place(
  dose: Dose,
  cuts: readonly Hours[],
  size: number,
  boluses: Map<number, number[]>,
  starts: Map<number, Infusion[]>
): void {
  const k = cutAt(cuts, dose.start)
  if (dose.kind === 'infusion') {
    const end = dose.start + dose.duration
    const runsOn = isBefore(cuts[cuts.length - 1], end)
    const endCut = runsOn ? cuts.length : cutAt(cuts, end)
    if (endCut > k) {
      const length = runsOn ? dose.duration : cuts[endCut] - cuts[k]
      const list = starts.get(k) ?? []
      list.push({ into: dose.into, rate: dose.amount / length, endCut })
      starts.set(k, list)
      return
    }
  }
  const vector = boluses.get(k) ?? new Array<number>(size).fill(0)
  vector[dose.into] += dose.amount
  boluses.set(k, vector)
}

/** Index of the last cut that is not after `time`, times within 1e-12 being one. */
function cutAt(cuts: readonly Hours[], time: Hours): number {
  let low = 0
  let high = cuts.length - 1
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (isBefore(time, cuts[middle])) high = middle - 1
    else low = middle
  }
  return low
}

function summed(running: readonly Infusion[], size: number): ReadonlyVector {
  const rates = new Array<number>(size).fill(0)
  for (const infusion of running) rates[infusion.into] += infusion.rate
  return rates
}

/**
 * The model of the stretch with the clearances of the sessions in force, asked for at ascending times; one object for each
 * combination met, so that its operators are made once.
 */
class ModelsInForce {
  readonly #stretches: readonly ModelStretch[]
  readonly #sessions: readonly Session[]
  readonly #made = new Map<Model, Map<number, Model>>()
  #begun = 0
  #running: Session[] = []

  constructor(stretches: readonly ModelStretch[], sessions: readonly Session[]) {
    this.#stretches = stretches
    this.#sessions = [...sessions].sort((a, b) => a.start - b.start)
  }

  at(time: Hours): Model {
    let model = this.#stretches[0].model
    for (const stretch of this.#stretches) if (!isBefore(time, stretch.from)) model = stretch.model
    const clearance = this.#clearanceAt(time)
    const made = this.#made.get(model) ?? new Map<number, Model>()
    this.#made.set(model, made)
    const withSessions = made.get(clearance) ?? withAddedClearance(model, clearance)
    made.set(clearance, withSessions)
    return withSessions
  }

  #clearanceAt(time: Hours): number {
    const sessions = this.#sessions
    while (this.#begun < sessions.length && !isBefore(time, sessions[this.#begun].start)) {
      this.#running.push(sessions[this.#begun])
      this.#begun += 1
    }
    this.#running = this.#running.filter((session) => isBefore(time, session.start + session.duration))
    return this.#running.reduce((sum, session) => sum + session.clearance, 0)
  }
}
