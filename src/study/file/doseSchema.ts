import { z } from 'zod'
import { quantity } from './quantitySchema'
import { name, prose, share } from './textSchema'

export const weightWord = z.enum([
  'actual',
  'ideal',
  'adjusted',
  'lean',
  'actualIfBelowIdeal',
  'adjustedAbove120PercentIdeal'
])

const exception = z.strictObject({
  number: z.int().min(1),
  missed: z.boolean().optional(),
  lateBy: quantity('time', 'any').optional(),
  shiftsLater: z.boolean().optional(),
  amount: quantity('dose').optional(),
  over: quantity('time').optional(),
  stoppedAfter: quantity('time').optional(),
  fractionTaken: share.optional()
})

/** One line of a regimen: a dose, once or repeated. */
export const dose = z.strictObject({
  route: name,
  product: name.optional(),
  amount: quantity('dose').optional(),
  rate: quantity('doseRate').optional(),
  over: quantity('time').optional(),
  bolus: z.boolean().optional(),
  by: weightWord.optional(),
  atMost: quantity('amount').optional(),
  at: quantity('time', 'not negative'),
  every: quantity('time').optional(),
  count: z.int().min(1).optional(),
  exceptions: z.array(exception).optional(),
  reason: prose.optional()
})

export const regimen = z.strictObject({
  name,
  start: z.enum(['empty', 'steady-state']).optional(),
  doses: z.array(dose).min(1)
})

export type DoseFile = z.infer<typeof dose>
export type ExceptionFile = z.infer<typeof exception>
export type RegimenFile = z.infer<typeof regimen>
