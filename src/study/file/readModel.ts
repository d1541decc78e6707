import type { DrugModel } from '../../patient/drugModel'
import type { Issue } from '../../pk/issue'
import type { ModelCheck } from '../modelCheck'
import type { Step } from '../path'
import { formatPath } from '../path'
import { Problems } from '../problems'
import { resolveChecks } from '../resolveChecks'
import { type ResolvedModel, resolveModel } from '../resolveModel'
import { decode } from './decode'
import { readJson } from './json'
import { type ModelFile, model } from './modelSchema'
import { checkShape } from './shape'

export type ModelReading =
  | {
      readonly ok: true
      readonly drugModel: DrugModel
      readonly checks: readonly ModelCheck[]
      readonly file: ModelFile
    }
  | { readonly ok: false; readonly issues: readonly Issue[] }

/**
 * Read a model file: UTF-8 JSON of at most 20 MB. Every problem of the file is listed at once, each with its path, what is
 * wrong and what would be right.
 */
export function readModel(bytes: Uint8Array | string): ModelReading {
  const decoded = decode(bytes)
  if (!decoded.ok) return { ok: false, issues: [{ path: '', message: decoded.message }] }
  const json = readJson(decoded.text)
  if (!('value' in json)) return { ok: false, issues: json.issues }
  const problems = new Problems()
  for (const { path, message } of json.issues) problems.add(path, message)
  const read = readModelValue(json.value, [], problems)
  if (problems.issues.length > 0 || read === undefined) return { ok: false, issues: problems.issues }
  return { ok: true, drugModel: read.resolved.drugModel, checks: read.checks, file: read.file }
}

/** A model from a value already read from JSON; undefined where its shape is past reading. All problems are listed. */
export function readModelValue(
  raw: unknown,
  at: readonly Step[],
  problems: Problems
): { readonly file: ModelFile; readonly resolved: ResolvedModel; readonly checks: readonly ModelCheck[] } | undefined {
  checkShape({ schema: model, raw, at, own: ownCovariates(raw), problems })
  const path = formatPath(at)
  if (!problems.isOpen(path)) return undefined
  const file = raw as ModelFile
  const resolved = resolveModel(file, path, problems)
  return { file, resolved, checks: resolveChecks(file, path, resolved) }
}

/** Names of the covariates that a model declares, as far as it can be read. */
export function ownCovariates(raw: unknown): string[] {
  const covariates = isObject(raw) ? raw.covariates : undefined
  return isObject(covariates) ? Object.keys(covariates) : []
}

function isObject(raw: unknown): raw is Record<string, unknown> {
  return typeof raw === 'object' && raw !== null && !Array.isArray(raw)
}
