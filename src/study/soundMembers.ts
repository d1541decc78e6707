import { below } from './path'
import type { Problems } from './problems'

/** The sound members of a list with their paths and positions; those of the wrong shape have been reported. */
export function* open<T>(
  list: readonly T[] | undefined,
  path: string,
  problems: Problems
): Generator<[string, T, number]> {
  if (list === undefined || !problems.isOpen(path)) return
  for (const [i, member] of list.entries()) {
    const at = below(path, i)
    if (problems.isSound(at)) yield [at, member, i]
  }
}
