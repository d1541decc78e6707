import type { Hours, LitresPerHour } from '../units/canonical'
import { multipleOf } from '../units/spacing'
import { type Model, observedVolume } from './model'
import type { SessionLine } from './prescription'
import { isBefore } from './times'

/** One haemodialysis: extra clearance of total drug in the observed compartment, from `start` over `duration`. */
export interface Session {
  readonly start: Hours
  readonly duration: Hours
  readonly clearance: LitresPerHour
}

/** Every session that starts before `until`; a line with `every` and no `count` repeats until then. */
export function sessionsBefore(lines: readonly SessionLine[], until: Hours): Session[] {
  return lines.flatMap((line) => sessionsOfLine(line, until)).sort((a, b) => a.start - b.start)
}

/** Sessions of one line that start before `until`. */
export function sessionsOfLine(line: SessionLine, until: Hours): Session[] {
  const sessions: Session[] = []
  const last = line.every === undefined ? 1 : (line.count ?? Number.POSITIVE_INFINITY)
  for (let number = 1; number <= last; number++) {
    const start = line.every === undefined ? line.at : line.at + multipleOf(line.every, number - 1)
    if (!isBefore(start, until)) break
    sessions.push({ start, duration: line.duration, clearance: line.clearance })
  }
  return sessions
}

/** The model with a clearance of total drug out of the observed compartment added to what it has. */
export function withAddedClearance(model: Model, clearance: LitresPerHour): Model {
  if (clearance === 0) return model
  const rate = clearance / observedVolume(model)
  const session = { kind: 'first-order', from: model.observed, to: 'eliminated', rate } as const
  return { ...model, transfers: [...model.transfers, session] }
}
