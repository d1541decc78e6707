import type { Hours, LitresPerHour } from '../units/canonical'
import { multipleOf } from '../units/spacing'
import type { Issue } from './issue'
import { type Model, observedVolume } from './model'
import type { SessionLine } from './prescription'
import { isBefore } from './times'

/** One haemodialysis: extra clearance of total drug in the observed compartment, from `start` over `duration`. */
export interface Session {
  readonly start: Hours
  readonly duration: Hours
  readonly clearance: LitresPerHour
}

/** More sessions than this are refused before they are written out. */
const MOST_SESSIONS = 100_000

/** Session lines that repeat too often to be written out, by their place under `path`. */
export function tooManySessions(lines: readonly SessionLine[], until: Hours, path: string): Issue[] {
  return lines.flatMap((line, i) => {
    const sessions = sessionCount(line, until)
    if (sessions <= MOST_SESSIONS) return []
    const message = `${sessions} sessions are scheduled; at most ${MOST_SESSIONS} can be written out`
    return [{ path: `${path}[${i}].every`, message }]
  })
}

/** Every session that starts before `until`; a line with `every` and no `count` repeats until then. */
export function sessionsBefore(lines: readonly SessionLine[], until: Hours): Session[] {
  return lines.flatMap((line) => sessionsOfLine(line, until)).sort((a, b) => a.start - b.start)
}

/** Sessions of one line that start before `until`. */
function sessionsOfLine(line: SessionLine, until: Hours): Session[] {
  const sessions: Session[] = []
  const last = line.every === undefined ? 1 : (line.count ?? Number.POSITIVE_INFINITY)
  for (let number = 1; number <= last; number++) {
    const start = line.every === undefined ? line.at : line.at + multipleOf(line.every, number - 1)
    if (!isBefore(start, until)) break
    sessions.push({ start, duration: line.duration, clearance: line.clearance })
  }
  return sessions
}

/** Sessions of a line up to `until`, before any is written out. */
function sessionCount(line: SessionLine, until: Hours): number {
  if (line.every === undefined) return 1
  const spacing = multipleOf(line.every, 1)
  if (!(spacing > 0)) throw new RangeError(`sessions must be more than 0 h apart, got ${spacing} h`)
  return Math.min(line.count ?? Number.POSITIVE_INFINITY, Math.max(0, Math.ceil((until - line.at) / spacing)))
}

/** The model with a clearance of total drug out of the observed compartment added to what it has. */
export function withAddedClearance(model: Model, clearance: LitresPerHour): Model {
  if (clearance === 0) return model
  const rate = clearance / observedVolume(model)
  const session = { kind: 'first-order', from: model.observed, to: 'eliminated', rate } as const
  return { ...model, transfers: [...model.transfers, session] }
}
