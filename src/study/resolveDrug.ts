import type { DoseLimit, Drug } from '../patient/drugModel'
import { type Converter, present } from './converter'
import type { ModelFile } from './file/modelSchema'
import { knownNames } from './nearestName'
import { below } from './path'

/** Stands for a drug whose part of the file could not be read; its problems have been listed. */
export const UNREAD_DRUG: Drug = { name: '', moiety: '', matrix: '', products: [], limits: [] }

/** [g/mol] */
export function molarMass(drug: ModelFile['drug'] | undefined): number | undefined {
  if (drug?.molarMass === undefined) return undefined
  return drug.molarMass.unit === 'kg/mol' ? drug.molarMass.value * 1000 : drug.molarMass.value
}

/** The drug of a model in canonical units. */
export function resolveDrug(drug: ModelFile['drug'], path: string, convert: Converter): Drug {
  const products = drug.products ?? []
  products.forEach((product, i) => {
    if (products.findIndex((other) => other.name === product.name) < i) {
      convert.problems.add(
        below(below(below(path, 'products'), i), 'name'),
        `there is another product "${product.name}"; names are unique`
      )
    }
  })
  const sampleAfter = drug.sampleAfter
  return {
    name: drug.name,
    moiety: drug.moiety,
    matrix: drug.matrix,
    products,
    limits: (drug.limits ?? []).map((limit, i) => {
      const at = below(below(path, 'limits'), i)
      if (limit.product !== undefined && !products.some((product) => product.name === limit.product)) {
        const known = products.map((product) => product.name)
        convert.problems.add(
          below(at, 'product'),
          `no product is called "${limit.product}"; ${knownNames(limit.product, known)}`
        )
      }
      const kind = limit.of === 'rate' ? 'amountRate' : 'amount'
      const resolved: DoseLimit = {
        of: limit.of,
        value: convert.number(kind, limit.value, below(at, 'value')),
        source: limit.source,
        ...present('product', limit.product)
      }
      return resolved
    }),
    ...present('molarMass', convert.molarMass),
    ...present('fractionUnbound', drug.fractionUnbound),
    ...(sampleAfter !== undefined && {
      sampleAfter: {
        delay: convert.number('time', sampleAfter, below(path, 'sampleAfter')),
        from: sampleAfter.from,
        ...present('source', sampleAfter.source)
      }
    })
  }
}
