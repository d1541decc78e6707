import type { Hours, Milligrams } from '../units/canonical'
import type { DoseLine, Exception, Reckoned } from './prescription'
import type { Subject } from './subject'

/** One giving before it meets a route: how much of the product's own mass, over how long (0: at once). */
export interface Giving {
  readonly productAmount: Milligrams
  readonly duration: Hours
  /** What the line asked for before its cap, where the cap took effect. */
  readonly uncapped?: Milligrams
  /** What was scheduled, where it was given otherwise. */
  readonly departure?: string
}

/** Why an amount cannot be reckoned: which key is at fault, and what is missing. */
export interface Unreckonable {
  readonly key: string
  readonly message: string
}

/**
 * One scheduled dose of a line for a subject as at the dose's actual time.
 * `atMost` caps what the line orders: an amount, or a rate times its length (the length is kept and the rate falls, so that
 * no more than the cap is given and no faster than ordered). An exception's own `amount` is what was given, and is not capped.
 * `over` keeps the amount; `stoppedAfter` keeps the rate and drops the rest; `fractionTaken` multiplies what is left.
 */
export function reckonGiving(
  line: DoseLine,
  exception: Exception | undefined,
  subject: Subject
): Giving | Unreckonable {
  const ordered = orderedAmount(line, subject)
  if (typeof ordered !== 'number') return ordered
  const capped = line.atMost !== undefined && ordered > line.atMost ? line.atMost : ordered
  const departures: string[] = []
  let amount = capped
  if (exception?.amount !== undefined) {
    const given = reckon(exception.amount, line, subject, 'amount')
    if (typeof given !== 'number') return given
    amount = given
    departures.push(`${plain(given)} mg instead of ${plain(capped)} mg`)
  }
  let duration = line.over ?? 0
  if (exception?.over !== undefined && exception.over !== duration) {
    departures.push(`over ${plain(exception.over)} h instead of ${duration === 0 ? 'at once' : `${plain(duration)} h`}`)
    duration = exception.over
  }
  if (exception?.stoppedAfter !== undefined) {
    if (duration === 0)
      return { key: 'stoppedAfter', message: 'only an infusion can be stopped; this dose is given at once' }
    if (exception.stoppedAfter > duration) {
      const message = `stopped after ${plain(exception.stoppedAfter)} h, but the infusion lasts ${plain(duration)} h`
      return { key: 'stoppedAfter', message }
    }
    amount *= exception.stoppedAfter / duration
    departures.push(`stopped after ${plain(exception.stoppedAfter)} h of ${plain(duration)} h`)
    duration = exception.stoppedAfter
  }
  if (exception?.fractionTaken !== undefined) {
    amount *= exception.fractionTaken
    departures.push(`a fraction of ${plain(exception.fractionTaken)} taken`)
  }
  return {
    productAmount: amount,
    duration,
    ...(capped < ordered && exception?.amount === undefined && { uncapped: ordered }),
    ...(departures.length > 0 && { departure: departures.join('; ') })
  }
}

/** A number as a sentence carries it: six significant digits at most. */
export function plain(value: number): string {
  return String(Number(value.toPrecision(6)))
}

/** Amount that the line orders, before its cap, in the product's own mass. */
function orderedAmount(line: DoseLine, subject: Subject): Milligrams | Unreckonable {
  if (line.amount !== undefined) return reckon(line.amount, line, subject, 'amount')
  if (line.rate === undefined || line.over === undefined)
    throw new RangeError('a dose line has an amount, or a rate and a length')
  const rate = reckon(line.rate, line, subject, 'rate')
  return typeof rate === 'number' ? rate * line.over : rate
}

function reckon(reckoned: Reckoned, line: DoseLine, subject: Subject, key: string): number | Unreckonable {
  switch (reckoned.per) {
    case 'dose':
      return reckoned.value
    case 'kg': {
      const weight = line.by === undefined ? (subject.dosingWeight ?? subject.weights.actual) : subject.weights[line.by]
      if (weight !== undefined) return reckoned.value * weight
      const needed = line.by === undefined ? 'a weight' : `the patient's ${line.by} weight`
      return { key, message: `a dose per kg needs ${needed}, which is not known at the time of the dose` }
    }
    case 'm2':
      if (subject.surfaceArea !== undefined) return reckoned.value * subject.surfaceArea
      return { key, message: 'a dose per m2 needs a body surface area, or a weight and a height' }
  }
}
