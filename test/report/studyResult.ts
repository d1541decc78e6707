import { readFileSync } from 'node:fs'
import { pageOf } from '../../src/report/page/pageOf'
import { readStudy } from '../../src/study/file/readStudy'
import type { StudyFile } from '../../src/study/file/studySchema'
import type { StudyResult } from '../../src/study/result'
import { runStudy } from '../../src/study/run'

interface Edited {
  patient: Record<string, unknown>
  display?: Record<string, unknown>
  regimens: { name: string; doses: Record<string, unknown>[] }[]
  targets?: Record<string, unknown>[]
  [key: string]: unknown
}

/** A worked study, edited, as the program reads it. */
export function editedStudy(id: string, edit: (study: Edited) => void = () => undefined): Edited {
  const study = JSON.parse(readFileSync(`models/studies/${id}.json`, 'utf8')) as Edited
  edit(study)
  return study
}

export function resultOf(study: Edited): StudyResult {
  const reading = readStudy(JSON.stringify(study), (id) => JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8')))
  if (!reading.ok) throw new Error(reading.issues.map(({ path, message }) => `${path}: ${message}`).join('\n'))
  const outcome = runStudy(reading.study)
  if (!outcome.ok) throw new Error(outcome.issues.map(({ path, message }) => `${path}: ${message}`).join('\n'))
  return outcome.result
}

export function pageOfStudy(study: Edited) {
  // What was read as a study file is one.
  return pageOf(resultOf(study), study as unknown as StudyFile)
}
