import { readStudy } from '../study/file/readStudy'
import type { StudyResult } from '../study/result'
import { runStudy } from '../study/run'
import type { Study } from '../study/study'
import { InputAtFault } from './failure'
import { readInput } from './input'
import { shippedModel } from './shippedModels'

/** The study in a file, checked. Throws `InputAtFault` with everything that is wrong. */
export function studyOf(bytes: Uint8Array): Study {
  const read = readStudy(bytes, shippedModel)
  if (!read.ok) throw new InputAtFault(read.issues)
  return read.study
}

/** The study in a file, run. Throws `InputAtFault` with everything that is wrong. */
export function resultOf(path: string): StudyResult {
  const outcome = runStudy(studyOf(readInput(path)))
  if (!outcome.ok) throw new InputAtFault(outcome.issues)
  return outcome.result
}
