import { readdirSync, readFileSync } from 'node:fs'
import type { PageView } from '../../src/report/page/page'
import { pageOf } from '../../src/report/page/pageOf'
import { readStudy } from '../../src/study/file/readStudy'
import type { StudyResult } from '../../src/study/result'
import { runStudy } from '../../src/study/run'

/** The worked studies that come with the program. */
export const STUDIES = readdirSync('models/studies').map((file) => file.replace(/\.json$/, ''))

export const DEMONSTRATION = 'choosing-the-interval'

export function studyBytes(id: string): Buffer {
  return readFileSync(`models/studies/${id}.json`)
}

/** A study computed by the same sources in Node, without worker or page. */
export function resultInNode(bytes: Uint8Array): StudyResult {
  const reading = readStudy(bytes, (id) => JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8')))
  if (!reading.ok) throw new Error(reading.issues.map(({ path, message }) => `${path}: ${message}`).join('\n'))
  const outcome = runStudy(reading.study)
  if (!outcome.ok) throw new Error(outcome.issues.map(({ path, message }) => `${path}: ${message}`).join('\n'))
  return outcome.result
}

export function pageInNode(id: string): PageView {
  return pageOf(resultInNode(studyBytes(id)), JSON.parse(studyBytes(id).toString()))
}
