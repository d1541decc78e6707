/** At most this many known names are listed in a message. */
const MOST_LISTED = 12

/** The known name that is fewest single-letter edits away (case ignored first); undefined where none is known. */
export function nearestName(typed: string, known: readonly string[]): string | undefined {
  let best: string | undefined
  let bestDistance = Number.POSITIVE_INFINITY
  for (const name of known) {
    const distance = editDistance(typed.toLowerCase(), name.toLowerCase())
    if (distance < bestDistance) {
      best = name
      bestDistance = distance
    }
  }
  return best
}

/** `the nearest is "oral", of "intravenous", "oral"`, to end a message about an unknown name. */
export function knownNames(typed: string, known: readonly string[]): string {
  const nearest = nearestName(typed, known)
  if (nearest === undefined) return 'there is none'
  if (known.length === 1) return `there is only "${nearest}"`
  const listed = known.slice(0, MOST_LISTED).map((name) => `"${name}"`)
  if (known.length > MOST_LISTED) listed.push(`${known.length - MOST_LISTED} more`)
  return `the nearest is "${nearest}", of ${listed.join(', ')}`
}

/** Levenshtein distance, with a swap of neighbours as one edit (optimal string alignment). Names only: text is cut at 100. */
function editDistance(a: string, b: string): number {
  const left = a.slice(0, 100)
  const right = b.slice(0, 100)
  let beforeLast: number[] = []
  let last = Array.from({ length: right.length + 1 }, (_, j) => j)
  for (let i = 1; i <= left.length; i++) {
    const row = [i]
    for (let j = 1; j <= right.length; j++) {
      const same = left[i - 1] === right[j - 1]
      let best = Math.min(last[j]! + 1, row[j - 1]! + 1, last[j - 1]! + (same ? 0 : 1))
      if (i > 1 && j > 1 && left[i - 1] === right[j - 2] && left[i - 2] === right[j - 1]) {
        best = Math.min(best, beforeLast[j - 2]! + 1)
      }
      row.push(best)
    }
    beforeLast = last
    last = row
  }
  return last[right.length]!
}
