import type { Rates } from './rates'

/**
 * Strongly connected components of the graph of positive rates: sets of compartments between which drug goes back and
 * forth. Listed so that drug moves only from a component to later ones; members ascend [Tarjan 1972, SIAM J. Comput.
 * 1:146, volume and page from memory].
 */
export function stronglyConnected(rates: Rates): readonly (readonly number[])[] {
  const { size, between } = rates
  const found: number[][] = []
  const order = new Array<number | undefined>(size).fill(undefined)
  const lowest = new Array<number>(size).fill(0)
  const open: number[] = []
  const isOpen = new Array<boolean>(size).fill(false)
  let count = 0

  function visit(j: number): void {
    const own = count++
    order[j] = own
    lowest[j] = own
    open.push(j)
    isOpen[j] = true
    for (let i = 0; i < size; i++) {
      if (!(between[i * size + j] > 0)) continue
      const seen = order[i]
      if (seen === undefined) {
        visit(i)
        lowest[j] = Math.min(lowest[j], lowest[i])
      } else if (isOpen[i]) {
        lowest[j] = Math.min(lowest[j], seen)
      }
    }
    if (lowest[j] !== own) return
    const members = open.splice(open.indexOf(j))
    for (const member of members) isOpen[member] = false
    found.push(members.sort((a, b) => a - b))
  }

  for (let j = 0; j < size; j++) if (order[j] === undefined) visit(j)
  return found.reverse()
}
