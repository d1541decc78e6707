import type { Destination, Model } from './model'

/** Two first-order arrows between the same places, as one net flow; `to` is where it is counted, -1 for nowhere. */
export interface Flow {
  readonly from: number
  readonly to: number
  readonly there: number
  /** Rate of the arrow back; 0 where there is none. */
  back: number
}

/** Every first-order arrow, opposite ones as one flow; `counted` says where what goes from one place to another is counted. */
export function netFlows(model: Model, counted: (from: number, to: Destination) => number): Flow[] {
  const flows = new Map<string, Flow>()
  for (const transfer of model.transfers) {
    if (transfer.kind !== 'first-order') continue
    const { from, rate } = transfer
    const to = counted(from, transfer.to)
    const opposite = flows.get(`${to} ${from}`)
    if (opposite !== undefined) opposite.back += rate
    else {
      const same = flows.get(`${from} ${to}`)
      flows.set(`${from} ${to}`, { from, to, there: (same?.there ?? 0) + rate, back: same?.back ?? 0 })
    }
  }
  return [...flows.values()]
}
