import { test } from 'vitest'
import type { Model } from '../../src/pk/model'
import { Random } from './random'
import { type RandomStudy, randomStudy } from './randomModel'
import { course, expectRowWithin, rowsOf } from './rowsOf'

/** The study with its compartments in reverse order. */
function reversed(study: RandomStudy): RandomStudy {
  const last = study.stretches[0].subject.model.compartments.length - 1
  const to = (i: number): number => last - i
  const model = (from: Model): Model => ({
    compartments: [...from.compartments].reverse(),
    transfers: from.transfers.map((transfer) => {
      if (transfer.kind !== 'first-order') throw new RangeError(transfer.kind)
      const end = transfer.to === 'eliminated' ? transfer.to : to(transfer.to)
      return { ...transfer, from: to(transfer.from), to: end }
    }),
    effectSites: from.effectSites.map((site) => ({ ...site, source: to(site.source) })),
    observed: to(from.observed),
    observations: from.observations.map((seen) => ({ ...seen, of: seen.of.map(to) }))
  })
  return {
    ...study,
    stretches: study.stretches.map(({ from, subject }) => ({
      from,
      subject: {
        ...subject,
        model: model(subject.model),
        routes: subject.routes.map((route) => ({
          ...route,
          parts: route.parts.map((part) => ({ ...part, into: to(part.into) }))
        }))
      }
    }))
  }
}

test('the order of the compartments changes every number by less than 1e-13', () => {
  for (let seed = 601; seed <= 640; seed++) {
    const study = randomStudy(new Random(seed))
    const n = study.stretches[0].subject.model.compartments.length
    const rows = rowsOf(course(study))
    rowsOf(course(reversed(study))).forEach(({ time, values }, i) => {
      const inOrder = [values[0], ...values.slice(1, 1 + n).reverse(), ...values.slice(1 + n)]
      expectRowWithin(inOrder, rows[i].values, 1e-13, `seed ${seed}, ${time} h`)
    })
  }
})
