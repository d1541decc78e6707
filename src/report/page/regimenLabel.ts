import type { RegimenLabel } from './page'

/** Colours and dashes that are told apart with certainty; a seventh regimen takes the first again, with its own letter. */
const STYLES = 6

/** Regimens are A, B, C in the order of the file; the twenty-seventh is A2. */
export function regimenLabels(names: readonly string[]): readonly RegimenLabel[] {
  return names.map((name, k) => {
    const round = Math.floor(k / 26)
    const letter = String.fromCharCode(65 + (k % 26))
    return { letter: round === 0 ? letter : `${letter}${round + 1}`, name, style: k % STYLES }
  })
}
