import type { Hours } from '../units/canonical'
import { multipleOf } from '../units/spacing'
import { scheduledTime } from './administrations'
import type { Administration, Dose } from './dose'
import type { DoseLine, SessionLine } from './prescription'
import { isBefore } from './times'

/** Whether a line that has begun by then goes on past `until`: it has no `count`, or `at` + `count` x `every` >= `until`. */
export function repeatsAtEnd(line: DoseLine | SessionLine, until: Hours): boolean {
  if (line.every === undefined || !isBefore(line.at, until)) return false
  return line.count === undefined || !isBefore(line.at + multipleOf(line.every, line.count), until)
}

/** Whether a giving is an infusion of a line that does not repeat at the end and still runs at `until`: it counts as endless. */
export function isEndless(administration: Administration, lines: readonly DoseLine[], until: Hours): boolean {
  const { at, duration } = administration
  return duration > 0 && !repeatsAtEnd(lines[administration.line], until) && !isBefore(at + duration, until)
}

/** A line that repeats at the end without its count, and without exceptions to doses scheduled at or after `until`. */
export function continuedLine(line: DoseLine, until: Hours): DoseLine {
  if (!repeatsAtEnd(line, until)) return line
  const { count: _count, ...rest } = line
  return { ...rest, exceptions: line.exceptions.filter(({ number }) => isBefore(scheduledTime(line, number), until)) }
}

/** A session line that repeats at the end, without its count. */
export function continuedSession(line: SessionLine, until: Hours): SessionLine {
  if (!repeatsAtEnd(line, until)) return line
  const { count: _count, ...rest } = line
  return rest
}

/** An endless infusion's inputs, kept at their rate up to `end`. */
export function prolonged(doses: readonly Dose[], end: Hours): readonly Dose[] {
  return doses.map((dose) => {
    if (dose.kind === 'bolus' || !isBefore(dose.start + dose.duration, end)) return dose
    const duration = end - dose.start
    return { ...dose, duration, amount: (dose.amount / dose.duration) * duration }
  })
}
