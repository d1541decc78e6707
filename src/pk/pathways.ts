import type { Model, Transfer } from './model'
import type { Segment } from './segment'

/** Every movement that is in force in any of the segments, each once: sessions add theirs to those of the model. */
export function transfersIn(segments: readonly Segment[]): readonly Transfer[] {
  const models = new Set(segments.map(({ model }) => model))
  return [...new Set([...models].flatMap(({ transfers }) => transfers))]
}

/** Whether each compartment can come to hold anything where `from` tells what something enters; production enters as well. */
export function reachedBy(model: Model, transfers: readonly Transfer[], from: readonly boolean[]): boolean[] {
  const reached = model.compartments.map((_, i) => from[i])
  for (const transfer of transfers) if (transfer.kind === 'production') reached[transfer.into] = true
  const reach = (places: readonly number[]): boolean => {
    const news = places.filter((place) => !reached[place])
    for (const place of news) reached[place] = true
    return news.length > 0
  }
  let grows = true
  while (grows) {
    grows = false
    for (const transfer of transfers) {
      switch (transfer.kind) {
        case 'first-order':
        case 'saturable':
          if (reached[transfer.from] && transfer.to !== 'eliminated') grows = reach([transfer.to]) || grows
          break
        case 'binding': {
          const { drug, target, complex } = transfer
          if (reached[complex]) grows = reach([drug, target]) || grows
          if (reached[drug] && reached[target]) grows = reach([complex]) || grows
          break
        }
        case 'production':
          break
      }
    }
  }
  return reached
}

/** The first compartment, of those that hold anything, from which nothing can leave the body; undefined where there is none. */
export function compartmentWithoutExit(
  transfers: readonly Transfer[],
  reached: readonly boolean[]
): number | undefined {
  const leaves = reached.map(() => false)
  let grows = true
  const leave = (place: number): void => {
    grows = grows || !leaves[place]
    leaves[place] = true
  }
  while (grows) {
    grows = false
    for (const transfer of transfers) {
      switch (transfer.kind) {
        case 'first-order':
        case 'saturable':
          if (transfer.to === 'eliminated' || leaves[transfer.to]) leave(transfer.from)
          break
        case 'binding': {
          const { drug, target, complex } = transfer
          if (leaves[complex] && reached[complex]) {
            leave(drug)
            leave(target)
          }
          if (leaves[drug] && leaves[target]) leave(complex)
          break
        }
        case 'production':
          break
      }
    }
  }
  const stuck = reached.findIndex((holds, i) => holds && !leaves[i])
  return stuck < 0 ? undefined : stuck
}

/** Why there is no steady state where something that enters a compartment cannot leave. */
export function neverLeaves(model: Model, compartment: number): string {
  const { name, holds } = model.compartments[compartment]
  return `no steady state: ${holds} that enters compartment "${name}" never leaves`
}
