import { z } from 'zod'
import type { Sign } from '../unitProblem'
import { quantity, quantityOfSomeKind } from './quantitySchema'
import { name, share } from './textSchema'

const ofCovariate = (sign?: Sign) => quantityOfSomeKind(['kg', 'mL/min'], sign)

const bounds = { low: ofCovariate().optional(), high: ofCovariate().optional() }

const distribution = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('log-normal'),
    median: ofCovariate('positive'),
    sd: z.number().min(0),
    ...bounds
  }),
  z.strictObject({
    kind: z.literal('normal'),
    mean: ofCovariate(),
    sd: ofCovariate('not negative'),
    ...bounds
  }),
  z.strictObject({ kind: z.literal('uniform'), low: ofCovariate(), high: ofCovariate() })
])

/** A distribution, or the share of each category. */
const drawnCovariate = z.union([distribution, z.record(name, z.number().min(0).max(1))])

const correlation = z.strictObject({ between: z.tuple([name, name]), value: z.number().gt(-1).lt(1) })

const people = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('copies') }),
  z.strictObject({
    kind: z.literal('drawn'),
    covariates: z.record(name, drawnCovariate),
    correlations: z.array(correlation).optional()
  }),
  z.strictObject({ kind: z.literal('rows'), file: name })
])

export const cohort = z.strictObject({
  size: z.int().min(1).max(1_000_000).optional(),
  seed: z.int().min(0).optional(),
  includeUncertainty: z.boolean().optional(),
  people: people.optional(),
  thresholds: z
    .array(z.strictObject({ value: quantity('concentration'), share }))
    .min(1)
    .optional()
})

const CLOCK_TIME = /^(?:[01][0-9]|2[0-3]):[0-5][0-9]$/
export const clockTime = z.string().regex(CLOCK_TIME, 'must be a time of day such as "21:15"')

export const plan = z.strictObject({
  routes: z.array(name).min(1).optional(),
  strengths: z.array(quantity('amount')).min(1).optional(),
  intervals: z.array(quantity('time')).min(1).optional(),
  over: z.array(quantity('time')).optional(),
  loading: z.literal('allowed').optional(),
  largestDose: quantity('amount').optional(),
  largestDaily: quantity('amount').optional(),
  largestRate: quantity('doseRate').optional(),
  clockTimes: z.array(clockTime).optional()
})

export const level = z.strictObject({
  at: quantity('time', 'not negative'),
  value: quantity('concentration', 'not negative'),
  regimen: name
})
