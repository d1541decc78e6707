import { z } from 'zod'
import { quantity, quantityOfSomeKind } from './quantitySchema'
import { name, share } from './textSchema'

const WHEN = /^(?:steady-state|throughout|from-now|every-interval|every-day|last-interval|day-[1-9][0-9]{0,5})$/

/** What a regimen should reach or stay under. Which limits a kind takes is checked later. */
export const target = z.strictObject({
  kind: z.enum([
    'window',
    'trough',
    'peak',
    'minimum',
    'average',
    'level',
    'auc24',
    'auc-interval',
    'time-above',
    'time-below'
  ]),
  when: z
    .string()
    .regex(
      WHEN,
      'must be one of "steady-state", "throughout", "from-now", "every-interval", "every-day", "last-interval", "day-N" with N from 1'
    )
    .optional(),
  role: z.enum(['efficacy', 'safety']).optional(),
  of: name.optional(),
  unbound: z.boolean().optional(),
  low: quantityOfSomeKind(['mg/L', 'mg.h/L'], 'not negative').optional(),
  high: quantityOfSomeKind(['mg/L', 'mg.h/L'], 'positive').optional(),
  perMic: z.boolean().optional(),
  timesMic: z.number().gt(0).optional(),
  share: share.optional(),
  after: quantity('time', 'not negative').optional(),
  from: z.enum(['dose start', 'dose end']).optional()
})

export type TargetFile = z.infer<typeof target>
