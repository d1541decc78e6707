import { z } from 'zod'
import type { Quantity } from '../../units/quantity'
import { type Kind, unitsOf } from '../../units/unitTable'
import { quantityProblem, type Sign } from '../unitProblem'

/** What is asked of a quantity; without a kind the unit is checked later, where its kind is known. */
export interface QuantityAsked {
  readonly kind: Kind | undefined
  readonly sign: Sign
}

const byName = new Map<string, z.ZodType<Quantity>>()

/** A value with its unit, of a kind and a sign; whatever is wrong with it is one problem at the quantity's own place. */
export function quantity(kind: Kind, sign: Sign = 'positive'): z.ZodType<Quantity> {
  return shared(`${kind}-${sign.replace(' ', '-')}`, { kind, sign })
}

/** A value with its unit, whose kind depends on other parts of the file. */
export function quantityOfSomeKind(sign: Sign = 'any'): z.ZodType<Quantity> {
  return shared(`of-some-kind-${sign.replace(' ', '-')}`, { kind: undefined, sign })
}

/** One schema for each kind and sign, so that the JSON Schema defines each once. */
function shared(name: string, asked: QuantityAsked): z.ZodType<Quantity> {
  const known = byName.get(name)
  if (known !== undefined) return known
  const schema = z
    .custom<Quantity>()
    .superRefine((raw, context) => {
      if (quantityProblem(raw, 'it', asked.kind, asked.sign) === undefined) return
      context.addIssue({ code: 'custom', params: { quantity: asked }, input: raw })
    })
    .meta({ id: `quantity-${name}`, ...jsonSchemaOf(asked) })
  byName.set(name, schema)
  return schema
}

function jsonSchemaOf({ kind, sign }: QuantityAsked): Record<string, unknown> {
  const bound = { positive: { exclusiveMinimum: 0 }, 'not negative': { minimum: 0 }, any: {} }[sign]
  const unit = kind === undefined ? {} : { enum: unitsOf(kind).map(({ code }) => code) }
  return {
    type: 'object',
    properties: { value: { type: 'number', ...bound }, unit: { type: 'string', ...unit } },
    required: ['value', 'unit'],
    additionalProperties: false
  }
}
