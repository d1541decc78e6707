import { z } from 'zod'
import { model } from './modelSchema'
import { TAKING_OWN_COVARIATES } from './patientSchema'
import { wholeStudy } from './studySchema'

/**
 * The JSON Schemas of both file formats by file name, for editors. They hold what a schema can say: keys, types, units
 * of each kind. What depends on other parts of a file is checked on reading only.
 */
export function jsonSchemas(): Readonly<Record<string, string>> {
  return {
    'model.schema.json': written('A Phasewise model file', model),
    'study.schema.json': written('A Phasewise study file', wholeStudy)
  }
}

function written(title: string, schema: z.ZodType): string {
  const generated = z.toJSONSchema(schema, {
    io: 'input',
    unrepresentable: 'any',
    target: 'draft-2020-12',
    override: ({ zodSchema, jsonSchema }) => {
      // The model's own covariates stand there too; a schema cannot know their names.
      if (TAKING_OWN_COVARIATES.includes(zodSchema)) jsonSchema.additionalProperties = {}
    }
  })
  const { $schema, ...rest } = generated
  return `${JSON.stringify({ $schema, title, ...rest }, null, 2)}\n`
}
