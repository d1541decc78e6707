import { z } from 'zod'
import { clockTime, cohort, level, plan } from './cohortSchema'
import { regimen } from './doseSchema'
import { type ModelFile, model } from './modelSchema'
import { patient } from './patientSchema'
import { quantity, unitCode } from './quantitySchema'
import { target } from './targetSchema'
import { title } from './textSchema'

const display = z.strictObject({
  time: unitCode('time').optional(),
  concentration: unitCode('concentration').optional(),
  amount: unitCode('amount').optional(),
  unbound: z.boolean().optional()
})

/** A study file; the model in it is compared with its own schema. */
export const study = z.strictObject({
  $schema: z.string().optional(),
  format: z.literal('phasewise-study'),
  version: z.literal(1),
  title: title.optional(),
  // Read on its own, with its own problems.
  model: z.unknown().optional(),
  patient,
  regimens: z.array(regimen).min(1),
  targets: z.array(target).optional(),
  mic: quantity('concentration').optional(),
  now: quantity('time', 'not negative').optional(),
  sampling: z.strictObject({
    until: quantity('time'),
    every: quantity('time'),
    also: z.array(quantity('time', 'not negative')).optional()
  }),
  clock: clockTime.optional(),
  display: display.optional(),
  acceptAssumed: z.boolean().optional(),
  cohort: cohort.optional(),
  plan: plan.optional(),
  levels: z.array(level).optional()
})

/** The whole of a study file, the model in place included, as its JSON Schema shows it. */
export const wholeStudy = study.extend({ model: z.union([z.string(), model]) })

/** A study file as it is written; nothing in it is converted. */
export type StudyFile = Omit<z.infer<typeof study>, 'model'> & { model: string | ModelFile }
