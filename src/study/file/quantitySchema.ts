import { z } from 'zod'
import type { Quantity } from '../../units/quantity'
import { type Kind, unitOf, unitsOf } from '../../units/unitTable'
import { listed, type QuantityAsked, quantityProblem, type Sign } from '../unitProblem'

const byName = new Map<string, z.ZodType<Quantity>>()

/** A value with its unit, of a kind and a sign; whatever is wrong with it is one problem at the quantity's own place. */
export function quantity(kind: Kind, sign: Sign = 'positive'): z.ZodType<Quantity> {
  return shared(`${kind}-${sign.replace(' ', '-')}`, { kind, sign })
}

/** A value with its unit, whose kind depends on other parts of the file and is checked later; with units to show in an example. */
export function quantityOfSomeKind(exampleUnits: readonly string[], sign: Sign = 'any'): z.ZodType<Quantity> {
  return shared(
    `for-example-${exampleUnits.join('-or-').replaceAll(/[^A-Za-z0-9-]/g, '_')}-${sign.replace(' ', '-')}`,
    { exampleUnits, sign }
  )
}

/** One schema for each kind and sign, so that the JSON Schema defines each once. */
function shared(name: string, asked: QuantityAsked): z.ZodType<Quantity> {
  const known = byName.get(name)
  if (known !== undefined) return known
  const schema = z
    .custom<Quantity>()
    .superRefine((raw, context) => {
      if (quantityProblem(raw, 'it', asked) === undefined) return
      context.addIssue({ code: 'custom', params: { quantity: asked }, input: raw })
    })
    .meta({ id: `quantity-${name}`, ...jsonSchemaOf(asked) })
  byName.set(name, schema)
  return schema
}

/** The code of a unit of the kind by itself, as a display setting holds it. */
export function unitCode(kind: Kind): z.ZodType<string> {
  return z
    .custom<string>()
    .superRefine((raw, context) => {
      if (typeof raw === 'string' && unitOf(kind, raw) !== undefined) return
      context.addIssue({
        code: 'custom',
        params: { unitOf: kind },
        input: raw,
        message: `must be one of ${listed(kind)}`
      })
    })
    .meta({ type: 'string', enum: unitsOf(kind).map(({ code }) => code) })
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
