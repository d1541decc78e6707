import { type Model, observedVolume, type Transfer } from '../../src/pk/model'
import type { Random } from './random'
import { type RandomStudy, randomStudy } from './randomModel'

/**
 * A random study whose models have saturable elimination from the central compartment, beside or instead of the linear one,
 * sometimes a saturable way into the first peripheral compartment, and sometimes a target that is made, bound and lost. The
 * body is without drug at 0.
 */
export function randomNonlinear(random: Random): RandomStudy {
  const study = randomStudy(random)
  const half = random.logBetween(0.05, 50)
  const hill = random.pick([1, 1, 1, 0.8, 2])
  const beside = random.chance(0.4)
  const binding = random.chance(0.4)
    ? {
        approximation: random.pick(['none', 'quasi-steady-state'] as const),
        association: random.logBetween(0.01, 10),
        dissociation: random.logBetween(0.01, 10),
        loss: random.logBetween(0.01, 1),
        complexLoss: random.logBetween(0.005, 0.5),
        level: random.logBetween(0.01, 10)
      }
    : undefined
  const changed = (model: Model): Model => {
    const volume = observedVolume(model)
    const size = model.compartments.length
    const transfers = model.transfers.flatMap((transfer): Transfer[] => {
      const { observed } = model
      if (transfer.kind !== 'first-order' || transfer.from !== observed || transfer.to !== 'eliminated')
        return [transfer]
      const maximumRate = transfer.rate * volume * half
      const saturable = {
        kind: 'saturable',
        from: observed,
        to: 'eliminated',
        maximumRate,
        halfSaturation: half
      } as const
      return [{ ...saturable, hill }, ...(beside ? [transfer] : [])]
    })
    if (binding === undefined) return { ...model, transfers }
    const [target, complex] = [size, size + 1]
    const { approximation, association, dissociation, loss, complexLoss, level } = binding
    return {
      ...model,
      compartments: [
        ...model.compartments,
        { name: 'target', column: 'target', holds: 'target', volume },
        { name: 'complex', column: 'complex', holds: 'drug', volume }
      ],
      transfers: [
        ...transfers,
        { kind: 'binding', drug: model.observed, target, complex, association, dissociation, approximation },
        { kind: 'production', into: target, rate: level * volume * loss },
        { kind: 'first-order', from: target, to: 'eliminated', rate: loss },
        { kind: 'first-order', from: complex, to: 'eliminated', rate: complexLoss }
      ]
    }
  }
  return {
    ...study,
    stretches: study.stretches.map(({ from, subject }) => ({
      from,
      subject: { ...subject, model: changed(subject.model) }
    })),
    prescription: { ...study.prescription, start: 'empty' }
  }
}
