import { z } from 'zod'
import { unitsOf } from '../../units/unitTable'
import { clockTime, cohort, level, plan } from './cohortSchema'
import { regimen } from './doseSchema'
import { type ModelFile, modelSchema } from './modelSchema'
import { type OwnCovariates, patientSchema } from './patientSchema'
import { quantity } from './quantitySchema'
import { target } from './targetSchema'
import { prose } from './textSchema'

const display = z.strictObject({
  time: z.enum(codes('time')).optional(),
  concentration: z.enum(codes('concentration')).optional(),
  amount: z.enum(codes('amount')).optional(),
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
    title: prose.optional(),
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

function codes(kind: 'time' | 'concentration' | 'amount'): [string, ...string[]] {
  const [first, ...others] = unitsOf(kind).map(({ code }) => code)
  if (first === undefined) throw new RangeError(`the kind ${kind} has no unit`)
  return [first, ...others]
}

/** A study file as it is written; nothing in it is converted. */
export type StudyFile = Omit<z.infer<ReturnType<typeof studySchema>>, 'model'> & { model: string | ModelFile }
