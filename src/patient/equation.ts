import { significant, symbolOf, unitInWords } from './covariateWords'
import type { Factor, Parameter, Term } from './drugModel'

/**
 * A parameter's relation as one line of plain text with the symbols of the trade:
 * `CL = 0.35 + 3.9 x (CLcr / 100 mL/min)`. Coefficients are in the parameter's stated unit, to six significant figures.
 */
export function equation(parameter: Pick<Parameter, 'name' | 'typical'>, label: string = parameter.name): string {
  return `${label} = ${relation(parameter.typical)}`
}

function relation(terms: readonly Term[]): string {
  return terms
    .map((term, position) => {
      const negative = term.value < 0
      const sign = position === 0 ? (negative ? '-' : '') : negative ? ' - ' : ' + '
      return `${sign}${product(Math.abs(term.value), term.factors)}`
    })
    .join('')
}

function product(coefficient: number, factors: readonly Factor[]): string {
  const written = factors.map(factorInWords)
  if (coefficient === 1 && written.length > 0) return written.join(' x ')
  return [figures(coefficient), ...written].join(' x ')
}

function factorInWords(factor: Factor): string {
  const x = symbolOf(factor.covariate)
  switch (factor.kind) {
    case 'power': {
      const ratio = `(${x} / ${quantity(factor.reference, factor.in.unit)})`
      return factor.exponent === 1 ? ratio : `${ratio}^${figures(factor.exponent)}`
    }
    case 'linear':
      return `(1 ${signed(factor.slope)} x ${difference(x, factor)})`
    case 'exponential':
      return `exp(${figures(factor.rate)} x ${difference(x, factor)})`
    case 'maturation': {
      const power = (base: string) => (factor.exponent === 1 ? base : `${base}^${figures(factor.exponent)}`)
      const half = quantity(factor.half, factor.in.unit)
      return `(${power(x)} / (${power(x)} + ${power(factor.exponent === 1 ? half : `(${half})`)}))`
    }
    case 'category': {
      const cases = Object.entries(factor.values).map(([category, value]) => `${category} ${figures(value)}`)
      return `(${x}: ${cases.join(', ')})`
    }
    case 'step':
      return `(${figures(factor.below)} if ${x} < ${quantity(factor.at, factor.in.unit)}, else ${figures(factor.from)})`
  }
}

function difference(x: string, factor: { reference: number; in: { unit: string } }): string {
  if (factor.reference !== 0) return `(${x} - ${quantity(factor.reference, factor.in.unit)})`
  // Without a reference nothing else would say per which unit the slope is.
  const words = unitInWords(factor.in.unit)
  return words === '' ? x : `(${x} in ${words})`
}

function signed(value: number): string {
  return value < 0 ? `- ${figures(Math.abs(value))}` : `+ ${figures(value)}`
}

function quantity(value: number, unit: string): string {
  const words = unitInWords(unit, value)
  return words === '' ? figures(value) : `${figures(value)} ${words}`
}

function figures(value: number): string {
  return significant(value, 6)
}
