import { areaState, effectSiteState, type FluxLayout } from './fluxLayout'
import { volumeOf } from './linearRates'
import { type Model, observedVolume } from './model'

/** A weight on one state in the right side of another. */
export interface Reading {
  readonly row: number
  readonly source: number
  readonly weight: number
}

/** Effect sites ke0 (A / V - C), and the areas under every signal, as weights on states. */
export function readings(model: Model, layout: FluxLayout): Reading[] {
  const sites = model.effectSites.flatMap(({ source, rate }, index): Reading[] => {
    const row = effectSiteState(layout, index)
    return [
      { row, source, weight: rate / volumeOf(model, source) },
      { row, source: row, weight: -rate },
      { row: areaState(layout, { kind: 'effect-site', index }), source: row, weight: 1 }
    ]
  })
  const observations = model.observations.flatMap(({ of, volume }, index) =>
    of.map(
      (source): Reading => ({ row: areaState(layout, { kind: 'observation', index }), source, weight: 1 / volume })
    )
  )
  const observed = {
    row: areaState(layout, { kind: 'observed' }),
    source: model.observed,
    weight: 1 / observedVolume(model)
  }
  return [...sites, observed, ...observations]
}
