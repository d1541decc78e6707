import type { Hours } from '../units/canonical'
import { crossings, valueAt } from './curve'
import type { Model } from './model'
import { OperatorStore } from './operatorStore'
import { propagate } from './propagate'
import { numbersOf, type Reasons, reasonsOf } from './reasons'
import { emptyState } from './state'
import { timeline } from './timeline'
import type { Signal, Trajectory } from './trajectory'

/** Times for a concentration to fall after a constant-rate infusion into the observed compartment is stopped. */
export interface DecrementTimes {
  readonly signal: Signal
  /** Name of the observed compartment or of the effect site. */
  readonly site: string
  /** Length of the infusion. */
  readonly infusion: Hours
  /** One of the regimens' own, not of the standard lengths. */
  readonly own: boolean
  /** To fall by 20, 50 and 80 %. The second is the context-sensitive half-time. */
  readonly by20: Hours | undefined
  readonly by50: Hours | undefined
  readonly by80: Hours | undefined
  readonly why: Reasons
}

/** Lengths of infusion that every model is shown for. */
const STANDARD: readonly Hours[] = [1, 4, 12, 24]
/** The fall is followed over the infusion's length and twice as long this often. */
const DOUBLINGS = 60

/**
 * Decrement times of the observed concentration and of every effect site, after 1, 4, 12 and 24 h and the lengths in
 * `own`, ascending. Each is relative to the level when the infusion stops, by root search: the first time from which the
 * level has fallen by that much. (Context-sensitive half-time: Hughes, Glass & Jacobs 1992, Anesthesiology 76:334, cited
 * from memory.)
 */
export function decrementTimes(model: Model, own: readonly Hours[]): DecrementTimes[] {
  const extra = [...new Set(own)].filter((length) => length > 0 && !STANDARD.includes(length))
  const lengths = [...STANDARD, ...extra].sort((a, b) => a - b)
  const sites: { readonly signal: Signal; readonly site: string }[] = [
    { signal: { kind: 'observed' }, site: model.compartments[model.observed].name },
    ...model.effectSites.map(({ name }, index) => ({ signal: { kind: 'effect-site', index } as const, site: name }))
  ]
  const store = new OperatorStore()
  return sites.flatMap(({ signal, site }) =>
    lengths.map((infusion): DecrementTimes => {
      const fall = (share: number): Hours | string =>
        timeToFall(model, signal, infusion, share, store) ?? 'the level does not fall that far'
      const times = { by20: fall(0.2), by50: fall(0.5), by80: fall(0.8) }
      return { signal, site, infusion, own: own.includes(infusion), ...numbersOf(times), why: reasonsOf(times) }
    })
  )
}

/** Hours after the end of a constant-rate infusion for the level to have fallen by a share of what it was then. */
export function timeToFall(
  model: Model,
  signal: Signal,
  infusion: Hours,
  share: number,
  store: OperatorStore = new OperatorStore()
): Hours | undefined {
  let follow = infusion
  for (let k = 0; k < DOUBLINGS; k++) {
    const trajectory = infused(model, infusion, infusion + follow, store)
    const level = (1 - share) * valueAt(trajectory, signal, infusion, 'before')
    const down = crossings(trajectory, signal, level, infusion, trajectory.end).find(
      ({ direction }) => direction === 'down'
    )
    if (down !== undefined) return down.time - infusion
    follow *= 2
  }
  return undefined
}

/** 1 mg/h into the observed compartment for a while, and then nothing. */
function infused(model: Model, length: Hours, until: Hours, store: OperatorStore): Trajectory {
  const dose = { kind: 'infusion', start: 0, into: model.observed, amount: length, duration: length } as const
  const segments = timeline({ doses: [dose], models: [{ from: 0, model }], sessions: [], until })
  return propagate(segments, emptyState(model), store)
}
