import type { Model } from './model'
import type { Signal } from './trajectory'

/**
 * Where each state of a model stands in the vector that is integrated: amounts in the order of the compartments,
 * concentrations at effect sites, the area under every signal, the eliminated amount. Nothing feeds back from behind the
 * amounts.
 */
export interface FluxLayout {
  readonly compartments: number
  readonly effectSites: number
  readonly observations: number
  readonly size: number
}

export function fluxLayout(model: Model): FluxLayout {
  const compartments = model.compartments.length
  const effectSites = model.effectSites.length
  const observations = model.observations.length
  return {
    compartments,
    effectSites,
    observations,
    size: compartments + effectSites + (1 + observations + effectSites) + 1
  }
}

/** Position of the concentration at an effect site. */
export function effectSiteState(layout: FluxLayout, index: number): number {
  return layout.compartments + index
}

/** Position of the area under a signal. */
export function areaState(layout: FluxLayout, signal: Signal): number {
  const first = layout.compartments + layout.effectSites
  switch (signal.kind) {
    case 'observed':
      return first
    case 'observation':
      return first + 1 + signal.index
    case 'effect-site':
      return first + 1 + layout.observations + signal.index
  }
}

/** Position of the amount of drug that left the body. */
export function eliminatedState(layout: FluxLayout): number {
  return layout.size - 1
}
