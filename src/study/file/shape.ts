import { z } from 'zod'
import type { Kind } from '../../units/unitTable'
import { likelyName, nearestName } from '../nearestName'
import { formatPath, type Step } from '../path'
import type { Problems } from '../problems'
import { type QuantityAsked, quantityProblem, unitProblem } from '../unitProblem'
import { TAKING_OWN_COVARIATES } from './patientSchema'

// A strict content security policy forbids the code that zod would otherwise compile.
z.config({ jitless: true })

/** Names of the covariates that the model declares; `any` where no model is at hand, and every unknown key passes for one. */
export type OwnCovariates = readonly string[] | 'any'

export interface ShapeCheck {
  readonly schema: z.ZodType
  readonly raw: unknown
  /** Where the value stands in its file. */
  readonly at: readonly Step[]
  readonly own: OwnCovariates
  readonly problems: Problems
}

/**
 * Compare a value with its schema and list every difference, each at its path.
 * The value itself is used afterwards, not a copy: no schema changes what it reads.
 */
export function checkShape({ schema, raw, at, own, problems }: ShapeCheck): void {
  const result = schema.safeParse(raw, { reportInput: true, error: (issue) => knownKeys(issue, own) })
  if (result.success) return
  for (const issue of result.error.issues) report(issue, at, problems)
}

const ANY = '*'

/** The keys that an object may have, one a line, as the message of an unknown key; other messages are written below. */
function knownKeys(issue: z.core.$ZodRawIssue, own: OwnCovariates): string | undefined {
  if (issue.code !== 'unrecognized_keys') return undefined
  const keys = issue.inst instanceof z.ZodObject ? Object.keys(issue.inst.shape) : []
  if (!TAKING_OWN_COVARIATES.includes(issue.inst)) return keys.join('\n')
  return own === 'any' ? ANY : [...keys, ...own].join('\n')
}

function report(issue: z.core.$ZodIssue, at: readonly Step[], problems: Problems): void {
  const steps = [...at, ...issue.path.map((step) => (typeof step === 'symbol' ? String(step) : step))]
  const branch = issue.code === 'invalid_union' ? likeliest(issue) : undefined
  if (branch !== undefined) {
    for (const inner of branch) report(inner, steps, problems)
  } else if (issue.code === 'unrecognized_keys') {
    const known = issue.message.split('\n')
    for (const key of issue.keys) {
      if (issue.message === ANY || known.includes(key)) continue
      const message = `unknown key "${key}"; the nearest known key is "${nearestName(key, known)}"`
      problems.add(formatPath([...steps, key]), message)
    }
  } else {
    problems.addMalformed(steps, messageOf(issue, nameOf(steps)))
  }
}

/** Of alternatives that all failed, the problems of the one that was meant: its type is right, and its `kind` is there. */
function likeliest(issue: z.core.$ZodIssueInvalidUnion): readonly z.core.$ZodIssue[] | undefined {
  return issue.errors.find((branch) =>
    branch.every((inner) => {
      const wrongType = inner.code === 'invalid_type' && inner.path.length === 0
      return !wrongType && !(inner.code === 'invalid_union' && kindOf(inner) === undefined)
    })
  )
}

/** What stands where a union looks for its kind. */
function kindOf({ input, discriminator }: z.core.$ZodIssueInvalidUnion): unknown {
  if (typeof input !== 'object' || input === null || discriminator === undefined) return undefined
  return (input as Record<string, unknown>)[discriminator]
}

/** What the value at a place is called in its own file: its key, or the key of the list it stands in. */
function nameOf(steps: readonly Step[]): string {
  const key = steps.findLast((step) => typeof step === 'string')
  if (key === undefined) return 'the file'
  return typeof steps.at(-1) === 'number' ? `each of ${key}` : String(key)
}

function messageOf(issue: z.core.$ZodIssue, name: string): string {
  const { input } = issue
  switch (issue.code) {
    case 'custom': {
      const asked = issue.params?.quantity as QuantityAsked | undefined
      if (asked !== undefined) return quantityProblem(input, name, asked) ?? issue.message
      const kind = issue.params?.unitOf as Kind | undefined
      if (kind !== undefined && typeof input === 'string') return unitProblem(input, kind) ?? issue.message
      return `${name} ${issue.message}`
    }
    case 'invalid_type':
      if (input === undefined) {
        return `${name} is missing; it must be ${EXPECTED[issue.expected] ?? issue.expected}${MISSING[name] ?? ''}`
      }
      return `${name} must be ${EXPECTED[issue.expected] ?? issue.expected}, got ${describe(input)}`
    case 'invalid_value':
      return oneOf(name, input, issue.values)
    case 'invalid_union':
      if (issue.discriminator === undefined) break
      return oneOf(name, kindOf(issue), (issue as { options?: unknown[] }).options ?? [])
    case 'too_small':
      if (issue.origin === 'array') return `${name} needs at least ${issue.minimum}, got ${lengthOf(input)}`
      if (issue.origin === 'string') return `${name} must not be empty`
      return `${name} must be ${issue.inclusive ? 'at least' : 'greater than'} ${issue.minimum}, got ${describe(input)}`
    case 'too_big':
      if (issue.origin === 'array') return `${name} must have at most ${issue.maximum}, got ${lengthOf(input)}`
      if (issue.origin === 'string') return `${name} must have at most ${issue.maximum} characters`
      return `${name} must be ${issue.inclusive ? 'at most' : 'less than'} ${issue.maximum}, got ${describe(input)}`
    case 'invalid_key':
      return `"${name}" cannot be a name: ${issue.issues.map((inner) => inner.message).join('; ')}`
  }
  return `${name} ${issue.message}`
}

const EXPECTED: Readonly<Record<string, string>> = {
  string: 'text in double quotes',
  number: 'a number',
  int: 'a whole number',
  boolean: 'true or false',
  object: 'an object in braces',
  record: 'an object in braces',
  array: 'a list in brackets',
  tuple: 'a list in brackets'
}

/** What is meant where a key is left out. */
const MISSING: Readonly<Record<string, string>> = {
  to: ' (for what leaves the body use a transfer of kind "elimination")'
}

function oneOf(name: string, input: unknown, values: readonly unknown[]): string {
  const listed = values.map((value) => JSON.stringify(value)).join(', ')
  const asked = values.length === 1 ? `must be ${listed}` : `must be one of ${listed}`
  if (input === undefined) return `${name} is missing; it ${asked}`
  const nearest = typeof input === 'string' && values.length > 1 ? likelyName(input, values.map(String)) : undefined
  const hint = nearest === undefined ? '' : `; the nearest is "${nearest}"`
  return `${name} ${asked}, got ${describe(input)}${hint}`
}

function describe(input: unknown): string {
  if (input === null) return 'null'
  if (Array.isArray(input)) return 'a list'
  if (typeof input === 'object') return 'an object'
  const text = JSON.stringify(input) ?? String(input)
  return text.length > 60 ? `${text.slice(0, 57)}...` : text
}

function lengthOf(input: unknown): number | string {
  return Array.isArray(input) ? input.length : describe(input)
}
