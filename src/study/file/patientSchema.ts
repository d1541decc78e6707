import { z } from 'zod'
import { quantity } from './quantitySchema'

/** What a patient may say of himself; the model's own covariates stand beside these. */
const typed = {
  age: quantity('age', 'not negative').optional(),
  gestationalAge: quantity('ageInWeeks').optional(),
  postnatalAge: quantity('age', 'not negative').optional(),
  postmenstrualAge: quantity('ageInWeeks').optional(),
  weight: quantity('bodyWeight').optional(),
  height: quantity('height').optional(),
  dosingWeight: quantity('bodyWeight').optional(),
  serumCreatinine: quantity('creatinine').optional(),
  cystatinC: quantity('cystatin').optional(),
  albumin: quantity('albumin').optional(),
  renalReplacement: z.enum(['none', 'intermittent', 'continuous']).optional(),
  bodyMassIndex: quantity('bodyMassIndex').optional(),
  bodySurfaceArea: quantity('surfaceArea').optional(),
  idealWeight: quantity('bodyWeight').optional(),
  adjustedWeight: quantity('bodyWeight').optional(),
  leanWeight: quantity('bodyWeight').optional(),
  creatinineClearance: quantity('filtration', 'not negative').optional(),
  estimatedGfr: quantity('indexedFiltration', 'not negative').optional(),
  absoluteGfr: quantity('filtration', 'not negative').optional()
}

const ownCovariate = z.unknown().optional()

const session = z.strictObject({
  at: quantity('time', 'not negative'),
  for: quantity('time'),
  clearance: quantity('clearance'),
  every: quantity('time').optional(),
  count: z.int().min(1).optional()
})

const person = { sex: z.enum(['female', 'male']).optional(), ...typed }
const change = { at: quantity('time', 'not negative'), ...typed }

/** Declared covariates of a model by name; `any` where no model is at hand, and every unknown key passes for one. */
export type OwnCovariates = readonly string[] | 'any'

/** A patient. The values of the model's own covariates are checked against the model later. */
export function patientSchema(own: OwnCovariates) {
  return withOwn(
    { ...person, changes: z.array(withOwn(change, own)).optional(), sessions: z.array(session).optional() },
    own
  )
}

/** The person whom a model's check is about. */
export function checkedPersonSchema(own: OwnCovariates) {
  return withOwn(person, own)
}

/** Strict but for the model's own covariates; the type leaves them out, code reads them by name. */
function withOwn<T extends z.ZodRawShape>(shape: T, own: OwnCovariates): z.ZodObject<T, z.core.$strict> {
  if (own === 'any') return z.object(shape).catchall(ownCovariate) as unknown as z.ZodObject<T, z.core.$strict>
  return z.strictObject({
    ...Object.fromEntries(own.map((key) => [key, ownCovariate])),
    ...shape
  }) as unknown as z.ZodObject<T, z.core.$strict>
}

export type PatientFile = z.infer<ReturnType<typeof patientSchema>>
export type PersonFile = z.infer<ReturnType<typeof checkedPersonSchema>>
export type ChangeFile = NonNullable<PatientFile['changes']>[number]
