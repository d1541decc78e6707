import type { Issue } from '../pk/issue'
import { CAUTION } from '../report/caution'
import { confirmationSentence } from '../report/confirmationText'
import { type CheckedValue, checkModel, failureInWords } from '../study/checkedModel'
import { type Confirmation, confirm, worstOf } from '../study/confirmation'
import { readModel } from '../study/file/readModel'
import { readStudy } from '../study/file/readStudy'
import { runStudy } from '../study/run'
import type { OutputOptions } from './emit'
import { InputAtFault, issueLine } from './failure'
import { readInput } from './input'
import { writeFiles, writeToStandardOutput } from './output'
import { shippedModel } from './shippedModels'

/** What was found in a file. */
interface Findings {
  readonly kind: 'study' | 'model'
  readonly problems: readonly Issue[]
  readonly checks: readonly CheckedValue[]
  /** The worst over the regimens; absent for a model file and where there are problems. */
  readonly witness?: Confirmation
  /** For a published model: whether a result that its source prints was reproduced. */
  readonly standing?: string
  readonly cautions: readonly string[]
}

/** `phasewise check FILE`: validate, run the model's own checks, compare the two methods. Exit status 1 for any failure. */
export function check(path: string, options: OutputOptions): void {
  const found = findingsOf(path)
  const failed = found.checks.filter(({ pass }) => !pass)
  const faults: Issue[] = [
    ...found.problems,
    ...failed.map((checked) => ({ path: checked.path, message: failureInWords(checked) }))
  ]
  const text = options.json || options.out?.endsWith('.json') ? documentText(found) : plainText(found)
  if (options.out !== undefined) writeFiles([{ path: options.out, chunks: [text] }])
  else if (options.json || faults.length === 0) writeToStandardOutput([text])
  if (faults.length > 0) throw new InputAtFault(faults)
}

/** A file that cannot be read is a problem like any other, so that a program that reads the document learns of it too. */
function findingsOf(path: string): Findings {
  try {
    const bytes = readInput(path)
    return isModelFile(bytes) ? checkModelFile(bytes) : checkStudyFile(bytes)
  } catch (error) {
    if (!(error instanceof InputAtFault)) throw error
    return { kind: 'study', problems: error.issues, checks: [], cautions: [] }
  }
}

/**
 * A file that says so, or that has compartments and no regimens, is read as a model; everything else as a study. The reader
 * then says what is missing.
 */
function isModelFile(bytes: Uint8Array): boolean {
  try {
    const raw: unknown = JSON.parse(new TextDecoder().decode(bytes))
    if (typeof raw !== 'object' || raw === null) return false
    if ('format' in raw && raw.format === 'phasewise-model') return true
    return 'compartments' in raw && !('regimens' in raw)
  } catch {
    return false
  }
}

function checkModelFile(bytes: Uint8Array): Findings {
  const read = readModel(bytes)
  if (!read.ok) return { kind: 'model', problems: read.issues, checks: [], cautions: [] }
  const { drugModel, checks } = read
  return {
    kind: 'model',
    problems: [],
    checks: checkModel(drugModel, checks),
    cautions: drugModel.source.cautions,
    ...(drugModel.source.kind === 'published' && {
      standing: checks.some(({ from }) => from === 'printed in the source')
        ? 'confirmed against a result printed in the source'
        : 'transcribed, not confirmed against a printed result'
    })
  }
}

function checkStudyFile(bytes: Uint8Array): Findings {
  const read = readStudy(bytes, shippedModel)
  if (!read.ok) return { kind: 'study', problems: read.issues, checks: [], cautions: [] }
  const { drugModel, modelChecks } = read.study
  const checks = checkModel(drugModel, modelChecks)
  const outcome = runStudy(read.study)
  if (!outcome.ok) {
    const failing = new Set(checks.filter(({ pass }) => !pass).map(({ path }) => path))
    // A failed check is listed once, as a check.
    return { kind: 'study', problems: outcome.issues.filter((issue) => !failing.has(issue.path)), checks, cautions: [] }
  }
  const worst = worstOf(confirm(outcome.result))
  return {
    kind: 'study',
    problems: [],
    checks,
    cautions: outcome.result.cautions,
    ...(worst === undefined ? {} : { witness: worst })
  }
}

function documentText(found: Findings): string {
  const document = {
    valid: found.problems.length === 0,
    problems: found.problems,
    checks: found.checks.map(({ what, expected, got, unit, pass, from, why }) => ({
      what,
      expected,
      got: got ?? null,
      unit,
      pass,
      from,
      ...(why === undefined ? {} : { why: { got: why } })
    })),
    witness:
      found.witness === undefined
        ? null
        : {
            largestRelativeDifference: found.witness.largestRelativeDifference,
            at_h: found.witness.at,
            regimen: found.witness.regimen,
            massBalance: found.witness.massBalance
          },
    standing: found.standing ?? null,
    cautions: found.cautions
  }
  return `${JSON.stringify(document, null, 2)}\n`
}

function plainText(found: Findings): string {
  const lines = [`The ${found.kind} file is ${found.problems.length === 0 ? 'valid' : 'not valid'}.`]
  lines.push(...found.problems.map(issueLine))
  for (const checked of found.checks) {
    const got = checked.got === undefined ? 'none' : `${checked.got} ${checked.unit}`
    lines.push(
      `${checked.pass ? 'passed' : 'FAILED'}  ${checked.what}: expected ${checked.expected} ${checked.unit} (${checked.from}), got ${got}`
    )
  }
  if (found.standing !== undefined) lines.push(`The model is ${found.standing}.`)
  if (found.witness !== undefined) lines.push(confirmationSentence([found.witness]))
  lines.push(...found.cautions.map((caution) => `Caution: ${caution}.`), CAUTION)
  return `${lines.join('\n')}\n`
}
