import type { Compartment, Model, Transfer } from '../../src/pk/model'
import type { DoseLine, Exception, Prescription, SessionLine } from '../../src/pk/prescription'
import type { Route, Stretch } from '../../src/pk/subject'
import type { Random } from './random'

/**
 * Any linear model: a depot or none, up to three peripheral compartments in exchange with the central one or with each
 * other in a ring, a transit chain or none, eliminations, effect sites and an observation. Drug can leave from everywhere.
 * Rates span up to seven orders of magnitude.
 */
export function randomModel(random: Random): Model {
  const compartments: Compartment[] = []
  const transfers: Transfer[] = []
  const add = (name: string, volume?: number): number => {
    const holds = 'drug' as const
    compartments.push(volume === undefined ? { name, column: name, holds } : { name, column: name, holds, volume })
    return compartments.length - 1
  }
  const arrow = (from: number, to: number | 'eliminated', rate: number): void => {
    transfers.push({ kind: 'first-order', from, to, rate })
  }
  const rate = (): number => random.logBetween(1e-3, random.chance(0.2) ? 1e4 : 10)
  const depot = random.chance(0.6) ? add('depot') : undefined
  const stages = depot !== undefined && random.chance(0.3) ? random.whole(1, 4) : 0
  const chain = Array.from({ length: stages }, (_, i) => add(`stage ${i + 1}`))
  const volume = random.logBetween(1, 100)
  const central = add('central', volume)
  if (depot !== undefined) {
    const ka = rate()
    const path = [depot, ...chain, central]
    for (let i = 0; i + 1 < path.length; i++) arrow(path[i], path[i + 1], ka)
    if (random.chance(0.2)) arrow(depot, 'eliminated', rate() * 0.1)
  }
  const peripherals = Array.from({ length: random.whole(0, 3) }, (_, i) =>
    add(`peripheral ${i + 1}`, random.logBetween(1, 200))
  )
  for (const peripheral of peripherals) {
    arrow(central, peripheral, rate())
    arrow(peripheral, central, rate())
  }
  if (peripherals.length > 1 && random.chance(0.4)) arrow(peripherals[0], peripherals[1], rate())
  arrow(central, 'eliminated', random.logBetween(1e-3, 2))
  if (random.chance(0.2)) arrow(central, 'eliminated', random.logBetween(1e-3, 2))
  const tissue = random.chance(0.3) ? add('bound', volume) : undefined
  if (tissue !== undefined) {
    arrow(central, tissue, rate())
    arrow(tissue, central, rate())
  }
  return {
    compartments,
    transfers,
    observed: central,
    effectSites: Array.from({ length: random.whole(0, 2) }, (_, i) => ({
      name: `site ${i + 1}`,
      source: central,
      rate: rate()
    })),
    observations: tissue === undefined ? [] : [{ name: 'total', of: [central, tissue], volume }]
  }
}

/** The routes of a random model: into the central compartment, and a second one in parts, with lags and a release. */
export function randomRoutes(random: Random, model: Model): Route[] {
  const whole: Route = {
    name: 'intravenous',
    input: 'infusion',
    bioavailability: 1,
    lag: 0,
    parts: [{ into: model.observed, fraction: 1, lag: 0 }]
  }
  const fraction = random.between(0.1, 0.9)
  const release = random.chance(0.4) ? { over: random.between(0.3, 30) } : {}
  const parted: Route = {
    name: 'oral',
    input: 'bolus',
    bioavailability: random.between(0.2, 1),
    lag: random.chance(0.5) ? random.between(0, 3) : 0,
    parts: [
      { into: 0, fraction, lag: 0 },
      { into: model.observed, fraction: 1 - fraction, lag: random.between(0, 2), ...release }
    ]
  }
  return [whole, parted]
}

export interface RandomStudy {
  readonly prescription: Prescription
  readonly stretches: readonly Stretch[]
  readonly sessions: readonly SessionLine[]
  readonly until: number
}

/** A person who may change once, sessions or none, and one to three dose lines with exceptions. */
export function randomStudy(random: Random): RandomStudy {
  const model = randomModel(random)
  const subject = { model, routes: randomRoutes(random, model), weights: { actual: random.between(3, 120) } }
  const stretches: Stretch[] = [{ from: 0, subject }]
  const until = random.between(20, 200)
  if (random.chance(0.4)) {
    const factor = random.between(0.3, 2)
    const compartments = model.compartments.map((compartment) =>
      compartment.volume === undefined ? compartment : { ...compartment, volume: compartment.volume * factor }
    )
    const observations = model.observations.map((seen) => ({ ...seen, volume: seen.volume * factor }))
    const transfers = model.transfers.map(
      (transfer) => ({ ...transfer, rate: (transfer as { rate: number }).rate * factor }) as Transfer
    )
    const changed: Model = { ...model, compartments, observations, transfers }
    stretches.push({ from: random.between(5, 60), subject: { ...subject, model: changed } })
  }
  const sessions: SessionLine[] = random.chance(0.3)
    ? [
        {
          at: random.between(0, 20),
          duration: random.between(1, 6),
          clearance: random.between(1, 20),
          every: hourly(random.between(10, 50))
        }
      ]
    : []
  const lines = Array.from({ length: random.whole(1, 3) }, () => randomLine(random, until))
  const start = random.chance(0.3) ? 'steady-state' : 'empty'
  return { prescription: { name: 'random', start, lines }, stretches, sessions, until }
}

/** A dose line on one of the random routes. */
export function randomLine(random: Random, until: number): DoseLine {
  const route = random.pick(['intravenous', 'oral'])
  const every = random.between(4, 30)
  const repeats = random.chance(0.7)
  const over = route === 'intravenous' && random.chance(0.6) ? { over: random.logBetween(0.1, 40) } : {}
  const count = repeats && random.chance(0.5) ? random.whole(1, 6) : undefined
  const at = random.chance(0.3) ? 0 : random.between(0, until / 3)
  const doses = repeats ? Math.min(count ?? Number.POSITIVE_INFINITY, Math.ceil((until - at) / every)) : 1
  return {
    route,
    amount: random.chance(0.3)
      ? { value: random.between(1, 20), per: 'kg' }
      : { value: random.logBetween(1, 1000), per: 'dose' },
    ...over,
    moietyFraction: random.chance(0.2) ? 0.92 : 1,
    at,
    ...(repeats && { every: hourly(every) }),
    ...(count !== undefined && { count }),
    exceptions: random.chance(0.4) ? [randomException(random, random.whole(1, doses), 'over' in over)] : []
  }
}

/** Spacing in hours, as if typed with the digits of `value`. */
export function hourly(value: number): { readonly value: number; readonly times: number; readonly per: number } {
  return { value: Number(value.toPrecision(6)), times: 1, per: 1 }
}

function randomException(random: Random, number: number, infused: boolean): Exception {
  switch (random.whole(0, infused ? 4 : 3)) {
    case 0:
      return { number, missed: true }
    case 1:
      return { number, lateBy: random.between(0, 5), shiftsLater: random.chance(0.5) }
    case 2:
      return { number, amount: { value: random.between(1, 500), per: 'dose' } }
    case 3:
      return { number, fractionTaken: random.between(0, 1) }
    default:
      return { number, stoppedAfter: 0.05 }
  }
}
