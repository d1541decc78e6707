/** At most this many known names are listed in a message. */
const MOST_LISTED = 12

/**
 * The known name that is nearest, case ignored: the first that begins with what was typed, else the one fewest single-letter
 * edits away. Undefined where none is known.
 */
export function nearestName(typed: string, known: readonly string[]): string | undefined {
  // "F" is an abbreviation of "female", though "male" is fewer edits away.
  const abbreviated = known.find((name) => typed !== '' && name.toLowerCase().startsWith(typed.toLowerCase()))
  if (abbreviated !== undefined) return abbreviated
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

/** The nearest name, where it is so near that it may have been meant: where all are listed, a far one would mislead. */
export function likelyName(typed: string, known: readonly string[]): string | undefined {
  const nearest = nearestName(typed, known)
  if (nearest === undefined) return undefined
  const [a, b] = [typed.toLowerCase(), nearest.toLowerCase()]
  const near = (typed !== '' && b.startsWith(a)) || 3 * editDistance(a, b) <= Math.min(a.length, b.length)
  return near ? nearest : undefined
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
