import { inputsOf } from './administrations'
import type { Dose } from './dose'
import type { DoseLine } from './prescription'
import { reckonGiving, type Unreckonable } from './reckoning'
import type { Subject } from './subject'

/**
 * The inputs of one dose of a line at the line's `at`, exceptions left out, for a subject as at any time: what a steady
 * state repeats. `Unreckonable` where the subject lacks what the amount is reckoned by, or the route.
 */
export function regularDose(line: DoseLine, subject: Subject): readonly Dose[] | Unreckonable {
  const route = subject.routes.find((candidate) => candidate.name === line.route)
  if (route === undefined) return { key: 'route', message: `there is no route "${line.route}"` }
  const giving = reckonGiving(line, undefined, subject)
  if ('message' in giving) return giving
  return inputsOf(route, line.at, giving.duration, giving.productAmount * line.moietyFraction)
}
