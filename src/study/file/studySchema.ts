import { z } from 'zod'
import { clockTime, cohort, level, plan } from './cohortSchema'
import { regimen } from './doseSchema'
import { type ModelFile, modelSchema } from './modelSchema'
import { type OwnCovariates, patientSchema } from './patientSchema'
import { quantity, unitCode } from './quantitySchema'
import { target } from './targetSchema'
import { title } from './textSchema'

const display = z.strictObject({
  time: unitCode('time').optional(),
  concentration: unitCode('concentration').optional(),
  amount: unitCode('amount').optional(),
  unbound: z.boolean().optional()
})

/** A study file, given the names of its model's own covariates; the model is compared with its own schema. */
export function studySchema(own: OwnCovariates) {
  return studyWith(own, z.unknown())
}

/** The whole of a study file, the model in place included, as its JSON Schema shows it. */
export function wholeStudySchema() {
  return studyWith('any', z.union([z.string(), modelSchema('any')]))
}

function studyWith<M extends z.ZodType>(own: OwnCovariates, model: M) {
  return z.strictObject({
    $schema: z.string().optional(),
    format: z.literal('phasewise-study'),
    version: z.literal(1),
    title: title.optional(),
    model,
    patient: patientSchema(own),
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
}

/** A study file as it is written; nothing in it is converted. */
export type StudyFile = Omit<z.infer<ReturnType<typeof studySchema>>, 'model'> & { model: string | ModelFile }
