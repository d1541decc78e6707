import type { DrugTransfer } from '../patient/drugModel'
import { present } from './converter'
import type { ModelFile } from './file/modelSchema'
import type { ModelNames } from './modelNames'
import { below } from './path'

type TransferFile = ModelFile['transfers'][number]

/** One transfer with every name in it checked; undefined where it cannot be read at all. */
export function resolveTransfer(transfer: TransferFile, at: string, names: ModelNames): DrugTransfer | undefined {
  const rate = (name: string, key = 'rate') => names.parameter(name, 'rateConstant', below(at, key))
  switch (transfer.kind) {
    case 'first-order':
    case 'transit': {
      const { kind } = transfer
      const ends = {
        from: names.compartment(transfer.from, below(at, 'from')),
        to: names.compartment(transfer.to, below(at, 'to'))
      }
      checkDistinct(transfer.from, transfer.to, at, names)
      return kind === 'transit'
        ? { kind, ...ends, stages: transfer.stages, rate: rate(transfer.rate) }
        : { kind, ...ends, rate: rate(transfer.rate) }
    }
    case 'exchange':
      return resolveExchange(transfer, at, names)
    case 'clearance':
      return {
        kind: 'clearance',
        from: names.compartment(transfer.from, below(at, 'from'), 'with volume'),
        clearance: names.parameter(transfer.clearance, 'clearance', below(at, 'clearance'))
      }
    case 'elimination':
      return {
        kind: 'elimination',
        from: names.compartment(transfer.from, below(at, 'from')),
        rate: rate(transfer.rate)
      }
    case 'effect': {
      const from = names.compartment(transfer.from, below(at, 'from'), 'with volume')
      if (!names.compartments.has(transfer.to)) names.compartment(transfer.to, below(at, 'to'))
      return { kind: 'effect', from, to: transfer.to, rate: rate(transfer.rate) }
    }
    case 'saturable':
      if (transfer.to !== undefined) checkDistinct(transfer.from, transfer.to, at, names)
      return {
        kind: 'saturable',
        from: names.compartment(transfer.from, below(at, 'from'), 'with volume'),
        ...present('to', transfer.to === undefined ? undefined : names.compartment(transfer.to, below(at, 'to'))),
        maximumRate: names.parameter(transfer.maximumRate, 'amountRate', below(at, 'maximumRate')),
        halfSaturation: names.parameter(transfer.halfSaturation, 'concentration', below(at, 'halfSaturation')),
        ...present(
          'hill',
          typeof transfer.hill === 'string'
            ? names.parameter(transfer.hill, 'number', below(at, 'hill'))
            : transfer.hill
        )
      }
    case 'binding':
      return {
        kind: 'binding',
        drug: names.compartment(transfer.drug, below(at, 'drug'), 'with volume'),
        target: names.compartment(transfer.target, below(at, 'target')),
        complex: names.compartment(transfer.complex, below(at, 'complex')),
        association: names.parameter(transfer.association, 'association', below(at, 'association')),
        dissociation: rate(transfer.dissociation, 'dissociation'),
        approximation: transfer.approximation ?? 'none'
      }
    case 'production':
      return {
        kind: 'production',
        into: names.compartment(transfer.into, below(at, 'into')),
        rate: names.parameter(transfer.rate, 'amountRate', below(at, 'rate'))
      }
  }
}

function resolveExchange(
  transfer: Extract<TransferFile, { kind: 'exchange' }>,
  at: string,
  names: ModelNames
): DrugTransfer | undefined {
  const need = transfer.clearance === undefined ? 'any' : 'with volume'
  const between = transfer.between.map((id, i) => names.compartment(id, below(below(at, 'between'), i), need)) as [
    string,
    string
  ]
  checkDistinct(...between, at, names)
  if (transfer.clearance !== undefined && transfer.rates === undefined) {
    return {
      kind: 'exchange',
      between,
      clearance: names.parameter(transfer.clearance, 'clearance', below(at, 'clearance'))
    }
  }
  if (transfer.rates !== undefined && transfer.clearance === undefined) {
    const rates = transfer.rates.map((name, i) =>
      names.parameter(name, 'rateConstant', below(below(at, 'rates'), i))
    ) as [string, string]
    return { kind: 'exchange', between, rates }
  }
  names.problems.add(at, 'an exchange needs either "clearance" or "rates": [there, back]')
  return undefined
}

function checkDistinct(from: string, to: string, at: string, names: ModelNames): void {
  if (from === to) names.problems.add(at, `a transfer leads to another compartment, not from "${from}" to itself`)
}
