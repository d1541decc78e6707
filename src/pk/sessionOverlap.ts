import type { Administration } from './dose'
import type { DoseLine } from './prescription'
import type { Session } from './sessions'
import { isBefore } from './times'

/** One note for each dose line of which doses are given while a session runs. */
export function dosesDuringSessions(
  lines: readonly DoseLine[],
  administrations: readonly Administration[],
  sessions: readonly Session[]
): string[] {
  const ascending = [...sessions].sort((a, b) => a.start - b.start)
  const numbers = lines.map((): number[] => [])
  let first = 0
  for (const given of administrations) {
    // Administrations ascend, so that a session over before this one is over for all later ones, up to the first that is not.
    while (first < ascending.length && !isBefore(given.at, ascending[first].start + ascending[first].duration))
      first += 1
    if (!given.missed && overlapsAny(given, ascending, first)) numbers[given.line].push(given.number)
  }
  return numbers.flatMap((list, i) => {
    if (list.length === 0) return []
    const which = list.length === 1 ? `dose ${list[0]} overlaps` : `doses ${named(list)} overlap`
    return [`dose line ${i + 1} (${lines[i].route}): ${which} a dialysis session`]
  })
}

function overlapsAny(given: Administration, sessions: readonly Session[], first: number): boolean {
  const end = given.at + given.duration
  for (let s = first; s < sessions.length; s++) {
    const { start, duration } = sessions[s]
    if (isBefore(end, start) || (given.duration > 0 && !isBefore(start, end))) return false
    if (isBefore(given.at, start + duration)) return true
  }
  return false
}

/** Numbers as a sentence lists them, the first few by name. */
function named(numbers: readonly number[]): string {
  const shown = numbers.slice(0, 6).join(', ')
  return numbers.length > 6 ? `${shown} and ${numbers.length - 6} more` : shown
}
