import type { Issue } from '../../pk/issue'
import type { ModelCheck } from '../modelCheck'
import { Problems } from '../problems'
import type { ResolvedModel } from '../resolveModel'
import { resolveStudy } from '../resolveStudy'
import type { Study } from '../study'
import { decode } from './decode'
import { readJson } from './json'
import { ownCovariates, readModelValue } from './readModel'
import { checkShape, type OwnCovariates } from './shape'
import { type StudyFile, study } from './studySchema'

export type StudyReading =
  | { readonly ok: true; readonly study: Study; readonly file: StudyFile }
  | { readonly ok: false; readonly issues: readonly Issue[] }

/**
 * Read a study file: UTF-8 JSON of at most 20 MB. `shippedModels` gives the content of a shipped model by its id.
 * Every problem of the file is listed at once, each with its path, what is wrong and what would be right. The file comes
 * back as it was, so that saving it loses nothing.
 */
export function readStudy(
  bytes: Uint8Array | string,
  shippedModels: (id: string) => unknown | undefined
): StudyReading {
  const decoded = decode(bytes)
  if (!decoded.ok) return { ok: false, issues: [{ path: '', message: decoded.message }] }
  const json = readJson(decoded.text)
  if (!('value' in json)) return { ok: false, issues: json.issues }
  const problems = new Problems()
  for (const { path, message } of json.issues) problems.add(path, message)
  const raw = json.value
  if (typeof raw !== 'object' || raw === null || Array.isArray(raw)) {
    problems.add('', 'a study is an object in braces')
    return { ok: false, issues: problems.issues }
  }
  if ('format' in raw && raw.format === 'phasewise-model') {
    const message =
      'format must be "phasewise-study"; this is a model file: put it whole under "model" in a study, or run check on it'
    problems.add('format', message)
    return { ok: false, issues: problems.issues }
  }
  const model = readModelOf(raw, shippedModels, problems)
  checkShape({ schema: study, raw, at: [], own: model.own, problems })
  const file = raw as StudyFile
  const resolved = resolveStudy(file, model.resolved, model.checks, problems)
  return resolved === undefined ? { ok: false, issues: problems.issues } : { ok: true, study: resolved, file }
}

interface ModelOfStudy {
  readonly own: OwnCovariates
  readonly resolved: ResolvedModel | undefined
  readonly checks: readonly ModelCheck[]
}

const NO_MODEL: ModelOfStudy = { own: 'any', resolved: undefined, checks: [] }

/** The model that a study names or holds. Its type is tested before its schema, so that no problem in it is hidden. */
function readModelOf(raw: object, shippedModels: (id: string) => unknown, problems: Problems): ModelOfStudy {
  const model = (raw as { model?: unknown }).model
  if (model === undefined) {
    problems.addMalformed(['model'], 'model is missing; give the id of a shipped model, or a whole model')
    return NO_MODEL
  }
  if (typeof model === 'object' && model !== null && !Array.isArray(model)) {
    const read = readModelValue(model, ['model'], problems)
    return { own: ownCovariates(model), resolved: read?.resolved, checks: read?.checks ?? [] }
  }
  if (typeof model !== 'string') {
    problems.addMalformed(
      ['model'],
      'model must be the id of a shipped model in double quotes, or a whole model in braces'
    )
    return NO_MODEL
  }
  const shipped = shippedModels(model)
  if (shipped === undefined) {
    problems.add('model', `no shipped model is called "${model}"; give the id of one, or put a whole model in place`)
    return NO_MODEL
  }
  const { read, issues } = readShipped(shipped)
  for (const issue of issues) {
    problems.add('model', `the shipped model "${model}" is not valid: ${issue.path}: ${issue.message}`)
  }
  return { own: ownCovariates(shipped), resolved: read?.resolved, checks: read?.checks ?? [] }
}

interface ShippedReading {
  readonly read: ReturnType<typeof readModelValue>
  readonly issues: readonly Issue[]
}

/** A shipped model does not change while the program runs, and reading it is a tenth of a redraw: it is read once. */
const SHIPPED = new WeakMap<object, ShippedReading>()

function readShipped(shipped: unknown): ShippedReading {
  const known = typeof shipped === 'object' && shipped !== null ? SHIPPED.get(shipped) : undefined
  if (known !== undefined) return known
  const problems = new Problems()
  const reading = { read: readModelValue(shipped, [], problems), issues: problems.issues }
  if (typeof shipped === 'object' && shipped !== null) SHIPPED.set(shipped, reading)
  return reading
}
