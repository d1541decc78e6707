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

const session = z.strictObject({
  at: quantity('time', 'not negative'),
  for: quantity('time'),
  clearance: quantity('clearance'),
  every: quantity('time').optional(),
  count: z.int().min(1).optional()
})

/** The person whom a model's check is about. */
export const checkedPerson = z.strictObject({ sex: z.enum(['female', 'male']).optional(), ...typed })

const change = z.strictObject({ at: quantity('time', 'not negative'), ...typed })

export const patient = checkedPerson.extend({
  changes: z.array(change).optional(),
  sessions: z.array(session).optional()
})

/** Beside their own keys these take the model's own covariates, whose values are checked against the model later. */
export const TAKING_OWN_COVARIATES: readonly unknown[] = [checkedPerson, change, patient]

export type PatientFile = z.infer<typeof patient>
export type PersonFile = z.infer<typeof checkedPerson>
export type ChangeFile = z.infer<typeof change>
