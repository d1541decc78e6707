import { z } from 'zod'
import type { Sign } from '../unitProblem'
import { dose, weightWord } from './doseSchema'
import { checkedPerson } from './patientSchema'
import { quantity, quantityOfSomeKind } from './quantitySchema'
import { name, prose, title } from './textSchema'

/** A number that was not read in the source, and why it stands there all the same. */
const assumable = { assumed: z.literal(true).optional(), because: prose.optional() }

const covariate = name
/** A value of whatever covariate stands beside it. */
const ofCovariate = (sign?: Sign) => quantityOfSomeKind(['kg', 'mL/min'], sign)
const factor = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('power'),
    covariate,
    reference: ofCovariate('positive'),
    exponent: z.number(),
    ...assumable
  }),
  z.strictObject({
    kind: z.literal('linear'),
    covariate,
    reference: ofCovariate(),
    slope: z.number(),
    ...assumable
  }),
  z.strictObject({
    kind: z.literal('exponential'),
    covariate,
    reference: ofCovariate(),
    rate: z.number(),
    ...assumable
  }),
  z.strictObject({
    kind: z.literal('maturation'),
    covariate,
    half: ofCovariate('positive'),
    exponent: z.number().gt(0),
    ...assumable
  }),
  z.strictObject({ kind: z.literal('category'), covariate, values: z.record(name, z.number()), ...assumable }),
  z.strictObject({
    kind: z.literal('step'),
    covariate,
    at: ofCovariate(),
    below: z.number(),
    from: z.number(),
    ...assumable
  })
])

const variability = z.strictObject({
  kind: z.enum(['log-normal', 'normal', 'logit-normal']),
  sd: z.number().min(0),
  reportedAs: prose.optional(),
  ...assumable
})

const parameter = z.strictObject({
  unit: z.string(),
  typical: z.array(z.strictObject({ value: z.number(), factors: z.array(factor).optional(), ...assumable })).min(1),
  variability: variability.optional(),
  occasion: variability.optional(),
  ...assumable
})

const range = z.strictObject({
  covariate,
  low: ofCovariate().optional(),
  high: ofCovariate().optional(),
  categories: z.array(name).min(1).optional()
})

const drug = z.strictObject({
  name,
  moiety: name,
  matrix: name,
  molarMass: quantity('molarMass').optional(),
  fractionUnbound: z.number().gt(0).max(1).optional(),
  products: z
    .array(z.strictObject({ name, fraction: z.number().gt(0).max(1) }))
    .min(1)
    .optional(),
  limits: z
    .array(
      z.strictObject({
        of: z.enum(['single', 'daily', 'rate', 'total', 'step']),
        value: quantityOfSomeKind(['mg', 'mg/h'], 'positive'),
        product: name.optional(),
        source: prose
      })
    )
    .optional(),
  sampleAfter: z
    .strictObject({
      value: z.number().min(0),
      unit: z.string(),
      from: z.enum(['dose start', 'dose end']),
      source: prose.optional()
    })
    .optional()
})

const source = z.strictObject({
  kind: z.enum(['invented', 'published', 'user']),
  citation: prose,
  doi: prose.optional(),
  read: z.enum(['abstract', 'table', 'label', 'full text']).optional(),
  cautions: z.array(prose).optional()
})

/** A covariate of the model's own: a unit, or categories. Which of the two is checked later. */
const declared = z.strictObject({
  unit: z.string().min(1).optional(),
  categories: z.array(name).min(1).optional(),
  frequencies: z.record(name, z.number().min(0).max(1)).optional(),
  asks: prose.optional()
})

const guard = { creatinineAtLeast: quantity('creatinine').optional() }

const covariates = z
  .object({
    creatinineClearance: z
      .strictObject({
        equation: z.literal('cockcroft-gault'),
        weight: weightWord,
        ...guard,
        atMost: quantity('filtration').optional()
      })
      .optional(),
    estimatedGfr: z
      .strictObject({
        equation: z.enum([
          'ckd-epi-2021-creatinine',
          'ckd-epi-2021-creatinine-cystatin',
          'ckd-epi-2012-cystatin',
          'mdrd',
          'bedside-schwartz'
        ]),
        ...guard,
        atMost: quantity('indexedFiltration').optional()
      })
      .optional(),
    bodySurfaceArea: z.strictObject({ equation: z.enum(['mosteller', 'du-bois', 'haycock']).optional() }).optional(),
    leanWeight: z.strictObject({ equation: z.enum(['janmahasatian', 'james']).optional() }).optional()
  })
  .catchall(declared)

const pair = z.tuple([name, name])
const arrow = { from: name, to: name }
const transfer = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('first-order'), ...arrow, rate: name }),
  z.strictObject({ kind: z.literal('exchange'), between: pair, clearance: name.optional(), rates: pair.optional() }),
  z.strictObject({ kind: z.literal('clearance'), from: name, clearance: name }),
  z.strictObject({ kind: z.literal('elimination'), from: name, rate: name }),
  z.strictObject({ kind: z.literal('transit'), ...arrow, stages: z.int().min(1).max(100), rate: name }),
  z.strictObject({ kind: z.literal('effect'), ...arrow, rate: name }),
  z.strictObject({
    kind: z.literal('saturable'),
    from: name,
    to: name.optional(),
    maximumRate: name,
    halfSaturation: name,
    hill: z.union([z.number().gt(0), name]).optional()
  }),
  z.strictObject({
    kind: z.literal('binding'),
    drug: name,
    target: name,
    complex: name,
    association: name,
    dissociation: name,
    approximation: z.enum(['none', 'quasi-steady-state']).optional()
  }),
  z.strictObject({ kind: z.literal('production'), into: name, rate: name })
])

const route = z.strictObject({
  name,
  into: name.optional(),
  parts: z
    .array(
      z.strictObject({
        into: name,
        fraction: z.union([z.number().gt(0).max(1), name]),
        lag: name.optional(),
        over: name.optional()
      })
    )
    .min(1)
    .optional(),
  bioavailability: name.optional(),
  lag: name.optional(),
  input: z.enum(['infusion', 'bolus']).optional()
})

const check = z.strictObject({
  what: name,
  patient: checkedPerson.optional(),
  doses: z.array(dose).min(1).optional(),
  at: quantity('time', 'not negative').optional(),
  expected: quantityOfSomeKind(['h', 'mg/L']),
  relativeTolerance: z.number().gt(0).max(1),
  from: z.enum(['printed in the source', 'closed form', 'independent code'])
})

export const model = z.strictObject({
  $schema: z.string().optional(),
  format: z.literal('phasewise-model'),
  version: z.literal(1),
  id: name,
  title,
  drug,
  apparent: z.boolean().optional(),
  source,
  studied: z
    .strictObject({ subjects: z.int().min(1).optional(), description: prose, ranges: z.array(range).optional() })
    .optional(),
  valid: z.array(range).optional(),
  covariates: covariates.optional(),
  parameters: z.record(name, parameter),
  correlations: z.array(z.strictObject({ between: pair, value: z.number().min(-1).max(1) })).optional(),
  residual: z
    .strictObject({
      proportionalSd: z.number().min(0).optional(),
      additiveSd: quantity('concentration', 'not negative').optional()
    })
    .optional(),
  typicalUncertainty: z.strictObject({ relativeSe: z.record(name, z.number().min(0)) }).optional(),
  compartments: z.array(z.strictObject({ id: name, volume: name.optional(), observed: z.boolean().optional() })).min(1),
  transfers: z.array(transfer),
  observations: z.array(z.strictObject({ id: name, of: z.array(name).min(1) })).optional(),
  routes: z.array(route).min(1),
  checks: z.array(check).optional()
})

export type ModelFile = z.infer<typeof model>
export type DeclaredFile = z.infer<typeof declared>
export type ParameterFile = z.infer<typeof parameter>
export type FactorFile = z.infer<typeof factor>
export type RangeFile = z.infer<typeof range>
export type CheckFile = NonNullable<ModelFile['checks']>[number]
